/**
 * The zero time of one wave: the delay of transducers, couplant and electronics. One term, common to all readings of the wave:
 * its uncertainty is never divided by their √n. Ways to find it: transducers face to face; a reference bar of known transit
 * time, t₀ = t̄ − t_known; regression of transit time on length over several lengths, t = t₀ + L/v, t₀ the intercept with the
 * uncertainty that its covariance with the slope gives it. What was read is kept apart from what is known, because the time
 * base calibrates only what was read.
 */
import type { ZeroTime } from '../contract/runs';
import type { Wave } from '../contract/vocabulary';
import { EvaluationRefused } from '../findings/evaluation-refused';
import { finding } from '../findings/findings';
import { leastSquares } from '../statistics/least-squares';
import type { Model, Term } from '../uncertainty/model';
import type { WaveArrivals } from './arrivals';
import { timeTerm } from './time-term';

/** t₀ = read − known. */
export interface ZeroTerms {
  readonly read: Term;
  readonly known: Term | null;
}

function ofSeveralLengths(model: Model, wave: Wave, points: readonly { length: number; time: number }[], resolution: number): Term {
  if (new Set(points.map((p) => p.length)).size < 2) throw new EvaluationRefused([finding('ZERO_LENGTHS_ALIKE', `zero time ${wave}`, `All ${points.length} lengths are equal`)]);
  const line = leastSquares(points.map((p) => p.length), points.map((p) => p.time));
  return model.input({
    key: `zero.${wave}`, label: `Zero time of ${wave}`, unit: 's', value: line.intercept,
    // Points that all agree say no more than the resolution does.
    standardUncertainty: Math.max(line.interceptUncertainty, resolution / Math.sqrt(12)),
    type: 'A', distribution: 't', degreesOfFreedom: line.degreesOfFreedom, source: `Intercept of ${points.length} lengths`,
  });
}

/**
 * @param zero as typed; null when it was not
 * @param picked from waveforms of the zero time: face to face, or through the bar when `zero` tells of one
 * @param resolution of typed times, s
 * @returns null when there is none
 * @throws EvaluationRefused when several lengths are all alike
 */
export function zeroTerms(model: Model, wave: Wave, zero: ZeroTime | null, picked: WaveArrivals, resolution: number): ZeroTerms | null {
  if (zero?.by === 'several lengths' && picked.times.length === 0) return { read: ofSeveralLengths(model, wave, zero.points, resolution), known: null };
  const isPicked = picked.times.length > 0;
  const typed = zero === null || zero.by === 'several lengths' ? [] : zero.readings;
  const values = isPicked ? picked.times : typed;
  if (values.length === 0) return null;
  const read = timeTerm(model, { key: `zero.${wave}`, label: `zero time of ${wave}`, values, resolution, picked: isPicked ? picked : null });
  const known = zero?.by === 'reference bar' ? model.input({
    key: `zero.${wave}.bar`, label: `Known time of the reference bar, ${wave}`, unit: 's', value: zero.knownTime, standardUncertainty: zero.knownTimeUncertainty,
    type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: 'Certificate of the reference bar',
  }) : null;
  return { read, known };
}
