/**
 * A time as read, t̄, the mean of n typed or picked readings, as a term of the model. Its inputs: the spread s/√n, type A with
 * n − 1 degrees of freedom, or for picks that scatter no more than the noise of their traces explains, that noise /√n; the
 * resolution of typed times, δ/√12, taken as common to the readings; and what picks of one wave have in common, which no
 * number of traces averages out: the shape of the onset (one input for all times picked on the same transducers, so that most
 * of it cancels between specimen and zero time), a half cycle that noise may hide, a person's eye.
 */
import { mean, standardDeviation } from '../statistics/descriptive';
import type { Model, Term } from '../uncertainty/model';
import type { WaveArrivals } from './arrivals';
import { SHAPE } from './onset';

export interface TimeReadings {
  /** Stable, in front of the names of the inputs: `time.P`, `zero.S`. */
  readonly key: string;
  readonly label: string;
  /** s; at least one. */
  readonly values: readonly number[];
  /** Of typed times, s. */
  readonly resolution: number;
  /** Where the values were picked. */
  readonly picked: WaveArrivals | null;
}

/** A correction of nothing, known only to lie within ± its half-width. */
function within(model: Model, key: string, label: string, halfWidth: number, source: string): Term {
  return model.input({ key, label, unit: 's', value: 0, standardUncertainty: halfWidth / Math.sqrt(3), type: 'B', distribution: 'rectangular', degreesOfFreedom: Infinity, source });
}

/** Picks that scatter up to this many times the noise of their traces are explained by it: √ of the 95 % point of χ²/ν for five traces. */
const EXPLAINED = 1.5;

function scatter(model: Model, { key, label, values, picked }: TimeReadings): Term | null {
  const n = values.length;
  const one = picked?.pickUncertainty ?? 0;
  const s = n >= 2 ? standardDeviation(values) : 0;
  if (one > 0 && s <= EXPLAINED * one) {
    return model.input({
      key: `${key}.pick`, label: `Picks of ${label}`, unit: 's', value: 0, standardUncertainty: Math.max(s, one) / Math.sqrt(n),
      type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: `Noise and sampling of ${n} trace${n === 1 ? '' : 's'}, /√n`,
    });
  }
  if (n === 1) return null;
  return model.input({
    key: `${key}.spread`, label: `Spread of ${label}`, unit: 's', value: 0, standardUncertainty: s / Math.sqrt(n),
    type: 'A', distribution: 't', degreesOfFreedom: n - 1, source: `s/√n of ${n} readings`,
  });
}

function onsetShape(model: Model): Term {
  return model.input({
    key: 'onset', label: 'Shape of the onset', unit: '1', value: SHAPE.value, standardUncertainty: SHAPE.halfWidth / Math.sqrt(3),
    type: 'B', distribution: 'rectangular', degreesOfFreedom: Infinity, source: 'The onset grows as a power of time, 1.5 to 3.5',
  });
}

export function timeTerm(model: Model, readings: TimeReadings): Term {
  const { key, label, values, resolution, picked } = readings;
  const parts: Term[] = [];
  const spread = scatter(model, readings);
  if (spread !== null) parts.push(spread);
  if (picked === null && resolution > 0) parts.push(within(model, `${key}.resolution`, `Resolution of ${label}`, resolution / 2, `Resolution ${Number((resolution * 1e6).toPrecision(3))} µs, δ/√12`));
  if (picked !== null) {
    if (picked.latePerShape > 0) parts.push(onsetShape(model).minus(SHAPE.value).times(-picked.latePerShape));
    if (picked.hiddenHalfWidth > 0) parts.push(within(model, `${key}.hidden`, `Half cycle before ${label} hidden by noise`, picked.hiddenHalfWidth, 'First peak less than 25 times the noise: half a period'));
    if (picked.handHalfWidth > 0) parts.push(within(model, `${key}.hand`, `${label} set by hand`, picked.handHalfWidth, 'A tenth of a period (common practice)'));
  }
  return parts.reduce((sum, part) => sum.plus(part), model.constant(mean(values)));
}
