/**
 * A pulse run: transit times, typed or picked, become velocities v = L/t, and with the density the four dynamic constants by
 * the bulk formulas. The length in the density and in both velocities is one term, the zero time one input for all readings
 * of its wave, the time base one for both waves. Of the two independent constants that two velocities give, G = ρ v_S² is
 * measured by one wave alone; E, ν and K hang on both and are derived.
 */
import type { Finding, FitResult, PulseDetail } from '../contract/result';
import type { PulseRecord, PulseSettings } from '../contract/runs';
import type { ConstantName, MaterialClass, Shape, Wave } from '../contract/vocabulary';
import { constantsOfVelocities } from '../elasticity/constants-of-terms';
import { EvaluationRefused } from '../findings/evaluation-refused';
import { finding } from '../findings/findings';
import { calibrationFindings, calibrationInput, rangeFindings, type InstrumentState } from '../specimens/instrument-state';
import { measureSpecimen, type ReadingState, type SpecimenMeasurement } from '../specimens/measure-specimen';
import { elasticResult } from '../uncertainty/elastic-result';
import { uncertaintyOf } from '../uncertainty/first-order';
import { Model, type Term } from '../uncertainty/model';
import { arrivalsOf, shearGate, type WaveArrivals, type Waveform } from './arrivals';
import { timeTerm } from './time-term';
import { transitTime } from './transit-time';
import { ratioFindings, readingFindings, velocityFindings, wavelengthFindings, zeroFindings } from './validity';
import { zeroTerms } from './zero-time';

export interface PulseInput {
  readonly specimen: { readonly shape: Shape; readonly materialClass: MaterialClass };
  readonly readings: readonly ReadingState[];
  readonly record: PulseRecord;
  readonly settings: PulseSettings;
  /** ISO instant. */
  readonly performedAt: string;
  readonly timeInstrument: InstrumentState | null;
  readonly waveforms: readonly Waveform[];
  readonly seed: number;
}

interface WaveOutcome {
  readonly arrivals: WaveArrivals;
  readonly readings: readonly number[];
  readonly transit: Term;
  /** Null when the run has none. */
  readonly zero: Term | null;
  readonly findings: readonly Finding[];
}

const ORIGIN = { E: 'derived', nu: 'derived', G: 'measured', K: 'derived' } as const;

function needed(term: Term | null, measured: SpecimenMeasurement, what: string): Term {
  if (term !== null) return term;
  throw new EvaluationRefused([...measured.findings.filter((f) => f.severity === 'stop'), finding('READINGS_MISSING', what, `The pulse run needs ${what}`)]);
}

/** Readings of one wave, its zero time and what lies between. @param gateOf the least possible arrival when the zero time is known */
function outcomeOf(model: Model, input: PulseInput, wave: Wave, gateOf: (zero: number) => number): WaveOutcome {
  const { waveforms, settings, record, timeInstrument } = input;
  const { frequency, timeResolution: resolution } = record;
  const { zero: typedZero, readings: typed } = record[wave];
  const zeroPicked = arrivalsOf(waveforms, { purpose: `zero ${wave}`, wave, settings, frequency, gate: -Infinity });
  const zero = zeroTerms(model, wave, typedZero, zeroPicked, resolution);
  const zeroTerm = zero === null || zero.known === null ? (zero?.read ?? null) : zero.read.minus(zero.known);
  const arrivals = arrivalsOf(waveforms, { purpose: `waveform ${wave}`, wave, settings, frequency, gate: gateOf(zeroTerm?.value ?? 0) });
  const picked = arrivals.times.length > 0 ? arrivals : null;
  const values = picked?.times ?? typed;
  if (values.length === 0) throw new EvaluationRefused([finding('ARRIVAL_MISSING', wave, `No transit time of ${wave}`)]);
  const read = timeTerm(model, { key: `time.${wave}`, label: `${wave} times`, values, resolution, picked });
  const transit = transitTime(read, zero, timeInstrument === null ? null : calibrationInput(model, timeInstrument, 's'));
  if (!(transit.value > 0)) throw new EvaluationRefused([finding('TRANSIT_TIME_NOT_POSITIVE', wave, `Transit time of ${wave} is ${(transit.value * 1e6).toFixed(3)} µs after the zero time`)]);
  const outside = timeInstrument === null ? [] : rangeFindings(timeInstrument, values, (s) => `${Number((s * 1e6).toPrecision(5))} µs`);
  return { arrivals, readings: values, transit, zero: zeroTerm, findings: [...zeroPicked.findings, ...arrivals.findings, ...readingFindings(wave, values, frequency, resolution), ...outside] };
}

/** The least dimension across the path, m. */
function lateralSize({ terms }: SpecimenMeasurement): number | null {
  const across = [terms.diameter, terms.width, terms.thickness].flatMap((t) => (t === undefined ? [] : [t.value]));
  return across.length > 0 ? Math.min(...across) : null;
}

function instrumentFindings(input: PulseInput): Finding[] {
  if (input.timeInstrument === null) return [finding('INSTRUMENT_MISSING', 'time', 'The run names no instrument for the transit times')];
  return calibrationFindings(input.timeInstrument, input.performedAt);
}

export interface FittedPulse {
  readonly constants: Record<ConstantName, Term>;
  readonly detail: PulseDetail;
  readonly findings: readonly Finding[];
}

/**
 * The four dynamic constants as terms of one model, with the run's detail and findings; `evaluatePulse` adds budget and trials.
 * @throws EvaluationRefused when a dimension, the mass or an arrival is missing, or nothing positive comes out
 */
export function fitPulse(input: PulseInput, onProgress: (fraction: number) => void = () => undefined): FittedPulse {
  const { record, specimen } = input;
  const model = new Model();
  const measured = measureSpecimen(model, specimen.shape, specimen.materialClass, input.readings);
  const length = needed(measured.length, measured, 'the length along the path');
  const density = needed(measured.density, measured, 'the density (mass and all dimensions, or weighing in water)');
  const P = outcomeOf(model, input, 'P', () => -Infinity);
  onProgress(0.5);
  const S = outcomeOf(model, input, 'S', (zeroS) => shearGate(Math.min(...P.readings), P.zero?.value ?? 0, zeroS));
  const [vP, vS] = [length.over(P.transit), length.over(S.transit)];
  const ratio = uncertaintyOf(vP.over(vS), '1');
  // At a ratio of 1 the formulas of E and ν divide by zero; below it S would outrun P.
  if (!(ratio.value > 1)) throw new EvaluationRefused(ratioFindings(ratio.value, ratio.standardUncertainty));
  const wavelength = record.frequency === null ? null : { P: vP.value / record.frequency, S: vS.value / record.frequency };
  const findings = [
    ...measured.findings, ...instrumentFindings(input), ...P.findings, ...S.findings,
    ...zeroFindings(record, { P: P.zero?.value ?? null, S: S.zero?.value ?? null }, input.performedAt),
    ...ratioFindings(ratio.value, ratio.standardUncertainty), ...velocityFindings(vP.value, specimen.materialClass),
    ...(wavelength === null ? [finding('FREQUENCY_MISSING', 'frequency', 'No nominal frequency')] : wavelengthFindings({ length: length.value, lateral: lateralSize(measured) }, wavelength.P, specimen.materialClass)),
  ];
  const wave = (outcome: WaveOutcome, velocity: Term) => ({
    transitTime: uncertaintyOf(outcome.transit, 's'), zeroTime: uncertaintyOf(outcome.zero ?? model.constant(0), 's'), velocity: uncertaintyOf(velocity, 'm/s'), readings: [...outcome.readings],
  });
  const detail: PulseDetail = {
    kind: 'pulse', length: uncertaintyOf(length, 'm'), density: uncertaintyOf(density, 'kg/m³'), P: wave(P, vP), S: wave(S, vS),
    velocityRatio: ratio.value, wavelength, picks: [...P.arrivals.picks, ...S.arrivals.picks],
  };
  return { constants: constantsOfVelocities(density, vP, vS), detail, findings };
}

/** @throws EvaluationRefused as `fitPulse` does */
export function evaluatePulse(input: PulseInput, onProgress: (fraction: number) => void = () => undefined): FitResult {
  const { constants, detail, findings } = fitPulse(input, (fraction) => onProgress(0.3 * fraction));
  const result = elasticResult({ basis: 'dynamic', constants, origin: ORIGIN, findings, seed: input.seed, onProgress: (fraction) => onProgress(0.3 + 0.7 * fraction) });
  return { ...result, detail };
}
