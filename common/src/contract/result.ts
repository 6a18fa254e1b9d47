/** What an evaluation says: the four constants with their uncertainty, budget, Monte Carlo check and findings. */
import { z } from 'zod';
import { basis, constantName, wave, type ConstantName } from './vocabulary';

export const severity = z.enum(['note', 'warn', 'stop']);
export type Severity = z.infer<typeof severity>;

/** Something a person must look at. `subject` names what it is about: a reading quantity, a channel, a constant, an instrument. */
export const finding = z.object({
  code: z.string(),
  severity,
  subject: z.string(),
  /** What was seen, with numbers and units. */
  seen: z.string(),
  /** Why it matters. */
  why: z.string(),
  /** What to do about it. */
  action: z.string(),
});
export type Finding = z.infer<typeof finding>;

export const evaluationType = z.enum(['A', 'B']);
export const distribution = z.enum(['normal', 't', 'rectangular', 'triangular', 'arcsine']);
export type Distribution = z.infer<typeof distribution>;

/** A measured quantity in SI. Degrees of freedom are null when infinite (JSON has no infinity). */
export const quantity = z.object({
  value: z.number(),
  standardUncertainty: z.number().nonnegative(),
  degreesOfFreedom: z.number().nullable(),
  unit: z.string(),
});
export type Quantity = z.infer<typeof quantity>;

export const interval = z.object({ low: z.number(), high: z.number() });

export const constantResult = z.object({
  value: z.number(),
  standardUncertainty: z.number().nonnegative(),
  expandedUncertainty: z.number().nonnegative(),
  coverageFactor: z.number().positive(),
  degreesOfFreedom: z.number().nullable(),
  /** Monte Carlo, shortest 95 %. */
  interval,
  unit: z.enum(['Pa', '1']),
  origin: z.enum(['measured', 'derived']),
});
export type ConstantResult = z.infer<typeof constantResult>;

/** One value for each constant; null where the run cannot determine it (no transverse channel, say). */
const perConstant = <T extends z.ZodType>(schema: T) => z.object({ E: schema, nu: schema, G: schema, K: schema });

export const budgetLine = z.object({
  /** Stable key of the input, e.g. `length.calibration`. */
  input: z.string(),
  label: z.string(),
  value: z.number(),
  unit: z.string(),
  standardUncertainty: z.number().nonnegative(),
  type: evaluationType,
  distribution,
  degreesOfFreedom: z.number().nullable(),
  /** Where the uncertainty comes from: a calibration certificate, the spread of n readings, a resolution. */
  source: z.string(),
  /** Partial derivative of each constant with respect to this input, SI. */
  sensitivity: perConstant(z.number().nullable()),
  /** Share of each constant's variance, percent; correlated inputs can make the column differ from 100. */
  contribution: perConstant(z.number().nullable()),
});
export type BudgetLine = z.infer<typeof budgetLine>;

/**
 * JCGM 101 clause 8: the interval y ± 1.96 u against trials with the same standard uncertainties. `trials` counts those behind the
 * stated intervals, in which inputs of few degrees of freedom are drawn from t.
 */
export const monteCarloCheck = z.object({
  trials: z.number().int().positive(),
  seed: z.number().int(),
  agrees: z.boolean(),
  comparison: perConstant(
    z.object({ lowDifference: z.number(), highDifference: z.number(), tolerance: z.number(), agrees: z.boolean() }).nullable(),
  ),
});
export type MonteCarloCheck = z.infer<typeof monteCarloCheck>;

export const elasticResult = z.object({
  basis,
  constants: perConstant(constantResult.nullable()),
  /** 4 × 4 in the order E, ν, G, K; null where a constant is missing. */
  correlation: z.array(z.array(z.number().nullable()).length(4)).length(4),
  budget: z.array(budgetLine),
  monteCarlo: monteCarloCheck,
  findings: z.array(finding),
});
export type ElasticResult = z.infer<typeof elasticResult>;

/** One arrival picked in one trace. Times in seconds from the trace's own zero. */
export const pick = z.object({
  trace: z.string(),
  wave,
  time: z.number(),
  standardUncertainty: z.number().nonnegative(),
  /** 0 (a guess) to 1 (a sharp onset far above the noise). */
  confidence: z.number().min(0).max(1),
  /** How it was found: an automatic picker's name, or `by hand`. */
  picker: z.string(),
  signalToNoise: z.number().nonnegative(),
});
export type Pick = z.infer<typeof pick>;

const waveEvaluation = z.object({
  transitTime: quantity,
  zeroTime: quantity,
  velocity: quantity,
  readings: z.array(z.number()),
});

export const pulseDetail = z.object({
  kind: z.literal('pulse'),
  length: quantity,
  density: quantity,
  P: waveEvaluation,
  S: waveEvaluation,
  velocityRatio: z.number(),
  /** Wavelength at the nominal frequency, m; null when the frequency was not given. */
  wavelength: z.object({ P: z.number(), S: z.number() }).nullable(),
  picks: z.array(pick),
});
export type PulseDetail = z.infer<typeof pulseDetail>;

const point = z.tuple([z.number(), z.number()]);
const line = z.object({
  slope: z.number(),
  intercept: z.number(),
  slopeUncertainty: z.number().nonnegative(),
  correlationCoefficient: z.number(),
  residualStandardDeviation: z.number().nonnegative(),
  points: z.number().int(),
  /** Lag-1 autocorrelation of the residuals. */
  lagOne: z.number(),
});

export const stressStrainDetail = z.object({
  kind: z.literal('stress-strain'),
  regionKind: z.enum(['automatic', 'chord between strains', 'chord between stresses', 'by hand']),
  /** Bounds of the region: axial strain (dimensionless), stress (Pa) and row numbers of the record. */
  window: z.object({
    strainFrom: z.number(), strainTo: z.number(), stressFrom: z.number(), stressTo: z.number(),
    rowFrom: z.number().int(), rowTo: z.number().int(),
  }),
  axial: line,
  /** Transverse strain against axial strain in the window; null without a transverse channel. ν is its slope with the sign reversed. */
  transverse: line.nullable(),
  /** Strain at which the fitted line meets zero stress; the toe correction to all strains. */
  toeStrain: z.number(),
  /** Bending of two opposed axial gauges at the window's top, percent; null with one gauge. */
  bending: z.number().nullable(),
  /** Cross-section from the readings; null where the file gives stress and the cross-section was not measured. */
  area: quantity.nullable(),
  compressive: z.boolean(),
  /** Drawn points, thinned: axial strain against stress over the whole record, and residual stress in the window. */
  curve: z.array(point),
  residuals: z.array(point),
  transverseCurve: z.array(point),
  /** E over alternative windows: [strain from, strain to, E], so that a person sees how much the choice matters. */
  alternatives: z.array(z.object({ strainFrom: z.number(), strainTo: z.number(), E: z.number(), quality: z.number() })),
});
export type StressStrainDetail = z.infer<typeof stressStrainDetail>;

export const fitResult = elasticResult.extend({
  detail: z.discriminatedUnion('kind', [pulseDetail, stressStrainDetail]),
});
export type FitResult = z.infer<typeof fitResult>;

export type PerConstant<T> = Record<ConstantName, T>;
export { constantName };
