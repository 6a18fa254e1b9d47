import { RandomStream } from '../uncertainty/random-stream';
import { autoregressiveSlopeUncertainty, durbinWatson, lagOne } from './autocorrelation';
import { standardDeviation } from './descriptive';
import { leastSquares } from './least-squares';

describe('autocorrelation', () => {
  it('tells alternating, constant-signed and no residuals apart', () => {
    expect(lagOne([1, -1, 1, -1])).toBe(-0.75);
    expect(durbinWatson([1, -1, 1, -1])).toBe(3);
    expect(lagOne([1, 1, 1, 1])).toBe(0.75);
    expect([lagOne([0, 0, 0]), durbinWatson([0, 0, 0])]).toEqual([0, 2]);
  });

  it.each([-0.6, 0, 0.4, 0.9])('sums ρ^|i−j| in one pass as in two (ρ = %d)', (rho) => {
    const x = Array.from({ length: 60 }, (_, i) => i + 0.3 * Math.sin(i));
    const { meanX, sumSquaresX } = leastSquares(x, x.map((v) => 2 * v));
    let sum = 0;
    x.forEach((a, i) => x.forEach((b, j) => {
      sum += (a - meanX) * (b - meanX) * rho ** Math.abs(i - j);
    }));
    expect(autoregressiveSlopeUncertainty(x, meanX, sumSquaresX, 0.7, rho)).toBeCloseTo((0.7 / sumSquaresX) * Math.sqrt(sum), 12);
  });

  it('states the spread that slopes really have under such residuals', () => {
    const random = new RandomStream(11);
    const [n, rho] = [80, 0.7];
    const x = Array.from({ length: n }, (_, i) => i);
    const slopes = Array.from({ length: 1500 }, () => {
      let e = random.normal();
      return leastSquares(x, x.map(() => {
        e = rho * e + Math.sqrt(1 - rho * rho) * random.normal();
        return e;
      })).slope;
    });
    const { meanX, sumSquaresX } = leastSquares(x, x.map((v) => v % 3));
    expect(Math.abs(standardDeviation(slopes) / autoregressiveSlopeUncertainty(x, meanX, sumSquaresX, 1, rho) - 1)).toBeLessThan(0.07);
  });
});
