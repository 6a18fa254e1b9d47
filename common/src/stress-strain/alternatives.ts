/** How much the choice of window matters: E over a coarse map of windows, and its spread when the chosen window is narrowed. */
import { momentsOf, residualSumOf, slopeOf } from './moments';
import { BlockMoments, stressKnots } from './least-residual-window';
import { regression, type Branch, type RegionFit } from './line-fit';

export interface Alternative {
  strainFrom: number;
  strainTo: number;
  E: number;
  /** q, residual standard deviation over the rise of the line. */
  quality: number;
}

const STEPS = 10;
const FEWEST_ROWS = 3;

/** E between every pair of eleven levels of stress of the rows `from` to the end; at most 55 windows. */
export function alternativeWindows(branch: Branch, from: number): Alternative[] {
  const x = branch.x.subarray(from);
  const y = branch.y.subarray(from);
  if (x.length < FEWEST_ROWS) return [];
  const blocks = new BlockMoments(x, y, evenly(stressKnots(y, y.length, STEPS)));
  const found: Alternative[] = [];
  for (let i = 0; i < blocks.knots.length - 1; i += 1) {
    for (let j = i + 1; j < blocks.knots.length; j += 1) {
      const m = blocks.between(i, j);
      if (m.n < FEWEST_ROWS || !(m.sxx > 0) || !(slopeOf(m) > 0)) continue;
      const [strainFrom, strainTo] = [x[blocks.knots[i]!]!, x[blocks.knots[j]! - 1]!];
      if (!(strainTo > strainFrom)) continue;
      found.push({ strainFrom, strainTo, E: slopeOf(m), quality: Math.sqrt(residualSumOf(m) / (m.n - 2)) / (slopeOf(m) * (strainTo - strainFrom)) });
    }
  }
  return found;
}

/** At most eleven knots, of a short branch too, whose knots are its rows. */
function evenly(knots: readonly number[]): number[] {
  const last = knots.length - 1;
  if (last <= STEPS) return [...knots];
  return Array.from({ length: STEPS + 1 }, (_, k) => knots[Math.round((k * last) / STEPS)]!);
}

export interface Spread {
  /** Half the range, Pa for E. */
  readonly E: number;
  readonly nu: number;
}

/**
 * Half the range of E and ν over the chosen window and the three that leave out a tenth of its rows at the lower end, the upper end
 * and both. Narrower windows are as acceptable as the chosen one; wider ones are not, since they may run into toe or yield.
 */
export function narrowedSpread(branch: Branch, fit: RegionFit): Spread {
  const tenth = Math.floor((fit.to - fit.from + 1) / 10);
  if (tenth < 1) return { E: 0, nu: 0 };
  const fits = [fit, regression(branch, fit.from + tenth, fit.to), regression(branch, fit.from, fit.to - tenth), regression(branch, fit.from + tenth, fit.to - tenth)];
  const half = (values: number[]) => (Math.max(...values) - Math.min(...values)) / 2;
  return { E: half(fits.map((f) => f.axial.slope)), nu: half(fits.map((f) => f.transverse?.slope ?? 0)) };
}

/** q of any rows of a branch. */
export function qualityOf(branch: Branch, from: number, to: number): number {
  const m = momentsOf(branch.x, branch.y, from, to + 1);
  return Math.sqrt(residualSumOf(m) / (m.n - 2)) / (slopeOf(m) * (branch.x[to]! - branch.x[from]!));
}
