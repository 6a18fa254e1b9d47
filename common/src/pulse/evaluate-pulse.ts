/**
 * A pulse run: transit times, typed or picked, become velocities v = L/t, and with the density the four dynamic constants by
 * the bulk formulas. The length in the density and in both velocities is one term, the zero time one input for all readings
 * of its wave, the time base one for both waves. Measured: G = ρ v_S²; the others hang on v_P and v_S together.
 */
import type { Finding, FitResult, Pick, PulseDetail } from '../contract/result';
import type { PulseRecord, PulseSettings, ZeroTime } from '../contract/runs';
import type { MaterialClass, Shape, Wave } from '../contract/vocabulary';
import { constantsOfVelocities } from '../elasticity/constants-of-terms';
import { EvaluationRefused } from '../findings/evaluation-refused';
import { finding } from '../findings/findings';
import { calibrationFindings, calibrationInput, type InstrumentState } from '../specimens/instrument-state';
import { measureSpecimen, type ReadingState, type SpecimenMeasurement } from '../specimens/measure-specimen';
import { elasticResult } from '../uncertainty/elastic-result';
import { uncertaintyOf } from '../uncertainty/first-order';
import { Model, type Term } from '../uncertainty/model';
import { arrivalsOf, onsetUncertainty, shearGate, type WaveArrivals, type Waveform } from './arrivals';
import { transitTimeTerm } from './transit-time';
import { ratioFindings, wavelengthFindings, zeroAgeFindings } from './validity';
import { zeroTimeTerm } from './zero-time';

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
  readonly transit: Term;
  readonly zero: Term | null;
  readonly readings: readonly number[];
  readonly picks: readonly Pick[];
  readonly findings: readonly Finding[];
}

const ORIGIN = { E: 'derived', nu: 'derived', G: 'measured', K: 'derived' } as const;

function needed(term: Term | null, what: string): Term {
  if (term === null) throw new EvaluationRefused([finding('READINGS_MISSING', what, `The pulse run needs ${what}`)]);
  return term;
}

function zeroOf(input: PulseInput, wave: Wave): { zero: ZeroTime | null; pickedAlike: boolean; findings: Finding[] } {
  const picked = arrivalsOf(input.waveforms, wave === 'P' ? 'zero P' : 'zero S', wave, { ...input.settings, arrivals: [] }, 0);
  if (picked.times.length > 0) return { zero: { by: 'face to face', readings: picked.times }, pickedAlike: true, findings: picked.findings };
  const { zero } = input.record[wave];
  const missing = zero === null ? [finding('ZERO_TIME_MISSING', `zero time ${wave}`, `No zero time for ${wave}`)] : [];
  return { zero, pickedAlike: false, findings: missing };
}

function outcomeOf(model: Model, input: PulseInput, wave: Wave, arrivals: WaveArrivals, timeBase: Term | null): WaveOutcome {
  const typed = input.record[wave].readings;
  const isPicked = arrivals.times.length > 0;
  const readings = isPicked ? arrivals.times : typed;
  if (readings.length === 0) throw new EvaluationRefused([finding('ARRIVAL_MISSING', wave, `No transit time of ${wave}`)]);
  const { zero, pickedAlike, findings } = zeroOf(input, wave);
  const resolution = isPicked ? 0 : input.record.timeResolution;
  const zeroTerm = zero === null ? null : zeroTimeTerm(model, wave, zero, Math.max(resolution, arrivals.pickUncertainty * Math.sqrt(12) * (pickedAlike ? 1 : 0)));
  const transit = transitTimeTerm(model, {
    wave, readings, resolution, pickUncertainty: arrivals.pickUncertainty,
    commonPickUncertainty: isPicked ? onsetUncertainty(arrivals.period, pickedAlike) : 0,
  }, zeroTerm, timeBase);
  if (!(transit.value > 0)) throw new EvaluationRefused([finding('TRANSIT_TIME_NOT_POSITIVE', wave, `Transit time of ${wave} is ${(transit.value * 1e6).toFixed(3)} µs after the zero time`)]);
  const few = readings.length < 3 ? [finding('RECOUPLINGS_FEW', wave, `${readings.length} reading${readings.length === 1 ? '' : 's'} of ${wave}`)] : [];
  return { transit, zero: zeroTerm, readings, picks: arrivals.picks, findings: [...arrivals.findings, ...findings, ...few] };
}

/** The least dimension across the path, m. */
function lateralSize(measured: SpecimenMeasurement): number | null {
  const across = [measured.terms.diameter, measured.terms.width, measured.terms.thickness].flatMap((t) => (t === undefined ? [] : [t.value]));
  return across.length > 0 ? Math.min(...across) : null;
}

function instrumentFindings(input: PulseInput): Finding[] {
  if (input.timeInstrument === null) return [finding('INSTRUMENT_MISSING', 'time', 'The run names no instrument for the transit times')];
  return calibrationFindings(input.timeInstrument, input.performedAt);
}

/**
 * @returns the four dynamic constants with the run's detail and findings
 * @throws EvaluationRefused when a dimension, the mass or an arrival is missing, or nothing positive comes out
 */
export function evaluatePulse(input: PulseInput, onProgress: (fraction: number) => void = () => undefined): FitResult {
  const { record, settings, specimen } = input;
  const model = new Model();
  const measured = measureSpecimen(model, specimen.shape, specimen.materialClass, input.readings);
  const length = needed(measured.length, 'the length along the path');
  const density = needed(measured.density, 'the density (mass and all dimensions, or weighing in water)');
  const timeBase = input.timeInstrument === null ? null : calibrationInput(model, input.timeInstrument, 's');
  const base = timeBase?.relative === true ? timeBase.term : null;
  onProgress(0.1);
  const arrivalsP = arrivalsOf(input.waveforms, 'waveform P', 'P', settings, 0);
  const P = outcomeOf(model, input, 'P', arrivalsP, base);
  onProgress(0.25);
  const gate = shearGate(Math.min(...P.readings));
  const S = outcomeOf(model, input, 'S', arrivalsOf(input.waveforms, 'waveform S', 'S', settings, gate), base);
  onProgress(0.4);
  const [vP, vS] = [length.over(P.transit), length.over(S.transit)];
  const ratio = uncertaintyOf(vP.over(vS), '1');
  if (ratio.value <= 1) throw new EvaluationRefused(ratioFindings(ratio.value, ratio.standardUncertainty));
  const wavelength = record.frequency === null ? null : { P: vP.value / record.frequency, S: vS.value / record.frequency };
  const findings = [
    ...measured.findings, ...instrumentFindings(input), ...P.findings, ...S.findings, ...zeroAgeFindings(record, input.performedAt),
    ...ratioFindings(ratio.value, ratio.standardUncertainty),
    ...(wavelength === null ? [finding('FREQUENCY_MISSING', 'frequency', 'No nominal frequency')] : wavelengthFindings({ length: length.value, lateral: lateralSize(measured) }, wavelength.P, specimen.materialClass)),
  ];
  const result = elasticResult({
    basis: 'dynamic', constants: constantsOfVelocities(density, vP, vS), origin: ORIGIN, findings, seed: input.seed,
    onProgress: (fraction) => onProgress(0.4 + 0.6 * fraction),
  });
  const wave = (outcome: WaveOutcome, velocity: Term) => ({
    transitTime: uncertaintyOf(outcome.transit, 's'), zeroTime: uncertaintyOf(outcome.zero ?? model.constant(0), 's'), velocity: uncertaintyOf(velocity, 'm/s'), readings: [...outcome.readings],
  });
  const detail: PulseDetail = {
    kind: 'pulse', length: uncertaintyOf(length, 'm'), density: uncertaintyOf(density, 'kg/m³'), P: wave(P, vP), S: wave(S, vS),
    velocityRatio: ratio.value, wavelength, picks: [...P.picks, ...S.picks],
  };
  return { ...result, detail };
}
