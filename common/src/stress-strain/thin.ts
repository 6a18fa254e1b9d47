/** Fewer points for drawing that look the same: of every stretch of rows its lowest and highest are kept. */

/**
 * @param most at least 4
 * @returns pairs [x, y] in the order recorded, first and last row included
 */
export function thinned(x: Float64Array, y: Float64Array, most: number): [number, number][] {
  const n = x.length;
  const at = (i: number): [number, number] => [x[i]!, y[i]!];
  if (n <= most) return Array.from({ length: n }, (_, i) => at(i));
  const stretches = Math.floor((most - 2) / 2);
  const kept: [number, number][] = [at(0)];
  for (let s = 0; s < stretches; s += 1) {
    const from = 1 + Math.floor((s * (n - 2)) / stretches);
    const to = 1 + Math.floor(((s + 1) * (n - 2)) / stretches);
    let low = from;
    let high = from;
    for (let i = from; i < to; i += 1) {
      if (y[i]! < y[low]!) low = i;
      if (y[i]! > y[high]!) high = i;
    }
    kept.push(at(Math.min(low, high)));
    if (low !== high) kept.push(at(Math.max(low, high)));
  }
  return [...kept, at(n - 1)];
}
