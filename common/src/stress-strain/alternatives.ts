/** How much the choice of window matters: E over a coarse map of windows, and its spread when the chosen window is narrowed. */
import { momentsOf, residualSumOf, slopeOf } from './moments';
import { BlockMoments, stressKnots } from './least-residual-window';
import type { Branch, RegionFit } from './line-fit';

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

/**
 * Half the range of E and ν over the chosen window and the three that leave out a tenth of its rows at the lower end, the upper end
 * and both. Narrower windows are as acceptable as the chosen one; wider ones are not, since they may run into toe or yield.
 */
export function narrowedSpread(branch: Branch, { from, to, noise }: RegionFit): { readonly E: number; readonly nu: number } {
  const tenth = Math.floor((to - from + 1) / 10);
  const windows = [[from, to + 1], [from + tenth, to + 1], [from, to + 1 - tenth], [from + tenth, to + 1 - tenth]] as const;
  const slopes = (values: Float64Array) => windows.map(([first, end]) => {
    const m = momentsOf(branch.x, values, first, end);
    const attenuation = noise.attenuation > 0 ? noise.standardDeviation ** 2 / (m.sxx / (m.n - 1)) : 0;
    return slopeOf(m) / (1 - attenuation);
  });
  const half = (values: number[]) => (Math.max(...values) - Math.min(...values)) / 2;
  return tenth < 1 ? { E: 0, nu: 0 } : { E: half(slopes(branch.y)), nu: branch.t === null ? 0 : half(slopes(branch.t)) };
}
