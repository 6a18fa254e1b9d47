/** One recorded trace and what its time column must be. */
import type { Finding } from '../contract/result';
import { EvaluationRefused } from '../findings/evaluation-refused';
import { finding } from '../findings/findings';

export interface Trace {
  readonly name: string;
  /** s, increasing. */
  readonly time: Float64Array;
  readonly amplitude: Float64Array;
}

/** The value at an index that exists. */
export const at = (values: Float64Array, i: number): number => values[i] ?? Number.NaN;

/** Time at a fractional sample number, s. */
export function timeAt({ time }: Trace, sample: number): number {
  const i = Math.min(Math.max(Math.floor(sample), 0), time.length - 2);
  return at(time, i) + (sample - i) * (at(time, i + 1) - at(time, i));
}

/** Mean sampling interval, s. */
export function samplingInterval({ time }: Trace): number {
  return (at(time, time.length - 1) - at(time, 0)) / (time.length - 1);
}

/**
 * Whether samples are missing: a step of time longer than one and a half intervals.
 * @throws EvaluationRefused where time does not increase, or there are fewer than two samples
 */
export function timeFindings(trace: Trace, subject: string): Finding[] {
  if (trace.time.length < 2) throw new EvaluationRefused([finding('ARRIVAL_NOT_FOUND', subject, `${subject}: ${trace.time.length} samples`)]);
  const interval = samplingInterval(trace);
  let gap = -1;
  for (let i = 1; i < trace.time.length; i += 1) {
    const step = at(trace.time, i) - at(trace.time, i - 1);
    if (!(step > 0)) throw new EvaluationRefused([finding('TIME_NOT_MONOTONIC', subject, `${subject}: time does not increase at sample ${i + 1}`)]);
    if (gap < 0 && step > 1.5 * interval) gap = i;
  }
  return gap < 0 ? [] : [finding('SAMPLES_MISSING', subject, `${subject}: a step of ${((at(trace.time, gap) - at(trace.time, gap - 1)) / interval).toFixed(1)} sampling intervals at sample ${gap + 1}`)];
}
