/**
 * Finds the arrival in one trace. Two pickers look at the same window, from the gate to just after the first peak:
 * - AIC (Maeda 1985): AIC(k) = k ln var(x[0..k)) + (n − k − 1) ln var(x[k..n)), the pick its least, refined between samples
 *   by a parabola; a floor of q²/12 (q the converter's step) keeps ln 0 out of quantised silence;
 * - threshold: the first |x − x̄₀| > 5 s₀ of the noise before, interpolated between samples (common practice).
 * Their difference, the noise over the onset's slope, and the sampling make the uncertainty. A pick is never the global
 * maximum: for S the gate keeps the P wave, which always comes first, out of the window.
 */
export interface Trace {
  readonly name: string;
  /** s, evenly sampled. */
  readonly time: Float64Array;
  readonly amplitude: Float64Array;
}

export interface ArrivalPick {
  readonly time: number;
  readonly standardUncertainty: number;
  readonly confidence: number;
  readonly signalToNoise: number;
  readonly period: number;
  /** AIC minus threshold, s. */
  readonly pickerDifference: number;
  readonly samplesPerPeriod: number;
  readonly clipped: boolean;
  /** Steps of the converter within the first peak. */
  readonly steps: number;
}

export type Picker = 'AIC' | 'threshold';

/** Onset of a smooth burst that no picker sees, as a share of a period; cancelled where the zero time is picked alike. */
export const UNSEEN_ONSET = 0.05;

const at = (values: Float64Array, i: number): number => values[i] ?? Number.NaN;

function moments(x: Float64Array, from: number, to: number): { mean: number; sd: number } {
  let m = 0;
  for (let i = from; i < to; i += 1) m += at(x, i);
  m /= Math.max(to - from, 1);
  let squares = 0;
  for (let i = from; i < to; i += 1) squares += (at(x, i) - m) ** 2;
  return { mean: m, sd: Math.sqrt(squares / Math.max(to - from - 1, 1)) };
}

/** Smallest step between neighbouring samples that differ: the converter's resolution, or the noise's own grain. */
function converterStep(x: Float64Array): number {
  let step = Infinity;
  for (let i = 1; i < x.length; i += 1) {
    const d = Math.abs(at(x, i) - at(x, i - 1));
    if (d > 0 && d < step) step = d;
  }
  return Number.isFinite(step) ? step : 0;
}

function largest(x: Float64Array, from: number, mean: number): { index: number; value: number } {
  let index = from;
  let value = 0;
  for (let i = from; i < x.length; i += 1) {
    const a = Math.abs(at(x, i) - mean);
    if (a > value) {
      value = a;
      index = i;
    }
  }
  return { index, value };
}

/** First index where |x − mean| exceeds a level, at or after `from`; −1 for none. */
function crossing(x: Float64Array, from: number, mean: number, level: number): number {
  for (let i = from; i < x.length; i += 1) if (Math.abs(at(x, i) - mean) > level) return i;
  return -1;
}

/** The first local extremum of |x − mean| at or after `from` that reaches `least`. */
function firstPeak(x: Float64Array, from: number, mean: number, least: number): number {
  for (let i = Math.max(from, 1); i < x.length - 1; i += 1) {
    const a = Math.abs(at(x, i) - mean);
    if (a >= least && a >= Math.abs(at(x, i - 1) - mean) && a > Math.abs(at(x, i + 1) - mean)) return i;
  }
  return x.length - 1;
}

/** Mean distance of sign changes after the peak, doubled; falls back on four times the rise. */
function periodAfter(x: Float64Array, peak: number, onset: number, mean: number): number {
  const crossings: number[] = [];
  for (let i = peak + 1; i < x.length && crossings.length < 4; i += 1) {
    const [a, b] = [at(x, i - 1) - mean, at(x, i) - mean];
    if (a !== 0 && Math.sign(a) !== Math.sign(b)) crossings.push(i - 1 + a / (a - b));
  }
  const [first, last] = [crossings[0], crossings[crossings.length - 1]];
  if (first !== undefined && last !== undefined && crossings.length >= 2) return (2 * (last - first)) / (crossings.length - 1);
  return Math.max(4 * (peak - onset), 4);
}

function leastAIC(x: Float64Array, from: number, to: number, floor: number): number {
  const n = to - from;
  const sums = new Float64Array(n + 1);
  const squares = new Float64Array(n + 1);
  const reference = at(x, from);
  for (let i = 0; i < n; i += 1) {
    const v = at(x, from + i) - reference;
    sums[i + 1] = at(sums, i) + v;
    squares[i + 1] = at(squares, i) + v * v;
  }
  const variance = (a: number, b: number) => {
    const count = b - a;
    const m = (at(sums, b) - at(sums, a)) / count;
    return Math.max((at(squares, b) - at(squares, a)) / count - m * m, 0) + floor;
  };
  const aic = (k: number) => k * Math.log(variance(0, k)) + (n - k - 1) * Math.log(variance(k, n));
  let best = 3;
  for (let k = 3; k <= n - 3; k += 1) if (aic(k) < aic(best)) best = k;
  const [a, b, c] = [aic(best - 1), aic(best), aic(best + 1)];
  const bend = a - 2 * b + c;
  const shift = best > 3 && best < n - 3 && bend > 0 ? (0.5 * (a - c)) / bend : 0;
  return from + best + Math.min(0.5, Math.max(-0.5, shift));
}

/**
 * @param gate search from this time on, s; 0 for P
 * @returns null when nothing stands out of the noise
 */
export function pickArrival(trace: Trace, gate: number, picker: Picker): ArrivalPick | null {
  const { time, amplitude: x } = trace;
  const n = x.length;
  const interval = (at(time, n - 1) - at(time, 0)) / (n - 1);
  const start = Math.max(0, Math.ceil((gate - at(time, 0)) / interval));
  if (n - start < 40 || !(interval > 0)) return null;
  const rough = moments(x, start, Math.min(start + Math.max(10, Math.floor((n - start) * 0.05)), n));
  const top = largest(x, start, rough.mean);
  const strong = crossing(x, start, rough.mean, 0.3 * top.value);
  const quietEnd = start + Math.max(10, Math.floor((strong - start) * 0.7));
  const noise = moments(x, start, quietEnd);
  const step = converterStep(x);
  const sd = Math.max(noise.sd, step / Math.sqrt(12));
  if (!(top.value > 5 * sd)) return null;
  const peak = firstPeak(x, strong, noise.mean, 0.3 * top.value);
  const peakValue = Math.abs(at(x, peak) - noise.mean);
  const threshold = thresholdTime(x, quietEnd, noise.mean, 5 * sd);
  const aic = leastAIC(x, start, Math.min(peak + 2, n), (step * step) / 12 + 1e-300);
  const period = periodAfter(x, peak, aic, noise.mean);
  const signalToNoise = peakValue / sd;
  const difference = aic - threshold;
  const chosen = picker === 'AIC' ? aic : threshold;
  const noiseTerm = period / 4 / signalToNoise;
  const u = Math.sqrt(1 / 12 + noiseTerm ** 2 + difference ** 2 / 3);
  return {
    time: at(time, 0) + chosen * interval, standardUncertainty: u * interval, signalToNoise,
    confidence: confidenceOf(signalToNoise, Math.abs(difference) / period), period: period * interval, pickerDifference: difference * interval,
    samplesPerPeriod: period, clipped: isClipped(x, top.value, noise.mean), steps: step > 0 ? peakValue / step : Infinity,
  };
}

function thresholdTime(x: Float64Array, from: number, mean: number, level: number): number {
  const i = crossing(x, from, mean, level);
  if (i <= 0) return from;
  const [a, b] = [Math.abs(at(x, i - 1) - mean), Math.abs(at(x, i) - mean)];
  return b > a && a <= level ? i - 1 + (level - a) / (b - a) : i;
}

/** 1 at a ratio of 300 and above with pickers that agree; 0 at a ratio of 3 or pickers a quarter of a period apart. */
function confidenceOf(signalToNoise: number, differencePeriods: number): number {
  const clear = Math.min(1, Math.max(0, (Math.log10(signalToNoise) - 0.5) / 2));
  return clear * Math.max(0, 1 - differencePeriods / 0.25);
}

/** Three samples or more in a row at the largest value. */
function isClipped(x: Float64Array, top: number, mean: number): boolean {
  let row = 0;
  for (let i = 0; i < x.length; i += 1) {
    row = Math.abs(Math.abs(at(x, i) - mean) - top) < top * 1e-9 ? row + 1 : 0;
    if (row >= 3) return true;
  }
  return false;
}
