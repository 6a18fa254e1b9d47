/** How much the choice of window matters: E over a coarse map of windows, and its spread when the chosen window is narrowed. */
import { momentsOf, residualSumOf, slopeOf, type Moments } from './moments';
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

/** Shares of the window's rows left out at the lower and at the upper end. */
const NARROWED = [[0.1, 0], [0, 0.1], [0.1, 0.1], [0.25, 0], [0, 0.25], [0.25, 0.25]] as const;

/**
 * Half the range of a slope over the chosen window and narrower ones, as far as it goes beyond noise. Narrower windows are as acceptable
 * as the chosen one; wider ones are not, since they may run into toe or yield. Of the change d of the slope, noise explains
 * u²(Sxx/Sxx′ − 1), the variance that the shorter window adds (both fit one line); d is shrunk to √(d² − that).
 */
function spreadOf(x: Float64Array, y: Float64Array, fit: RegionFit, u: number): number {
  const rows = fit.to - fit.from + 1;
  const whole = momentsOf(x, y, fit.from, fit.to + 1);
  const attenuationOf = (m: Moments) => (fit.noise.attenuation > 0 ? fit.noise.standardDeviation ** 2 / (m.sxx / (m.n - 1)) : 0);
  const slope = (m: Moments) => slopeOf(m) / (1 - attenuationOf(m));
  let [low, high] = [0, 0];
  for (const [below, above] of NARROWED) {
    const [first, end] = [fit.from + Math.floor(below * rows), fit.to + 1 - Math.floor(above * rows)];
    if (end - first < FEWEST_ROWS || end - first === rows) continue;
    const m = momentsOf(x, y, first, end);
    const change = slope(m) - slope(whole);
    const beyondNoise = Math.sign(change) * Math.sqrt(Math.max(0, change ** 2 - u ** 2 * (whole.sxx / m.sxx - 1)));
    low = Math.min(low, beyondNoise);
    high = Math.max(high, beyondNoise);
  }
  return (high - low) / 2;
}

/** That of E (Pa) and of ν. */
export function narrowedSpread(branch: Branch, fit: RegionFit): { readonly E: number; readonly nu: number } {
  return {
    E: spreadOf(branch.x, branch.y, fit, fit.axial.slopeUncertainty),
    nu: branch.t === null || fit.transverse === null ? 0 : spreadOf(branch.x, branch.t, fit, fit.transverse.slopeUncertainty),
  };
}
