/**
 * Static E, ν, G and K as terms of one measurement model.
 *
 * E = b·kF/(A·kx)·Lx/Lx₀ with b the slope of force on axial strain (of stress, where the file gives stress: then without A),
 * ν = −s·(kt/kx)·(Lx/Lx₀)/(Lt/Lt₀) with s the slope of transverse on axial strain, k the calibration factors, L the gauge lengths,
 * L₀ their nominal values. G = E/(2(1 + ν)), K = E/(3(1 − 2ν)). The two slopes are correlated as the residuals of their lines are.
 */
import type { ConstantName } from '../contract/vocabulary';
import { constantsOfEandNu } from '../elasticity/constants-of-terms';
import type { InstrumentState } from '../specimens/instrument-state';
import type { Model, Term } from '../uncertainty/model';
import { calibrationFactor, gaugeLengthRatio, resolutionTerm } from './instrument-terms';
import type { Line, RegionFit } from './line-fit';

/** One direction of strain as it was read. */
export interface StrainReading {
  readonly instrument: InstrumentState | null;
  /** m, where the channel is an extension; else null. */
  readonly gaugeLength: number | null;
  /** Steps seen in the record, dimensionless; 0 where none show. */
  readonly steps: number;
}

export interface StaticInput {
  readonly model: Model;
  readonly fit: RegionFit;
  /** A chord's uncertainty comes from its two ends, a regression's from all rows. */
  readonly chord: boolean;
  /** Half ranges of the slopes over narrowed windows, Pa and 1; zero where a method lays the window down. */
  readonly spread: { readonly E: number; readonly nu: number };
  /** m², where the file gives force; null where it gives stress. */
  readonly area: Term | null;
  readonly force: { readonly instrument: InstrumentState | null; /** Pa. */ readonly steps: number };
  readonly axial: StrainReading;
  readonly transverse: StrainReading | null;
}

interface FittedSlope {
  readonly fitted: Term;
  /** With the choice of window. */
  readonly slope: Term;
}

function slopeTerm(model: Model, key: string, name: string, unit: string, line: Line, scale: number, spread: number): FittedSlope {
  const fitted = model.input({
    key: `slope.${key}`, label: `Slope of ${name}`, unit, value: line.slope * scale, standardUncertainty: line.slopeUncertainty * scale, type: 'A', distribution: 't',
    degreesOfFreedom: line.degreesOfFreedom, source: `${line.points} rows, lag-1 correlation of residuals ${line.lagOne.toFixed(2)}`,
  });
  if (!(spread > 0)) return { fitted, slope: fitted };
  const choice = model.input({
    key: `window.${key}`, label: `Choice of window, slope of ${name}`, unit, value: 0, standardUncertainty: (spread * scale) / Math.sqrt(3), type: 'B',
    distribution: 'rectangular', degreesOfFreedom: Infinity, source: 'Half the range over windows narrowed by up to a quarter at either end, beyond noise, /√3',
  });
  return { fitted, slope: fitted.plus(choice) };
}

/**
 * Distance over which an error of one reading tilts the line: the chord's length/√2, or, for m independent errors evenly spread
 * over a regression's window, √m standard deviations of its strain. Rows within one step share their error.
 * @param rise of the channel over the window, in the unit of `step`
 */
function leverOf({ fit, chord }: StaticInput, step: number, rise: number): number {
  const span = fit.strainTo - fit.strainFrom;
  if (chord) return span / Math.SQRT2;
  const independent = Math.max(2, Math.min(fit.axial.points, step > 0 ? rise / step : Infinity));
  return (span / Math.sqrt(12)) * Math.sqrt(independent);
}

/** An error of readings, and the lever by which it tilts a slope. */
interface Tilt {
  readonly error: Term | null;
  readonly lever: number;
}

const tilted = (slope: Term, { error, lever }: Tilt, byUnit: number): Term => (error === null ? slope : slope.plus(error.times(byUnit / lever)));

function strainTilt(input: StaticInput, role: 'axial' | 'transverse', reading: StrainReading, rise: number): Tilt {
  const step = Math.max(reading.steps, (reading.instrument?.resolution ?? 0) / (reading.gaugeLength ?? 1));
  return { error: resolutionTerm(input.model, role, '1', step), lever: leverOf(input, step, rise) };
}

function forceTilt(input: StaticInput, unit: string, scale: number): Tilt {
  // A file of stress hides how force was read: its own steps are all there is.
  const step = Math.max(input.force.steps * scale, input.area === null ? 0 : (input.force.instrument?.resolution ?? 0));
  return { error: resolutionTerm(input.model, 'force', unit, step), lever: leverOf(input, step, (input.fit.stressTo - input.fit.stressFrom) * scale) };
}

function strainFactor(model: Model, role: 'axial' | 'transverse', { instrument, gaugeLength }: StrainReading, greatest: number): Term {
  return calibrationFactor(model, role, instrument, gaugeLength === null ? '1' : 'm', greatest * (gaugeLength ?? 1));
}

/** The constants; ν, G and K are null without a transverse channel. */
export function staticConstants(input: StaticInput): Record<ConstantName, Term | null> {
  const { model, fit, area, axial, transverse } = input;
  const scale = area?.value ?? 1;
  const unit = area === null ? 'Pa' : 'N';
  const rise = fit.strainTo - fit.strainFrom;

  const alongTilt = strainTilt(input, 'axial', axial, rise);
  const along = slopeTerm(model, 'axial', `${area === null ? 'stress' : 'force'} on axial strain`, unit, fit.axial, scale, input.spread.E);
  const slope = tilted(tilted(along.slope, forceTilt(input, unit, scale), 1), alongTilt, -along.fitted.value);
  const kF = calibrationFactor(model, 'force', input.force.instrument, unit, fit.stressTo * scale);
  const strain = strainFactor(model, 'axial', axial, fit.strainTo);
  const perStrain = axial.gaugeLength === null ? strain : strain.over(gaugeLengthRatio(model, 'axial', axial.gaugeLength));
  const overStrain = slope.times(kF).over(perStrain);
  const E = area === null ? overStrain : overStrain.over(area);
  if (fit.transverse === null || transverse === null) return constantsOfEandNu(E, null);

  const contraction = Math.abs(fit.transverse.slope) * rise;
  const across = slopeTerm(model, 'transverse', 'transverse on axial strain', '1', fit.transverse, 1, input.spread.nu);
  if (fit.slopesCorrelation !== 0) model.correlate(along.fitted, across.fitted, fit.slopesCorrelation);
  const ratio = tilted(tilted(across.slope, strainTilt(input, 'transverse', transverse, contraction), 1), alongTilt, -across.fitted.value);
  const width = strainFactor(model, 'transverse', transverse, contraction);
  const perWidth = transverse.gaugeLength === null ? width : width.over(gaugeLengthRatio(model, 'transverse', transverse.gaugeLength));
  return constantsOfEandNu(E, ratio.times(perWidth).over(perStrain).negated());
}
