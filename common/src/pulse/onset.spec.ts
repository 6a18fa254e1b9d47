import { lateness, latenessPerShape } from './onset';

describe('lateness', () => {
  // x = (t − t₀)^p passes 1 at t₀ + 1 and 8 at t₀ + 8^(1/p).
  it.each([1.5, 2, 3, 3.5])('finds the onset of a power %d from two levels', (p) => {
    expect(lateness({ duration: 8 ** (1 / p) - 1, ratio: 8 }, p)).toBeCloseTo(1, 12);
  });

  it('is nothing where the levels are passed at once or in the wrong order', () => {
    expect(lateness({ duration: 0, ratio: 8 }, 2)).toBe(0);
    expect(lateness({ duration: -1, ratio: 8 }, 2)).toBe(0);
  });

  it('grows with the shape, nearly in a straight line', () => {
    const rise = { duration: 1, ratio: 30 };
    const slope = latenessPerShape(rise);
    expect(slope).toBeGreaterThan(0);
    for (const p of [1.5, 2, 3, 3.5]) expect(Math.abs(lateness(rise, 2.5) + slope * (p - 2.5) - lateness(rise, p))).toBeLessThan(0.06 * lateness(rise, 2.5));
  });

  it('does not extrapolate from levels too close to one another', () => {
    expect(lateness({ duration: 1, ratio: 1.01 }, 2)).toBe(lateness({ duration: 1, ratio: 3 }, 2));
  });
});
