/** Arrivals of one wave from all its traces: set by hand where a person did, picked otherwise. */
import type { Finding, Pick } from '../contract/result';
import type { FilePurpose, PulseSettings } from '../contract/runs';
import type { Wave } from '../contract/vocabulary';
import { LEAST_VELOCITY_RATIO } from '../elasticity/relations';
import { EvaluationRefused } from '../findings/evaluation-refused';
import { finding } from '../findings/findings';
import { pickArrival, UNSEEN_ONSET, type ArrivalPick, type Trace } from './pick-arrival';
import { pickFindings } from './validity';

export interface Waveform {
  readonly purpose: FilePurpose;
  readonly traces: readonly Trace[];
}

export interface WaveArrivals {
  readonly picks: Pick[];
  readonly times: number[];
  /** Root mean square standard uncertainty of a pick, s. */
  readonly pickUncertainty: number;
  readonly period: number;
  readonly findings: Finding[];
}

const tracesOf = (waveforms: readonly Waveform[], purpose: FilePurpose): Trace[] => waveforms.filter((w) => w.purpose === purpose).flatMap((w) => w.traces);

function byHand(settings: PulseSettings, wave: Wave, trace: string): Pick | null {
  const set = settings.arrivals.find((a) => a.wave === wave && a.trace === trace);
  return set === undefined ? null : { trace, wave, time: set.time, standardUncertainty: 0, confidence: 1, picker: 'by hand', signalToNoise: 0 };
}

/** A time checked against the trace: increasing, and long enough to search. */
function checkTime(trace: Trace, subject: string): void {
  for (let i = 1; i < trace.time.length; i += 1) {
    if (!((trace.time[i] ?? Number.NaN) > (trace.time[i - 1] ?? Number.NaN))) {
      throw new EvaluationRefused([finding('TIME_NOT_MONOTONIC', subject, `${subject}: time does not increase at sample ${i + 1}`)]);
    }
  }
}

/**
 * @param gate the least possible arrival, s: 0 for P, 2/√3 times the P arrival for S
 * @throws EvaluationRefused when a trace shows no onset and nobody set it by hand
 */
export function arrivalsOf(waveforms: readonly Waveform[], purpose: FilePurpose, wave: Wave, settings: PulseSettings, gate: number): WaveArrivals {
  const picks: Pick[] = [];
  const findings: Finding[] = [];
  const periods: number[] = [];
  for (const trace of tracesOf(waveforms, purpose)) {
    const subject = `${purpose} · ${trace.name}`;
    checkTime(trace, subject);
    const automatic: ArrivalPick | null = pickArrival(trace, gate, settings.picker);
    if (automatic !== null) periods.push(automatic.period);
    const hand = purpose === `waveform ${wave}` ? byHand(settings, wave, trace.name) : null;
    if (hand !== null) {
      picks.push({ ...hand, standardUncertainty: automatic?.standardUncertainty ?? 0, signalToNoise: automatic?.signalToNoise ?? 0 });
      findings.push(finding('ARRIVAL_BY_HAND', subject, `${subject}: set at ${(hand.time * 1e6).toFixed(3)} µs`));
    } else if (automatic === null) {
      throw new EvaluationRefused([finding('ARRIVAL_NOT_FOUND', subject, `${subject}: nothing rises above five times the noise${gate > 0 ? ` after ${(gate * 1e6).toFixed(2)} µs` : ''}`)]);
    } else {
      picks.push({ trace: trace.name, wave, time: automatic.time, standardUncertainty: automatic.standardUncertainty, confidence: automatic.confidence, picker: settings.picker, signalToNoise: automatic.signalToNoise });
      findings.push(...pickFindings(subject, automatic));
    }
  }
  const squares = picks.reduce((sum, p) => sum + p.standardUncertainty ** 2, 0);
  return {
    picks, times: picks.map((p) => p.time), findings,
    pickUncertainty: picks.length > 0 ? Math.sqrt(squares / picks.length) : 0,
    period: periods.length > 0 ? periods.reduce((a, b) => a + b, 0) / periods.length : 0,
  };
}

/** S cannot come before 2/√3 of the P arrival, whatever the material. */
export function shearGate(firstP: number): number {
  return firstP * LEAST_VELOCITY_RATIO;
}

/** The onset that pickers miss: common to all picks of a wave, and gone where the zero time was picked alike. */
export function onsetUncertainty(period: number, zeroPickedAlike: boolean): number {
  return zeroPickedAlike ? (0.2 * UNSEEN_ONSET * period) / Math.sqrt(3) : (UNSEEN_ONSET * period) / Math.sqrt(3);
}
