/**
 * The part of a record that the static constants are taken from: the loading branch that reaches the greatest stress.
 *
 * A branch runs from a valley to the next peak; falls and rises below a twentieth of the record's stress range are noise and are
 * not counted. Where several branches reach the greatest stress within 2 %, as in tests that cycle to one level, the last of them
 * is taken: first loadings settle the specimen and its gauges, and are discarded (common practice).
 */
export interface LoadingBranch {
  /** Row of the valley, row after which loading goes on without rest, row of the peak. */
  readonly from: number;
  readonly rise: number;
  readonly to: number;
  /** Loading branches in the whole record that reach at least half of the greatest stress, the chosen one included. */
  readonly loadings: number;
}

const TURN = 0.05;
const SAME_LEVEL = 0.02;

interface Extremum {
  readonly row: number;
  readonly peak: boolean;
}

/** Alternating valleys and peaks, each turn at least `least` high. */
function turns(stress: Float64Array, least: number): Extremum[] {
  const found: Extremum[] = [];
  let low = 0;
  let high = 0;
  let rising: boolean | null = null;
  for (let i = 1; i < stress.length; i += 1) {
    const value = stress[i]!;
    if (rising !== true && value < stress[low]!) low = i;
    if (rising !== false && value > stress[high]!) high = i;
    if (rising !== true && value - stress[low]! >= least) {
      found.push({ row: low, peak: false });
      rising = true;
      high = i;
    } else if (rising !== false && stress[high]! - value >= least) {
      found.push({ row: high, peak: true });
      rising = false;
      low = i;
    }
  }
  if (rising === true) found.push({ row: high, peak: true });
  return found;
}

/** The last row within 1 % of the rise above the valley: rows before it rest there and tell nothing of the slope. */
function afterRest(stress: Float64Array, valley: number, peak: number): number {
  const level = stress[valley]! + 0.01 * (stress[peak]! - stress[valley]!);
  let row = peak;
  while (row > valley && stress[row]! > level) row -= 1;
  return row;
}

/**
 * @param stress Pa, in the order recorded, loading positive
 * @returns null when the stress never rises
 */
export function loadingBranch(stress: Float64Array): LoadingBranch | null {
  let least = Infinity;
  let greatest = -Infinity;
  for (const value of stress) {
    if (value < least) least = value;
    if (value > greatest) greatest = value;
  }
  const range = greatest - least;
  if (!(range > 0)) return null;
  const extrema = turns(stress, TURN * range);
  const branches: { from: number; to: number }[] = [];
  extrema.forEach((peak, i) => {
    const valley = extrema[i - 1];
    if (peak.peak && valley !== undefined) branches.push({ from: valley.row, to: peak.row });
  });
  const reaching = branches.filter((b) => stress[b.to]! >= greatest - SAME_LEVEL * range);
  const chosen = reaching.at(-1);
  if (chosen === undefined) return null;
  const loadings = branches.filter((b) => stress[b.to]! - least >= 0.5 * range).length;
  return { ...chosen, rise: afterRest(stress, chosen.from, chosen.to), loadings };
}
