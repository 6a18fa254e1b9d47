/** What a whole record shows of itself before any line is fitted: time, steps, a channel at its stop. */
import type { Finding } from '../contract/result';
import { finding } from '../findings/findings';

function timeFinding(time: Float64Array | null): Finding[] {
  if (time === null) return [];
  let backwards = 0;
  let first = 0;
  for (let i = 1; i < time.length; i += 1) {
    if (time[i]! >= time[i - 1]!) continue;
    if (backwards === 0) first = i;
    backwards += 1;
  }
  return backwards === 0 ? [] : [finding('TIME_NOT_MONOTONIC', 'time', `Time falls at ${backwards} of ${time.length} rows, first at row ${first + 1}`)];
}

function rangeOf(values: Float64Array): { low: number; high: number } {
  let low = Infinity;
  let high = -Infinity;
  for (const v of values) {
    if (v < low) low = v;
    if (v > high) high = v;
  }
  return { low, high };
}

const LONG_STOP = 5;
const OTHER_MOVES = 0.05;

/** Longest run of rows at the channel's greatest value during which the other channel moves by a twentieth of its range. */
function rowsAtStop(values: Float64Array, other: Float64Array): number {
  const { high } = rangeOf(values);
  const range = rangeOf(other);
  let longest = 0;
  for (let i = 0; i < values.length; i += 1) {
    if (values[i] !== high) continue;
    let end = i;
    let [low, top] = [other[i]!, other[i]!];
    while (end + 1 < values.length && values[end + 1] === high) {
      end += 1;
      low = Math.min(low, other[end]!);
      top = Math.max(top, other[end]!);
    }
    const rows = end - i + 1;
    if (rows >= LONG_STOP && top - low > OTHER_MOVES * (range.high - range.low)) longest = Math.max(longest, rows);
    i = end;
  }
  return longest;
}

function saturation(subject: string, values: Float64Array, other: Float64Array): Finding[] {
  const rows = rowsAtStop(values, other);
  return rows === 0 ? [] : [finding('RECORD_SATURATED', subject, `${subject} stays at its greatest value for ${rows} rows while the other channel moves on`)];
}

/** @param stress and @param axial of the whole record */
export function recordFindings(time: Float64Array | null, stress: Float64Array, axial: Float64Array): Finding[] {
  return [...timeFinding(time), ...saturation('stress', stress, axial), ...saturation('axial strain', axial, stress)];
}

const FEWEST_ROWS = 20;

/**
 * Height of the steps in which a channel moves: the least difference of its distinct values, where at least half of the rows repeat a
 * value; else 0, since rows of a short or fine record differ all the same.
 */
export function stepsOf(values: Float64Array): number {
  if (values.length < FEWEST_ROWS) return 0;
  // A stretch of consecutive rows shows the steps as well as the whole of a long record.
  const sorted = values.slice(0, 20_000).sort();
  let distinct = 1;
  let least = Infinity;
  for (let i = 1; i < sorted.length; i += 1) {
    const gap = sorted[i]! - sorted[i - 1]!;
    if (gap <= 0) continue;
    distinct += 1;
    least = Math.min(least, gap);
  }
  return distinct > 1 && distinct <= sorted.length / 2 ? least : 0;
}
