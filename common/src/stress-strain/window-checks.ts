/** What a fitted window shows of itself: enough rows and range, straightness, scatter, bending. */
import type { Finding } from '../contract/result';
import type { MaterialClass } from '../contract/vocabulary';
import { finding } from '../findings/findings';
import { lagOne } from '../statistics/autocorrelation';
import { median } from '../statistics/descriptive';
import { leastSquares } from '../statistics/least-squares';
import type { StrainChannel } from './channels';
import type { Branch, RegionFit } from './line-fit';

const percent = (share: number, digits = 2): string => `${(100 * share).toPrecision(digits)} %`;

const FEW_POINTS = 10;
/** Share by which noise flattens the slopes, above which a person is told; below it they are corrected silently. */
const NOISY = 0.001;
const SHORT_RANGE = 0.2;
const LOW_CORRELATION = 0.995;

function extentFindings(branch: Branch, fit: RegionFit): Finding[] {
  const found: Finding[] = [];
  if (fit.axial.points < FEW_POINTS) found.push(finding('WINDOW_FEW_POINTS', 'axial', `${fit.axial.points} rows lie in the window`));
  const share = (fit.stressTo - fit.stressFrom) / (branch.y[branch.y.length - 1]! - branch.y[0]!);
  if (share < SHORT_RANGE) found.push(finding('WINDOW_SHORT_RANGE', 'axial', `The window covers ${percent(share)} of the loading branch's stress`));
  return found;
}

/** Slope of a quarter of the window relative to the whole, with the standard uncertainty that its scatter gives it. */
function quarterSlope(branch: Branch, fit: RegionFit, from: number, to: number): { ratio: number; u: number } | null {
  const x = branch.x.subarray(from, to);
  if (x.length < 3 || x.every((v) => v === x[0])) return null;
  const line = leastSquares(x, branch.y.subarray(from, to));
  return { ratio: line.slope / fit.axial.slope, u: line.slopeUncertainty / fit.axial.slope };
}

/** @param limit share of the slope by which an end quarter may fall short, two standard uncertainties allowed on top */
function curvatureFindings(branch: Branch, fit: RegionFit, limit: number): Finding[] {
  const quarter = Math.floor((fit.to - fit.from + 1) / 4);
  const lower = quarterSlope(branch, fit, fit.from, fit.from + quarter);
  const upper = quarterSlope(branch, fit, fit.to + 1 - quarter, fit.to + 1);
  const found: Finding[] = [];
  if (lower !== null && 1 - lower.ratio > limit + 2 * lower.u) found.push(finding('TOE_IN_WINDOW', 'axial', `The slope of the window's lower quarter is ${percent(lower.ratio, 3)} of the whole`));
  if (upper !== null && 1 - upper.ratio > limit + 2 * upper.u) found.push(finding('YIELD_IN_WINDOW', 'axial', `The slope of the window's upper quarter is ${percent(upper.ratio, 3)} of the whole`));
  return found;
}

const TREND_BLOCKS = 20;
const TREND_SHARE = 0.002;

/** Means of twenty blocks of residuals that follow one another and are no mere noise of the resolution. */
function trendFindings(fit: RegionFit): Finding[] {
  const { residuals } = fit.axial;
  const blocks = Math.min(TREND_BLOCKS, residuals.length);
  const means = Float64Array.from({ length: blocks }, (_, b) => {
    const part = residuals.subarray(Math.floor((b * residuals.length) / blocks), Math.floor(((b + 1) * residuals.length) / blocks));
    return part.reduce((sum, e) => sum + e, 0) / part.length;
  });
  const size = Math.sqrt(means.reduce((sum, e) => sum + e * e, 0) / blocks) / (fit.stressTo - fit.stressFrom);
  const r = lagOne(means);
  if (r <= 0.5 || size <= TREND_SHARE) return [];
  return [finding('RESIDUALS_TREND', 'axial', `Residuals averaged over twentieths of the window follow one another (correlation ${r.toFixed(2)}), ${percent(size)} of the window's stress`)];
}

const OUTLIER = 6;
const OUTLIER_SHARE = 0.005;

/** Rows whose residual is beyond six robust standard deviations (MAD/0.6745) and half a percent of the window's stress. */
function outlierFindings(fit: RegionFit, rows: Int32Array): Finding[] {
  const sizes = fit.axial.residuals.map(Math.abs);
  const limit = Math.max((OUTLIER * median(sizes)) / 0.6745, OUTLIER_SHARE * (fit.stressTo - fit.stressFrom));
  const far: number[] = [];
  sizes.forEach((size, i) => {
    if (size > limit) far.push(rows[fit.from + i]! + 1);
  });
  if (far.length === 0) return [];
  const named = far.slice(0, 5).join(', ') + (far.length > 5 ? ', …' : '');
  return [finding('OUTLIERS_IN_WINDOW', 'axial', `${far.length} of ${sizes.length} rows lie further than ${(limit / 1e6).toPrecision(3)} MPa from the line (row ${named})`)];
}

const FEW_STEPS = 50;

/** @param steps height of the channel's steps in the window, 0 where none show; @param range its range there */
export function stepFindings(subject: string, steps: number, range: number): Finding[] {
  if (!(steps > 0) || range / steps >= FEW_STEPS) return [];
  return [finding('RECORD_QUANTISED', subject, `The ${subject} crosses the window in ${Math.round(range / steps)} steps`)];
}

const BENDING_LIMIT: Readonly<Partial<Record<MaterialClass, number>>> = { concrete: 20, rock: 20 };
const USUAL_BENDING_LIMIT = 10;

/** Bending of two opposed gauges at a row, |ε₁ − ε₂|/(ε₁ + ε₂)·100 counted from the branch's first row; null with one gauge. */
export function bendingPercent(channel: StrainChannel, first: number, row: number): number | null {
  if (channel.pair === null) return null;
  const [one, two] = channel.pair.map((values) => values[row]! - values[first]!);
  return (100 * Math.abs(one! - two!)) / Math.abs(one! + two!);
}

/** Gauges of concrete and rock may differ from their mean by 20 % (EN 12390-13, from memory), others by 10 % (common practice). */
export function bendingFindings(bending: number | null, materialClass: MaterialClass): Finding[] {
  const limit = BENDING_LIMIT[materialClass] ?? USUAL_BENDING_LIMIT;
  return bending === null || bending <= limit ? [] : [finding('GAUGES_DISAGREE', 'axial', `At the top of the window the opposed gauges differ from their mean by ${bending.toFixed(1)} %; up to ${limit} % is usual`)];
}

const CURVATURE = 0.05;
/** A chord's window is laid down by its method, and curves with the material; only a gross toe or yield is worth a word. */
const CURVATURE_OF_CHORD = 0.2;

/**
 * @param chord whether a method lays the window down
 * @param rows file row of each row of the branch
 */
export function windowFindings(branch: Branch, fit: RegionFit, chord: boolean, rows: Int32Array): Finding[] {
  const found = curvatureFindings(branch, fit, chord ? CURVATURE_OF_CHORD : CURVATURE);
  if (fit.axial.correlationCoefficient < LOW_CORRELATION) found.push(finding('LOW_CORRELATION', 'axial', `r = ${fit.axial.correlationCoefficient.toFixed(4)}`));
  if (fit.noise.attenuation > NOISY) found.push(finding('RECORD_NOISY', 'axial strain', `Noise of ${(1e6 * fit.noise.standardDeviation).toPrecision(2)} µε flattens the slopes by ${percent(fit.noise.attenuation)}; they are corrected for it`));
  if (chord) return found;
  return [...extentFindings(branch, fit), ...found, ...trendFindings(fit), ...outlierFindings(fit, rows)];
}
