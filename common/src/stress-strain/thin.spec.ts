import { thinned } from './thin';

describe('thinned', () => {
  const x = Float64Array.from({ length: 100_000 }, (_, i) => i);
  const y = x.map((v) => Math.sin(v / 5000));
  y[54_321] = 9;
  y[12_345] = -9;

  it('keeps extremes, ends and order within the number asked for', () => {
    const points = thinned(x, y, 500);
    expect(points.length).toBeLessThanOrEqual(500);
    expect(points[0]).toEqual([0, 0]);
    expect(points.at(-1)?.[0]).toBe(99_999);
    expect(points).toContainEqual([54_321, 9]);
    expect(points).toContainEqual([12_345, -9]);
    expect(points.every((p, i) => i === 0 || p[0] > points[i - 1]![0])).toBe(true);
  });

  it('keeps a short record as it is', () => {
    expect(thinned(Float64Array.of(1, 2, 3), Float64Array.of(4, 5, 6), 4)).toEqual([[1, 4], [2, 5], [3, 6]]);
  });
});
