/**
 * The automatic slope window, "least-residual window": the part of a loading branch that a straight line describes best.
 *
 * 1. The branch is cut at its shear tangency, the last row where stress and strain, each scaled to 0…1 over the branch, differ by
 *    the greatest y − x within one hundredth; a branch that never bows upwards is kept whole.
 * 2. Windows start and end on knots: every row of a short branch, 120 equal steps of stress in a long one, so that rests and rows
 *    crowded past yield weigh nothing. Rows stay in the order recorded: sorting noisy strain would pick rows by their noise.
 * 3. A window counts when it holds a fifth of the knots and 8 rows, spans 40 % of the cut branch's stress, and the slopes of its first and
 *    last quarter lie within 5 % of its own slope b, two standard uncertainties of the quarter's slope allowed.
 * 4. Of those the least q = √(RSS/(n − 2))/(b·strain span) wins; of equal ones the one that spans most stress.
 * 5. The winner is trimmed: while leaving out a tenth at one end changes the slope by more than twice the standard uncertainty of that
 *    change, that tenth is left out. In a dense noisy record a little toe or yield hides in q, yet shifts the slope.
 * When no window passes, the quarter limit is widened to 10 % and 20 %, then the span lowered to 20 %, and the result says so.
 *
 * Own rule; it names and follows no standard. The spec beside it shows what steps 2 and 5 gain over least q alone.
 */
import { lagOne } from '../statistics/autocorrelation';
import { merged, momentsOf, residualSumOf, slopeOf, type Moments } from './moments';
import { aboutSmoothCurve } from './smooth-curve';

interface Window {
  /** First and last row of the branch arrays, both included. */
  readonly from: number;
  readonly to: number;
  readonly slope: number;
  /** q, dimensionless: residual standard deviation over the rise of the line. */
  readonly quality: number;
}

export interface WindowChoice {
  readonly window: Window;
  /** 0 when every test was passed; else which step of the easing found it. */
  readonly easing: number;
  /** Last row of the branch before the tangency cut. */
  readonly tangency: number;
}

interface Easing {
  readonly quarter: number;
  readonly span: number;
}

const EASINGS: readonly Easing[] = [
  { quarter: 0.05, span: 0.4 },
  { quarter: 0.1, span: 0.4 },
  { quarter: 0.2, span: 0.4 },
  { quarter: 0.2, span: 0.2 },
  { quarter: Infinity, span: 0.2 },
];

const MOST_KNOTS = 120;
export const LEAST_ROWS = 8;

/** Last row at which the sheared branch is within 1 % of its greatest height. */
export function shearTangency(x: Float64Array, y: Float64Array): number {
  const last = x.length - 1;
  const sheared = (i: number) => (y[i]! - y[0]!) / (y[last]! - y[0]!) - (x[i]! - x[0]!) / (x[last]! - x[0]!);
  let greatest = 0;
  for (let i = 0; i <= last; i += 1) greatest = Math.max(greatest, sheared(i));
  let row = last;
  while (row > 0 && sheared(row) < greatest - 0.01) row -= 1;
  return row;
}

/** Boundaries of blocks of rows, ascending from 0 to n: all rows of a short branch, else equal steps of stress. */
export function stressKnots(y: Float64Array, n: number, most = MOST_KNOTS): number[] {
  if (n <= most) return Array.from({ length: n + 1 }, (_, i) => i);
  const low = y[0]!;
  const high = y[n - 1]!;
  const level = (j: number) => low + ((high - low) * j) / most;
  // A noisy branch passes a level several times; the knot lies midway between its first and its last passage.
  const first = new Float64Array(most).fill(0);
  const last = new Float64Array(most).fill(n);
  for (let i = 0, j = 1; i < n && j < most; i += 1) while (j < most && y[i]! >= level(j)) first[j++] = i;
  for (let i = n - 1, j = most - 1; i >= 0 && j > 0; i -= 1) while (j > 0 && y[i]! < level(j)) last[j--] = i + 1;
  const knots = [0];
  for (let j = 1; j < most; j += 1) {
    const knot = Math.round((first[j]! + last[j]!) / 2);
    if (knot > knots.at(-1)! && knot < n) knots.push(knot);
  }
  return [...knots, n];
}

/** Moments of every run of blocks: `between(i, j)` of rows knots[i] to knots[j] − 1. */
export class BlockMoments {
  private readonly table: Moments[][];

  constructor(x: Float64Array, y: Float64Array, readonly knots: readonly number[]) {
    const blocks = knots.slice(1).map((to, i) => momentsOf(x, y, knots[i]!, to));
    this.table = blocks.map((block, i) => {
      const row = [block];
      for (let j = i + 1; j < blocks.length; j += 1) row.push(merged(row.at(-1)!, blocks[j]!));
      return row;
    });
  }

  between(i: number, j: number): Moments {
    return this.table[i]![j - 1 - i]!;
  }
}

interface Candidate {
  readonly i: number;
  readonly j: number;
  readonly span: number;
  readonly slope: number;
  readonly variance: number;
  readonly n: number;
  readonly quality: number;
}

/** Whether the slopes of first and last quarter agree with the whole within `limit`, their own noise allowed for. */
function quartersAgree(blocks: BlockMoments, i: number, j: number, slope: number, limit: number): boolean {
  const quarter = Math.max(2, Math.round((j - i) / 4));
  return [blocks.between(i, i + quarter), blocks.between(j - quarter, j)].every((m) => {
    if (m.n < 3 || m.sxx === 0) return true;
    const noise = Math.sqrt(residualSumOf(m) / (m.n - 2) / m.sxx);
    return Math.abs(slopeOf(m) - slope) <= limit * slope + 2 * noise;
  });
}

function candidates(x: Float64Array, y: Float64Array, blocks: BlockMoments, easing: Easing): Candidate[] {
  const { knots } = blocks;
  const count = knots.length - 1;
  const whole = y[knots[count]! - 1]! - y[0]!;
  const fewest = Math.max(4, Math.ceil(count / 5));
  const found: Candidate[] = [];
  for (let i = 0; i + fewest <= count; i += 1) {
    for (let j = i + fewest; j <= count; j += 1) {
      const m = blocks.between(i, j);
      if (m.n < LEAST_ROWS || m.sxx === 0) continue;
      const slope = slopeOf(m);
      const strain = x[knots[j]! - 1]! - x[knots[i]!]!;
      const span = slope * strain;
      if (!(slope > 0) || span < easing.span * whole) continue;
      if (!quartersAgree(blocks, i, j, slope, easing.quarter)) continue;
      const variance = residualSumOf(m) / (m.n - 2);
      found.push({ i, j, span, slope, variance, n: m.n, quality: Math.sqrt(variance) / span });
    }
  }
  return found;
}

/** Residuals below this share of the rise are rounding of the record itself. */
const ROUNDING = 1e-8;

function leastQuality(found: readonly Candidate[]): Candidate {
  const least = Math.max(ROUNDING, Math.min(...found.map((c) => c.quality)));
  return found.filter((c) => c.quality <= least).reduce((a, b) => (b.span > a.span ? b : a));
}

/**
 * Variance of the noise that counts for a slope: about a smooth curve, since toe and yield are what is looked for, and inflated by
 * (1 + r)/(1 − r) where neighbours, correlated by r, tell the same.
 */
function effectiveVariance(x: Float64Array, y: Float64Array, from: number, to: number): number {
  const { residuals, fitted } = aboutSmoothCurve(x.subarray(from, to), y.subarray(from, to));
  const r = Math.min(0.99, Math.max(0, lagOne(residuals)));
  const squares = residuals.reduce((sum, e) => sum + e * e, 0);
  return (squares / Math.max(1, residuals.length - fitted)) * ((1 + r) / (1 - r));
}

const TRIM = 2;

/** Step 5. The variance of the change of slope is that of the shorter window less that of the longer (both fit one line). */
function trimmed(x: Float64Array, y: Float64Array, blocks: BlockMoments, start: Candidate, leastSpan: number): { i: number; j: number } {
  const { knots } = blocks;
  const noise = effectiveVariance(x, y, knots[start.i]!, knots[start.j]!);
  const variance = Math.max(noise, (ROUNDING * start.span) ** 2);
  let chosen = { i: start.i, j: start.j };
  for (;;) {
    const whole = blocks.between(chosen.i, chosen.j);
    const step = Math.max(1, Math.round((chosen.j - chosen.i) / 10));
    let shorter: { i: number; j: number } | null = null;
    let greatest = TRIM;
    for (const end of [{ i: chosen.i + step, j: chosen.j }, { i: chosen.i, j: chosen.j - step }]) {
      const part = blocks.between(end.i, end.j);
      const span = slopeOf(part) * (x[knots[end.j]! - 1]! - x[knots[end.i]!]!);
      if (part.n < LEAST_ROWS || span < leastSpan) continue;
      const change = Math.abs(slopeOf(part) - slopeOf(whole)) / Math.sqrt(variance * (1 / part.sxx - 1 / whole.sxx));
      if (change > greatest) [greatest, shorter] = [change, end];
    }
    if (shorter === null) return chosen;
    chosen = shorter;
  }
}

/**
 * @param x strain and @param y stress (Pa) of one loading branch, in the order recorded
 * @returns null when no window of 8 rows rises at all
 */
export function leastResidualWindow(x: Float64Array, y: Float64Array): WindowChoice | null {
  const tangency = shearTangency(x, y);
  const rise = y[tangency]! - y[0]!;
  const blocks = new BlockMoments(x, y, stressKnots(y, tangency + 1));
  for (const [easing, limits] of EASINGS.entries()) {
    const found = candidates(x, y, blocks, limits);
    if (found.length === 0) continue;
    const { i, j } = trimmed(x, y, blocks, leastQuality(found), limits.span * rise);
    const m = blocks.between(i, j);
    const from = blocks.knots[i]!;
    const to = blocks.knots[j]! - 1;
    const quality = Math.sqrt(residualSumOf(m) / (m.n - 2)) / (slopeOf(m) * (x[to]! - x[from]!));
    return { window: { from, to, slope: slopeOf(m), quality }, easing, tangency };
  }
  return null;
}
