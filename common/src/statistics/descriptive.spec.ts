import { correlation, mean, median, range, standardDeviation } from './descriptive';

describe('descriptive statistics', () => {
  // NIST StRD univariate: NumAcc3 (s = 0.1 exactly about 1 000 000.2) and NumAcc4 (10 000 000.2), difficulty average and higher.
  it.each([[1_000_000.2, 1e-9], [10_000_000.2, 1e-8]])('keeps the spread of 0.1 about %d', (centre, tolerance) => {
    const values = [centre, ...Array.from({ length: 1000 }, (_, i) => centre + (i % 2 === 0 ? -0.1 : 0.1))];
    expect(Math.abs(mean(values) / centre - 1)).toBeLessThan(1e-15);
    expect(Math.abs(standardDeviation(values) - 0.1)).toBeLessThan(tolerance);
  });

  it('gives median, range and correlation', () => {
    expect([median([3, 1, 2]), median([4, 1, 3, 2]), range([3, -1, 2])]).toEqual([2, 2.5, 4]);
    expect(correlation([1, 2, 3], [2, 4, 6])).toBeCloseTo(1, 15);
    expect(correlation([1, 2, 3], [1, 0, 1])).toBe(0);
  });

  it('refuses what has no answer', () => {
    for (const nothing of [() => mean([]), () => median([]), () => standardDeviation([1])]) expect(nothing).toThrow(RangeError);
  });
});
