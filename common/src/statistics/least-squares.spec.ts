import { leastSquares, leastSquaresThroughOrigin, predictionUncertainty, residualsOf } from './least-squares';

describe('leastSquares', () => {
  // By hand: x̄ = 2.5, Sxx = 5, Sxy = 7, b = 1.4, a = 0, residuals 0.6, −0.8, −0.2, 0.4, RSS = 1.2, s² = 0.6.
  const [x, y] = [[1, 2, 3, 4], [2, 2, 4, 6]];

  it('fits a line with its uncertainties', () => {
    const line = leastSquares(x, y);
    expect(line.slope).toBeCloseTo(1.4, 14);
    expect(line.intercept).toBeCloseTo(0, 14);
    expect(line.residualStandardDeviation ** 2).toBeCloseTo(0.6, 14);
    expect(line.slopeUncertainty ** 2).toBeCloseTo(0.12, 14);
    expect(line.interceptUncertainty ** 2).toBeCloseTo(0.6 * (1 / 4 + 6.25 / 5), 14);
    expect(line.slopeInterceptCorrelation).toBeCloseTo(-2.5 / Math.sqrt(30 / 4), 14);
    expect(line.correlationCoefficient).toBeCloseTo(7 / Math.sqrt(5 * 11), 14);
    expect(line).toMatchObject({ points: 4, degreesOfFreedom: 2, meanX: 2.5, sumSquaresX: 5 });
    expect([...residualsOf(line, x, y)].map((e) => Number(e.toFixed(12)))).toEqual([0.6, -0.8, -0.2, 0.4]);
  });

  it('predicts with u²(a) + x₀²u²(b) + 2x₀ cov(a, b)', () => {
    const line = leastSquares(x, y);
    const covariance = line.slopeInterceptCorrelation * line.slopeUncertainty * line.interceptUncertainty;
    for (const at of [-1, 0, 2.5, 10]) expect(predictionUncertainty(line, at)).toBeCloseTo(Math.sqrt(line.interceptUncertainty ** 2 + at * at * line.slopeUncertainty ** 2 + 2 * at * covariance), 12);
  });

  it('keeps its digits far from the origin', () => {
    const far = leastSquares(x.map((v) => v + 1e8), y.map((v) => v + 1e8));
    expect(far.slope).toBeCloseTo(1.4, 12);
    expect(far.slopeUncertainty ** 2).toBeCloseTo(0.12, 12);
  });

  it('refuses what has no slope', () => {
    for (const wrong of [[[1, 2], [1, 2]], [[1, 2, 3], [1, 2]], [[1, 1, 1], [1, 2, 3]], [[1, Number.NaN, 3], [1, 2, 3]]] as const) expect(() => leastSquares(wrong[0], wrong[1])).toThrow(RangeError);
    for (const wrong of [[[1], [1]], [[0, 0], [1, 2]], [[1, 2], [1]]] as const) expect(() => leastSquaresThroughOrigin(wrong[0], wrong[1])).toThrow(RangeError);
  });

  it('fits through the origin', () => {
    // By hand: Σxy = 42, Σx² = 30, RSS = 60 − 42²/30 = 1.2.
    const line = leastSquaresThroughOrigin(x, y);
    expect(line.slope).toBeCloseTo(1.4, 14);
    expect(line.residualStandardDeviation ** 2).toBeCloseTo(1.2 / 3, 13);
    expect(line.rSquared).toBeCloseTo(1 - 1.2 / 60, 14);
  });
});
