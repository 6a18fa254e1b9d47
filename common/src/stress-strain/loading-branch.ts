/**
 * The part of a record that the static constants are taken from: the loading branch that reaches the greatest stress.
 *
 * A branch runs from a valley to the next peak; falls and rises below a tenth of the record's stress range, or ten standard deviations
 * of its noise, are not counted, nor is a single row that leaps out and back. Where several branches reach the greatest stress within 2 %, as in tests that cycle to one level, the last of them
 * is taken: first loadings settle the specimen and its gauges, and are discarded (common practice).
 */
import { median } from '../statistics/descriptive';

export interface LoadingBranch {
  /** Row of the valley, row after which loading goes on without rest, row of the peak. */
  readonly from: number;
  readonly rise: number;
  readonly to: number;
  /** Loading branches in the whole record that reach at least half of the greatest stress, the chosen one included. */
  readonly loadings: number;
}

const TURN = 0.1;
const NOISE_TURN = 10;
const SAME_LEVEL = 0.02;

const MOST_DIFFERENCES = 20_000;

/** Standard deviation of white noise, from the median size of second differences (6σ² for independent rows), which turns do not raise. */
function noiseOf(stress: Float64Array): number {
  const count = stress.length - 2;
  if (count < 1) return 0;
  const stride = Math.ceil(count / MOST_DIFFERENCES);
  const sizes = Float64Array.from({ length: Math.floor((count - 1) / stride) + 1 }, (_, k) => {
    const i = 1 + k * stride;
    return Math.abs(stress[i + 1]! - 2 * stress[i]! + stress[i - 1]!);
  });
  return median(sizes) / 0.6745 / Math.sqrt(6);
}

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

/** Running median of three rows: takes out single rows that leap. */
function withoutSpikes(stress: Float64Array): Float64Array {
  return stress.map((value, i) => {
    const before = stress[Math.max(0, i - 1)]!;
    const after = stress[Math.min(stress.length - 1, i + 1)]!;
    return Math.max(Math.min(value, before), Math.min(Math.max(value, before), after));
  });
}

/** The median flattens a turn by a row: the row itself or a neighbour that goes further, but does not leap. */
function turningRow(stress: Float64Array, smooth: Float64Array, { row, peak }: Extremum, leap: number): number {
  const further = (a: number, b: number) => (peak ? stress[a]! > stress[b]! : stress[a]! < stress[b]!);
  return [row - 1, row, row + 1]
    .filter((i) => i >= 0 && i < stress.length && Math.abs(stress[i]! - smooth[row]!) < leap)
    .reduce((best, i) => (further(i, best) ? i : best), row);
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
  const smooth = withoutSpikes(stress);
  let least = Infinity;
  let greatest = -Infinity;
  for (const value of smooth) {
    if (value < least) least = value;
    if (value > greatest) greatest = value;
  }
  const range = greatest - least;
  if (!(range > 0)) return null;
  const turn = Math.max(TURN * range, NOISE_TURN * noiseOf(stress));
  const extrema = turns(smooth, turn).map((e) => ({ ...e, row: turningRow(stress, smooth, e, turn) }));
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
