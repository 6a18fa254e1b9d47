/** Plain questions about a row of samples. */
import { at } from './trace';

// Looked up once: under test runners the global object is slow, and these stand in the innermost loops.
const { abs, sign } = Math;

export interface Moments {
  readonly mean: number;
  readonly sd: number;
}

export function moments(x: Float64Array, from: number, to: number): Moments {
  let m = 0;
  for (let i = from; i < to; i += 1) m += at(x, i);
  m /= Math.max(to - from, 1);
  let squares = 0;
  for (let i = from; i < to; i += 1) squares += (at(x, i) - m) ** 2;
  return { mean: m, sd: Math.sqrt(squares / Math.max(to - from - 1, 1)) };
}

/** Smallest step between neighbouring samples that differ: the converter's resolution, or the noise's own grain. */
export function converterStep(x: Float64Array): number {
  let step = Infinity;
  for (let i = 1; i < x.length; i += 1) {
    const d = abs(at(x, i) - at(x, i - 1));
    if (d > 0 && d < step) step = d;
  }
  return Number.isFinite(step) ? step : 0;
}

/** The largest |x − mean| at or after `from`. */
export function largest(x: Float64Array, from: number, mean: number): { index: number; value: number } {
  let index = from;
  let value = 0;
  for (let i = from; i < x.length; i += 1) {
    const a = abs(at(x, i) - mean);
    if (a > value) [index, value] = [i, a];
  }
  return { index, value };
}

/** First index where |x − mean| exceeds a level, at or after `from`; −1 for none. */
export function firstAbove(x: Float64Array, from: number, mean: number, level: number): number {
  for (let i = from; i < x.length; i += 1) if (abs(at(x, i) - mean) > level) return i;
  return -1;
}

/** Index of the extremum of the first half cycle, at or after `from`, that exceeds a level; of the last one when none does. */
export function halfCycleAfter(x: Float64Array, from: number, mean: number, level: number): number {
  let peak = from;
  for (let i = from; i < x.length; i += 1) {
    const [v, top] = [at(x, i) - mean, at(x, peak) - mean];
    if (sign(v) !== sign(top)) {
      if (abs(top) > level) return peak;
      peak = i;
    } else if (abs(v) > abs(top)) peak = i;
  }
  return peak;
}

/**
 * Twice the mean distance of the next sign changes, samples; null when there are fewer than two. A sign counts only beyond
 * ±`least`, so that noise about zero adds no crossings.
 */
export function periodAfter(x: Float64Array, from: number, mean: number, least: number): number | null {
  const crossings: number[] = [];
  let side = sign(at(x, from) - mean);
  let last = from;
  for (let i = from + 1; i < x.length && crossings.length < 4; i += 1) {
    const v = at(x, i) - mean;
    if (!(abs(v) > least)) continue;
    if (sign(v) !== side) {
      crossings.push((last + i) / 2);
      side = sign(v);
    }
    last = i;
  }
  const [first, end] = [crossings[0], crossings[crossings.length - 1]];
  return first !== undefined && end !== undefined && crossings.length >= 2 ? (2 * (end - first)) / (crossings.length - 1) : null;
}

/**
 * Whether the record stays at its largest value longer than a sine of that height would at the converter's step: twice
 * period·√(2 step/height)/π samples, three at least.
 */
export function isClipped(x: Float64Array, mean: number, step: number, period: number): boolean {
  const top = largest(x, 0, mean).value;
  const natural = (period / Math.PI) * Math.sqrt((2 * step) / top);
  let row = 0;
  for (let i = 0; i < x.length; i += 1) {
    row = abs(abs(at(x, i) - mean) - top) < top * 1e-9 ? row + 1 : 0;
    if (row > Math.max(2, 2 * natural + 1)) return true;
  }
  return false;
}
