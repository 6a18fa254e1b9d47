/**
 * The zero time of one wave: the delay of transducers, couplant and electronics. One input, common to all readings of the
 * wave: its uncertainty is never divided by √n. Ways to find it: transducers face to face; a reference bar of known transit
 * time, t₀ = t̄ − t_known; regression of transit time on length over several lengths, t = t₀ + L/v, t₀ the intercept.
 */
import type { ZeroTime } from '../contract/runs';
import type { Wave } from '../contract/vocabulary';
import { mean, standardDeviation } from '../statistics/descriptive';
import { leastSquares } from '../statistics/least-squares';
import type { InputSpec, Model, Term } from '../uncertainty/model';

/** A zero time of readings, typed or picked; `pickUncertainty` is that of one pick, null for typed times. */
function ofReadings(readings: readonly number[], resolution: number): Pick<InputSpec, 'value' | 'standardUncertainty' | 'type' | 'distribution' | 'degreesOfFreedom'> & { how: string } {
  const grain = resolution / Math.sqrt(12);
  if (readings.length < 2) return { value: readings[0] ?? Number.NaN, standardUncertainty: grain, type: 'B', distribution: 'rectangular', degreesOfFreedom: Infinity, how: 'one reading, resolution only' };
  const s = standardDeviation(readings) / Math.sqrt(readings.length);
  // Readings that all agree say no more than the resolution does.
  if (s < grain) return { value: mean(readings), standardUncertainty: grain, type: 'B', distribution: 'rectangular', degreesOfFreedom: Infinity, how: `${readings.length} readings, resolution` };
  return { value: mean(readings), standardUncertainty: s, type: 'A', distribution: 't', degreesOfFreedom: readings.length - 1, how: `s/√n of ${readings.length} readings` };
}

export function zeroTimeTerm(model: Model, wave: Wave, zero: ZeroTime, resolution: number): Term {
  const key = `zero.${wave}`;
  const label = `Zero time of ${wave}`;
  if (zero.by === 'several lengths') {
    const line = leastSquares(zero.points.map((p) => p.length), zero.points.map((p) => p.time));
    const u = Math.max(line.interceptUncertainty, resolution / Math.sqrt(12));
    return model.input({
      key, label, unit: 's', value: line.intercept, standardUncertainty: u, type: 'A', distribution: 't', degreesOfFreedom: line.degreesOfFreedom,
      source: `Intercept of ${zero.points.length} lengths`,
    });
  }
  const { how, ...figures } = ofReadings(zero.readings, resolution);
  const measured = model.input({ key, label, unit: 's', source: how, ...figures });
  if (zero.by === 'face to face') return measured;
  return measured.minus(model.input({
    key: `zero.${wave}.bar`, label: `Known time of the reference bar, ${wave}`, unit: 's', value: zero.knownTime, standardUncertainty: zero.knownTimeUncertainty,
    type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: 'Certificate of the reference bar',
  }));
}
