/** From the analyst's setting to a fitted window of the loading branch. */
import type { Region } from '../contract/runs';
import { chord, passage } from './chord-fit';
import { LEAST_ROWS, leastResidualWindow } from './least-residual-window';
import { regression, type Branch, type RegionFit } from './line-fit';

export interface SelectedRegion {
  readonly fit: RegionFit;
  /** Automatic only: how far its tests had to be eased; 0 when none was. */
  readonly easing: number;
}

/** Why no window could be fitted, in words that complete "The window …". */
export interface RegionProblem {
  readonly problem: string;
}

/** First and last row whose strain lies within [from, to]; where noise passes an end several times, midway between the passages. */
function rowsBetween(x: Float64Array, from: number, to: number): { first: number; last: number } {
  const rounding = 1e-9 * (to - from);
  const lower = passage(x, from - rounding);
  const upper = passage(x, to + rounding);
  const beyond = x[upper.first]! < to + rounding;
  return { first: Math.ceil((lower.first + lower.last) / 2), last: beyond ? x.length - 1 : Math.floor((upper.first + upper.last) / 2) };
}

/** A file that counts compression negative may have its window typed so: both ends are taken as loading positive, lower end first. */
function ordered(from: number, to: number): [number, number] {
  const turn = from <= 0 && to <= 0 ? -1 : 1;
  return [Math.min(turn * from, turn * to), Math.max(turn * from, turn * to)];
}

function automatic(branch: Branch, rise: number): SelectedRegion | RegionProblem {
  const choice = leastResidualWindow(branch.x.subarray(rise), branch.y.subarray(rise));
  if (choice === null) return { problem: `cannot be found: no ${LEAST_ROWS} rows of the loading rise together` };
  return { fit: regression(branch, choice.window.from + rise, choice.window.to + rise), easing: choice.easing };
}

/** @param rise row of the branch after which loading goes on without rest */
export function selectRegion(branch: Branch, rise: number, region: Region): SelectedRegion | RegionProblem {
  if (region.by === 'automatic') return automatic(branch, rise);
  const [from, to] = ordered(region.from, region.to);
  if (!(from < to)) return { problem: 'is empty: both ends are the same' };
  if (region.by === 'by hand') {
    const { first, last } = rowsBetween(branch.x, from, to);
    if (last - first < 2) return { problem: `from strain ${from.toPrecision(4)} to ${to.toPrecision(4)} holds ${Math.max(0, last - first + 1)} rows of the loading branch; three are needed` };
    return { fit: regression(branch, first, last), easing: 0 };
  }
  const along = region.by === 'chord between strains' ? 'strain' : 'stress';
  const fit = chord(branch, { along, from, to });
  if (fit !== null) return { fit, easing: 0 };
  const values = along === 'strain' ? branch.x : branch.y;
  const unit = along === 'strain' ? '' : ' Pa';
  return { problem: `asks for ${along} ${from.toPrecision(4)} to ${to.toPrecision(4)}${unit}; the loading branch goes from ${values[0]!.toPrecision(4)} to ${values[values.length - 1]!.toPrecision(4)}${unit}, and a row must lie between` };
}
