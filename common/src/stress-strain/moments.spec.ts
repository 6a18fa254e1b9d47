import { leastSquares } from '../statistics/least-squares';
import { merged, momentsOf, residualSumOf, slopeOf } from './moments';

describe('moments', () => {
  const x = Float64Array.from({ length: 1000 }, (_, i) => 1e6 + i * 1e-3);
  const y = Float64Array.from(x, (v, i) => 3 * (v - 1e6) + Math.sin(i));

  it('merge into those of the whole, far from the origin', () => {
    const whole = momentsOf(x, y);
    const parts = merged(merged(momentsOf(x, y, 0, 17), momentsOf(x, y, 17, 400)), momentsOf(x, y, 400));
    for (const key of ['n', 'meanX', 'meanY', 'sxx', 'sxy', 'syy'] as const) expect(Math.abs(parts[key] / whole[key] - 1)).toBeLessThan(1e-9);
  });

  it('give the least-squares slope and residual sum', () => {
    const line = leastSquares(x, y);
    const m = momentsOf(x, y);
    expect(slopeOf(m) / line.slope - 1).toBeCloseTo(0, 9);
    expect(residualSumOf(m) / (line.residualStandardDeviation ** 2 * (m.n - 2)) - 1).toBeCloseTo(0, 9);
  });
});
