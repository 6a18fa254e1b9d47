/**
 * Chords between two strains or two stresses: E = (σ₂ − σ₁)/(ε₂ − ε₁), ν = −(εt₂ − εt₁)/(ε₂ − ε₁).
 *
 * Each end is interpolated linearly in the record. Where rows are dense or noise makes the record pass the end several times, the
 * rows about the end (1 % of those between the ends on either side, at least all passages) are averaged instead, and the average is
 * moved to the end along the window's regression slope.
 */
import { regression, residualCorrelation, type Branch, type Line, type RegionFit } from './line-fit';
import { chordUncertainty } from './slope-uncertainty';
import { aboutSmoothCurve, type Noise } from './smooth-curve';

export interface Chord {
  readonly along: 'strain' | 'stress';
  readonly from: number;
  readonly to: number;
}

interface Passage {
  /** First row at or above the level, last row below it. */
  readonly first: number;
  readonly last: number;
}

export function passage(values: Float64Array, level: number): Passage {
  let first = 0;
  while (first < values.length - 1 && values[first]! < level) first += 1;
  let last = values.length - 1;
  while (last > 0 && values[last]! >= level) last -= 1;
  return { first, last: values[last]! >= level ? first : last };
}

interface End {
  readonly firstRow: number;
  readonly weights: Float64Array;
}

const AVERAGED_SHARE = 0.01;

function endAt(values: Float64Array, level: number, { first, last }: Passage, rowsBetween: number): End {
  const reach = Math.floor(rowsBetween * AVERAGED_SHARE);
  if (first === last) return { firstRow: first, weights: Float64Array.of(1) };
  if (first === last + 1 && reach < 1) {
    const share = (level - values[last]!) / (values[first]! - values[last]!);
    return { firstRow: last, weights: Float64Array.of(1 - share, share) };
  }
  const low = Math.max(0, Math.min(first, last) - reach);
  const high = Math.min(values.length - 1, Math.max(first, last) + reach);
  return { firstRow: low, weights: new Float64Array(high - low + 1).fill(1 / (high - low + 1)) };
}

const averageOf = (values: Float64Array, end: End): number => end.weights.reduce((sum, w, i) => sum + w * values[end.firstRow + i]!, 0);

/** The regression's line turned into the chord; its uncertainty comes from the noise at the ends, not from the record's curvature. */
function chordLine(regressed: Line, noise: Noise, slope: number, intercept: number, x: Float64Array, ends: readonly Float64Array[], distance: number): Line {
  const u = chordUncertainty(ends, distance, noise.residuals, noise.fitted);
  const residuals = regressed.residuals.map((e, i) => e + regressed.intercept - intercept + (regressed.slope - slope) * x[i]!);
  return { ...regressed, slope, intercept, slopeUncertainty: u.standardUncertainty, degreesOfFreedom: u.degreesOfFreedom, lagOne: u.lagOne, residuals };
}

interface EndValues {
  readonly strain: number;
  readonly stress: number;
  readonly transverse: number;
}

/** The rows about an end, moved to its level along the window's regression slopes. */
function endValues(branch: Branch, window: RegionFit, end: End, along: Chord['along'], level: number): EndValues {
  const { slope } = window.axial;
  const [x, y] = [averageOf(branch.x, end), averageOf(branch.y, end)];
  const strain = along === 'strain' ? level : x + (level - y) / slope;
  const stress = along === 'strain' ? y + slope * (level - x) : level;
  const transverse = branch.t === null || window.transverse === null ? 0 : averageOf(branch.t, end) + window.transverse.slope * (strain - x);
  return { strain, stress, transverse };
}

/** How far, as a share of the chord, its lower end may lie below the first row. */
const EXTRAPOLATED_SHARE = 0.01;

/** @returns null when the record does not reach both ends, or holds no row between them */
export function chord(branch: Branch, { along, from, to }: Chord): RegionFit | null {
  const values = along === 'strain' ? branch.x : branch.y;
  const [low, high] = [passage(values, from), passage(values, to)];
  if (values[high.first]! < to || values[low.last]! - from > EXTRAPOLATED_SHARE * (to - from)) return null;
  const [firstRow, lastRow] = [Math.min(low.first, low.last), Math.max(high.first, high.last)];
  if (lastRow - firstRow < 2) return null;
  const window = regression(branch, firstRow, lastRow);
  const lower = endAt(values, from, low, lastRow - firstRow);
  const upper = endAt(values, to, high, lastRow - firstRow);
  const one = endValues(branch, window, lower, along, from);
  const two = endValues(branch, window, upper, along, to);
  const distance = two.strain - one.strain;
  const E = (two.stress - one.stress) / distance;
  const transverseSlope = (two.transverse - one.transverse) / distance;
  const x = branch.x.subarray(firstRow, lastRow + 1);
  const ends = [lower.weights, upper.weights];
  const noise = aboutSmoothCurve(x, window.axial.residuals);
  const transverseNoise = window.transverse === null ? null : aboutSmoothCurve(x, window.transverse.residuals);
  return {
    from: firstRow, to: lastRow, strainFrom: one.strain, strainTo: two.strain, stressFrom: one.stress, stressTo: two.stress, noise: window.noise,
    axial: chordLine(window.axial, noise, E, one.stress - E * one.strain, x, ends, distance),
    transverse: window.transverse === null || transverseNoise === null
      ? null
      : chordLine(window.transverse, transverseNoise, transverseSlope, one.transverse - transverseSlope * one.strain, x, ends, distance),
    slopesCorrelation: transverseNoise === null ? 0 : residualCorrelation(noise.residuals, transverseNoise.residuals),
  };
}
