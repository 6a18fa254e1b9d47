import { huber, theilSen } from './robust';

describe('slopes that outliers do not move', () => {
  const x = Array.from({ length: 21 }, (_, i) => i);
  const clean = x.map((v) => 3 + 2 * v);
  const spoilt = clean.map((v, i) => (i === 4 || i === 17 ? v + 1000 : v));

  it('Theil–Sen finds the line under two gross outliers', () => {
    const { slope, intercept } = theilSen(x, spoilt);
    expect([slope, intercept]).toEqual([2, 3]);
  });

  it('Huber finds it too, and is least squares where nothing stands apart', () => {
    const noisy = spoilt.map((v, i) => v + 0.01 * Math.cos(5 * i));
    expect(Math.abs(huber(x, noisy).slope - 2)).toBeLessThan(0.003);
    expect(huber(x, clean)).toMatchObject({ slope: 2, intercept: 3, scale: 0 });
  });

  it('Theil–Sen leaves out pairs of equal x and refuses what it cannot do', () => {
    expect(theilSen([1, 1, 2], [0, 5, 3]).slope).toBe(0.5);
    expect(() => theilSen([1, 1], [0, 5])).toThrow(RangeError);
    expect(() => theilSen(new Float64Array(3001), new Float64Array(3001))).toThrow('3 000');
  });
});
