/** Arrivals of one wave from all its traces: set by hand where a person did, picked otherwise. */
import type { Finding, Pick } from '../contract/result';
import type { FilePurpose, PulseSettings } from '../contract/runs';
import type { Wave } from '../contract/vocabulary';
import { LEAST_VELOCITY_RATIO } from '../elasticity/relations';
import { EvaluationRefused } from '../findings/evaluation-refused';
import { finding } from '../findings/findings';
import { pickArrival, type ArrivalPick } from './pick-arrival';
import { pickFindings } from './pick-findings';
import { samplingInterval, timeFindings, type Trace } from './trace';

export interface Waveform {
  readonly purpose: FilePurpose;
  readonly traces: readonly Trace[];
}

export interface WaveArrivals {
  readonly picks: readonly Pick[];
  /** s, as many as traces. */
  readonly times: readonly number[];
  /** Root mean square standard uncertainty of one pick, s: random from trace to trace. */
  readonly pickUncertainty: number;
  /** Means over the traces of what they have in common, s: see onset.ts, and the half-widths below. */
  readonly latePerShape: number;
  readonly hiddenHalfWidth: number;
  readonly handHalfWidth: number;
  readonly findings: readonly Finding[];
}

interface Arrival {
  readonly pick: Pick;
  readonly latePerShape: number;
  readonly hiddenHalfWidth: number;
  readonly handHalfWidth: number;
}

/** Below this ratio of first peak to noise the half cycle before it, five or six times smaller in a smooth burst, can hide. */
export const CLEAR_SIGNAL = 25;
/** How well a person sets an arrival, as a share of the period (common practice: about ten marks a period can be told apart). */
const HAND = 0.1;

const NONE: WaveArrivals = { picks: [], times: [], pickUncertainty: 0, latePerShape: 0, hiddenHalfWidth: 0, handHalfWidth: 0, findings: [] };
const meanOf = (values: readonly number[]): number => values.reduce((sum, v) => sum + v, 0) / values.length;

function automatic(trace: Trace, wave: Wave, picker: string, found: ArrivalPick): Arrival {
  return {
    pick: { trace: trace.name, wave, time: found.time, standardUncertainty: found.standardUncertainty, confidence: found.confidence, picker, signalToNoise: found.signalToNoise },
    latePerShape: found.latePerShape, hiddenHalfWidth: found.signalToNoise < CLEAR_SIGNAL ? found.period / 2 : 0, handHalfWidth: 0,
  };
}

function byHand(trace: Trace, wave: Wave, time: number, found: ArrivalPick | null, frequency: number | null): Arrival {
  const period = found?.period ?? (frequency === null ? 20 * samplingInterval(trace) : 1 / frequency);
  const standardUncertainty = found?.standardUncertainty ?? samplingInterval(trace) / Math.sqrt(12);
  return { pick: { trace: trace.name, wave, time, standardUncertainty, confidence: 1, picker: 'by hand', signalToNoise: found?.signalToNoise ?? 0 }, latePerShape: 0, hiddenHalfWidth: 0, handHalfWidth: HAND * period };
}

export interface ArrivalSearch {
  readonly purpose: FilePurpose;
  readonly wave: Wave;
  readonly settings: PulseSettings;
  /** Nominal, Hz. */
  readonly frequency: number | null;
  /** The least possible arrival, s; −Infinity where nothing limits it. */
  readonly gate: number;
}

/** @throws EvaluationRefused when a trace shows no onset and nobody set it by hand */
export function arrivalsOf(waveforms: readonly Waveform[], search: ArrivalSearch): WaveArrivals {
  const { purpose, wave, settings, gate } = search;
  const traces = waveforms.filter((w) => w.purpose === purpose).flatMap((w) => w.traces);
  // Arrivals are set by hand on the specimen's own traces, not on those of the zero time.
  const set = purpose === `waveform ${wave}` ? settings.arrivals.filter((a) => a.wave === wave) : [];
  for (const { trace } of set) {
    const count = traces.filter((t) => t.name === trace).length;
    if (count !== 1) throw new EvaluationRefused([finding('ARRIVAL_UNKNOWN_TRACE', trace, `${count === 0 ? 'No' : count} traces of ${wave} are called “${trace}”`)]);
  }
  if (traces.length === 0) return NONE;
  const findings: Finding[] = [];
  const arrivals = traces.map((trace): Arrival => {
    const subject = `${purpose} · ${trace.name}`;
    findings.push(...timeFindings(trace, subject));
    const found = pickArrival(trace, { gate, picker: settings.picker, dominant: wave === 'S' });
    const hand = set.find((a) => a.trace === trace.name);
    if (hand !== undefined) {
      findings.push(finding('ARRIVAL_BY_HAND', subject, `${subject}: set at ${(hand.time * 1e6).toFixed(3)} µs`));
      return byHand(trace, wave, hand.time, found, search.frequency);
    }
    if (found === null) throw new EvaluationRefused([finding('ARRIVAL_NOT_FOUND', subject, `${subject}: no onset stands five times out of the noise after eight quiet samples${gate > 0 ? ` from ${(gate * 1e6).toFixed(2)} µs on` : ''}`)]);
    findings.push(...pickFindings(subject, found));
    return automatic(trace, wave, settings.picker, found);
  });
  const picks = arrivals.map((a) => a.pick);
  return {
    picks, times: picks.map((p) => p.time), findings,
    pickUncertainty: Math.sqrt(meanOf(picks.map((p) => p.standardUncertainty ** 2))),
    latePerShape: meanOf(arrivals.map((a) => a.latePerShape)),
    hiddenHalfWidth: meanOf(arrivals.map((a) => a.hiddenHalfWidth)),
    handHalfWidth: meanOf(arrivals.map((a) => a.handHalfWidth)),
  };
}

/** S cannot arrive before 2/√3 times the transit time of P, whatever the material; times as read, zero times in s. */
export function shearGate(earliestP: number, zeroP: number, zeroS: number): number {
  return zeroS + LEAST_VELOCITY_RATIO * (earliestP - zeroP);
}
