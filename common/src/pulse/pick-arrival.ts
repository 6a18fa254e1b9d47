/**
 * Finds the arrival in one trace.
 *
 * First a trigger: of P, which is the first to arrive, the first |x − x̄₀| above six times the noise; of S, which P and its
 * coda precede, the first above three tenths of the largest amplitude after the gate. From there back to the onset:
 * - AIC (Maeda 1985) from the quiet part to just after the first peak: AIC(k) = k ln var(x[0..k)) + (n − k − 1) ln var(x[k..n)),
 *   the pick its least, refined between samples by a parabola. A floor of q²/12, q the converter's step, keeps ln 0 out of
 *   quantised silence. At the least, one more sample x costs x²/v₁ and gains ln(v₂/v₁): the picker sees the level √(v₁ ln(v₂/v₁)).
 * - threshold: the first crossing of five times the noise (common practice), interpolated between samples.
 * Neither sees the onset itself; `onset.ts` tells by how much they are late.
 */
import { converterStep, firstAbove, halfCycleAfter, isClipped, largest, moments, periodAfter, type Moments } from './samples';
import { lateness, latenessPerShape, SHAPE, type Rise } from './onset';
import { at, samplingInterval, timeAt, type Trace } from './trace';

export type Picker = 'AIC' | 'threshold';

export interface Search {
  /** No arrival before this time, s. */
  readonly gate: number;
  readonly picker: Picker;
  /** S: the dominant arrival after the gate, not the first. */
  readonly dominant: boolean;
}

export interface ArrivalPick {
  /** Best estimate of the onset, s: as the picker sees it, less its lateness for the middle shape of an onset. */
  readonly time: number;
  /** From noise and sampling, s; random from trace to trace. */
  readonly standardUncertainty: number;
  /** How much later a picker sees the onset for each unit of its shape, s: common to traces of the same transducers. */
  readonly latePerShape: number;
  readonly confidence: number;
  /** First peak over noise. */
  readonly signalToNoise: number;
  readonly period: number;
  /** AIC minus threshold, s. */
  readonly pickerDifference: number;
  readonly samplesPerPeriod: number;
  readonly clipped: boolean;
  /** Steps of the converter within the first peak. */
  readonly steps: number;
}

// Looked up once: under test runners the global object is slow, and these stand in the innermost loop.
const { log, max } = Math;

/** Fewer quiet samples before the onset tell nothing of the noise. */
const LEAST_QUIET = 8;
const TRIGGER = 6;
const THRESHOLD = 5;
/** Level on the rising flank from which the onset is extrapolated, as a share of the first peak. */
const FLANK = 0.4;
/** The same where the noise reaches up to there. */
const STEEP_FLANK = 0.9;
/** A pick rests on several samples about the onset: picks of synthetic pulses scatter by this share of one sample's noise over slope, 0.6 to 0.9. */
const AVERAGED = 0.75;
/** Periods of quiet before the onset that are looked at: longer, and drift counts as noise, or before S the coda of P. */
const QUIET_PERIODS = { first: 8, dominant: 2.5 } as const;

/** Where the wave is certainly there. The noise is measured anew up to 0.9 of each trigger until trigger and noise agree. */
function firstTrigger(x: Float64Array, start: number, floor: number): number {
  const { value } = largest(x, start, at(x, start));
  let end = start + 2 * LEAST_QUIET;
  let trigger = -1;
  for (let round = 0; round < 10; round += 1) {
    const noise = moments(x, start, end);
    const next = firstAbove(x, start, noise.mean, Math.max(TRIGGER * Math.max(noise.sd, floor), 0.01 * value));
    if (next === trigger || next < 0) return next;
    trigger = next;
    end = start + Math.max(LEAST_QUIET, Math.floor((trigger - start) * 0.9));
  }
  return trigger;
}

function dominantTrigger(x: Float64Array, start: number): number {
  const { mean } = moments(x, start, start + 2 * LEAST_QUIET);
  return firstAbove(x, start, mean, 0.3 * largest(x, start, mean).value);
}

/** @returns the least of AIC as a fractional sample, and the level that it sees; null when the window is too short */
function leastAIC(x: Float64Array, from: number, to: number, floor: number): { sample: number; level: number } | null {
  const n = to - from;
  if (n < 2 * LEAST_QUIET) return null;
  const sums = new Float64Array(n + 1);
  const squares = new Float64Array(n + 1);
  const reference = at(x, from);
  for (let i = 0; i < n; i += 1) {
    const v = at(x, from + i) - reference;
    sums[i + 1] = at(sums, i) + v;
    squares[i + 1] = at(squares, i) + v * v;
  }
  const least = floor ** 2 + Number.MIN_VALUE;
  const variance = (a: number, b: number) => {
    const m = (at(sums, b) - at(sums, a)) / (b - a);
    return max((at(squares, b) - at(squares, a)) / (b - a) - m * m, 0) + least;
  };
  const aic = (k: number) => k * log(variance(0, k)) + (n - k - 1) * log(variance(k, n));
  let best = 3;
  let lowest = aic(best);
  for (let k = 4; k <= n - 3; k += 1) {
    const value = aic(k);
    if (value < lowest) {
      best = k;
      lowest = value;
    }
  }
  const [a, c] = [aic(best - 1), aic(best + 1)];
  const bend = a - 2 * lowest + c;
  const shift = bend > 0 ? Math.min(0.5, Math.max(-0.5, (0.5 * (a - c)) / bend)) : 0;
  const [v1, v2] = [variance(0, best), variance(best, n)];
  return { sample: from + best + shift, level: Math.sqrt(v1 * Math.max(Math.log(v2 / v1), 1)) };
}

/** Fractional sample at which |x − mean| on the way up to the peak passes a level. */
function flankCrossing(x: Float64Array, peak: number, mean: number, level: number): number {
  let i = peak;
  while (i > 0 && Math.abs(at(x, i - 1) - mean) > level && Math.sign(at(x, i - 1) - mean) === Math.sign(at(x, peak) - mean)) i -= 1;
  if (i === 0) return 0;
  const sign = Math.sign(at(x, peak) - mean);
  const [below, above] = [sign * (at(x, i - 1) - mean), sign * (at(x, i) - mean)];
  return above > below ? i - 1 + (level - below) / (above - below) : i;
}

interface Onset {
  readonly aic: number;
  readonly aicLevel: number;
  readonly noise: Moments;
  readonly peak: number;
  readonly period: number;
}

/** From the trigger back to the onset: AIC up to the trigger's half cycle, then up to the first half cycle that it lays open. */
function onsetBefore(x: Float64Array, start: number, trigger: number, floor: number, quietPeriods: number): Onset | null {
  const rough = moments(x, start, trigger);
  let peak = halfCycleAfter(x, trigger, rough.mean, 0);
  const period = periodAfter(x, peak, rough.mean, 0.1 * Math.abs(at(x, peak) - rough.mean)) ?? 4 * Math.max(peak - trigger, 1);
  const back = Math.ceil(quietPeriods * period);
  let from = Math.max(start, trigger - back);
  let found: Onset | null = null;
  for (let round = 0; round < 2; round += 1) {
    const least = leastAIC(x, from, Math.min(peak + 2, x.length), floor);
    if (least === null || least.sample - start < LEAST_QUIET / 2) return null;
    const before = Math.floor(least.sample);
    const measured = moments(x, Math.max(start, before - back), before);
    const noise = { mean: measured.mean, sd: Math.max(measured.sd, floor) };
    peak = halfCycleAfter(x, before, noise.mean, THRESHOLD * noise.sd);
    found = { aic: least.sample, aicLevel: least.level, noise, peak, period };
    from = Math.max(start, before - back);
  }
  return found;
}

/** @returns null when nothing stands out of the noise, or too little quiet comes before it */
export function pickArrival(trace: Trace, { gate, picker, dominant }: Search): ArrivalPick | null {
  const x = trace.amplitude;
  const interval = samplingInterval(trace);
  const start = Math.max(0, Math.ceil((gate - at(trace.time, 0)) / interval));
  if (x.length - start < 5 * LEAST_QUIET) return null;
  const step = converterStep(x);
  const floor = step / Math.sqrt(12);
  const trigger = dominant ? dominantTrigger(x, start) : firstTrigger(x, start, floor);
  if (trigger - start < LEAST_QUIET) return null;
  const onset = onsetBefore(x, start, trigger, floor, dominant ? QUIET_PERIODS.dominant : QUIET_PERIODS.first);
  if (onset === null) return null;
  const { noise, peak, period } = onset;
  const height = Math.abs(at(x, peak) - noise.mean);
  if (!(height > THRESHOLD * noise.sd)) return null;
  const threshold = flankCrossing(x, peak, noise.mean, THRESHOLD * noise.sd);
  const [sample, level] = picker === 'AIC' ? [onset.aic, onset.aicLevel] : [threshold, THRESHOLD * noise.sd];
  const flank = height * (FLANK * height > 1.5 * level ? FLANK : STEEP_FLANK);
  const rise: Rise = { duration: Math.min(flankCrossing(x, peak, noise.mean, flank) - sample, period / 2), ratio: flank / level };
  const late = lateness(rise, SHAPE.value);
  // Noise over the slope at the pick, p·level/late, carried on by the extrapolation.
  const jitter = AVERAGED * ((noise.sd * late) / (SHAPE.value * level)) * (1 + late / Math.max(rise.duration, late, 1e-12));
  const signalToNoise = height / noise.sd;
  const difference = onset.aic - threshold;
  return {
    time: timeAt(trace, sample) - late * interval, standardUncertainty: Math.hypot(jitter, 1 / Math.sqrt(12)) * interval,
    latePerShape: latenessPerShape(rise) * interval, signalToNoise,
    confidence: confidenceOf(signalToNoise, Math.abs(difference) / period), period: period * interval, pickerDifference: difference * interval,
    samplesPerPeriod: period, clipped: isClipped(x, noise.mean, step, period), steps: step > 0 ? height / step : Infinity,
  };
}

/** 1 for a first peak of 200 times the noise and more with pickers that agree; 0 at 5 times, or pickers a quarter of a period apart. */
function confidenceOf(signalToNoise: number, differencePeriods: number): number {
  const clear = Math.min(1, Math.max(0, Math.log(signalToNoise / 5) / Math.log(200 / 5)));
  return clear * Math.max(0, 1 - differencePeriods / 0.25);
}
