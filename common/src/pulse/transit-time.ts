/**
 * The transit time of one wave from its readings: t = t̄ (1 + c) + δ − t₀. c calibrates the time base (relative, common to
 * both waves), δ is the resolution, the spread s/√n is type A with n − 1 degrees of freedom.
 */
import type { Wave } from '../contract/vocabulary';
import { mean, standardDeviation } from '../statistics/descriptive';
import type { Model, Term } from '../uncertainty/model';

export interface TimeReadings {
  readonly wave: Wave;
  /** s, as read; the zero time not yet taken off. */
  readonly readings: readonly number[];
  readonly resolution: number;
  /** Standard uncertainty that every pick has in common, s; 0 for typed times. */
  readonly commonPickUncertainty: number;
  /** Standard uncertainty of a single pick, s; 0 for typed times. */
  readonly pickUncertainty: number;
}

export function transitTimeTerm(model: Model, times: TimeReadings, zero: Term | null, timeBase: Term | null): Term {
  const { wave, readings, resolution } = times;
  const n = readings.length;
  let term = model.constant(mean(readings));
  if (timeBase !== null) term = term.times(timeBase.plus(1));
  if (n >= 2) {
    const s = Math.max(standardDeviation(readings), times.pickUncertainty);
    term = term.plus(model.input({
      key: `time.${wave}.spread`, label: `Spread of ${wave} readings`, unit: 's', value: 0, standardUncertainty: s / Math.sqrt(n),
      type: 'A', distribution: 't', degreesOfFreedom: n - 1, source: `s/√n of ${n} readings`,
    }));
  } else if (times.pickUncertainty > 0) {
    term = term.plus(model.input({
      key: `time.${wave}.pick`, label: `Pick of the ${wave} arrival`, unit: 's', value: 0, standardUncertainty: times.pickUncertainty,
      type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: 'Noise, rise time and sampling of one trace',
    }));
  }
  if (resolution > 0) {
    term = term.plus(model.input({
      key: `time.${wave}.resolution`, label: `Resolution of ${wave} times`, unit: 's', value: 0, standardUncertainty: resolution / Math.sqrt(12),
      type: 'B', distribution: 'rectangular', degreesOfFreedom: Infinity, source: `Resolution ${(resolution * 1e6).toPrecision(2)} µs, δ/√12`,
    }));
  }
  if (times.commonPickUncertainty > 0) {
    term = term.plus(model.input({
      key: `time.${wave}.onset`, label: `Onset of ${wave} not seen by the picker`, unit: 's', value: 0, standardUncertainty: times.commonPickUncertainty,
      type: 'B', distribution: 'rectangular', degreesOfFreedom: Infinity, source: 'Smooth onset, common to all picks',
    }));
  }
  return zero === null ? term : term.minus(zero);
}
