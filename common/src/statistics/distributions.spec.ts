import { normalProbability, normalQuantile, tQuantile } from './distributions';

describe('distributions', () => {
  it('agree with printed tables', () => {
    expect(normalQuantile(0.975)).toBeCloseTo(1.959964, 6);
    expect(normalProbability(1.959964)).toBeCloseTo(0.975, 7);
    expect(tQuantile(0.025, 9)).toBeCloseTo(-2.262157, 6);
  });

  it('takes Student’s t over into the normal without a step', () => {
    expect(tQuantile(0.975, Infinity)).toBe(normalQuantile(0.975));
    expect(Math.abs(tQuantile(0.975, 999_999) - tQuantile(0.975, 1_000_001))).toBeLessThan(1e-5);
  });
});
