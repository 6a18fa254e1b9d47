/** Slopes that a few gross outliers do not move. */
import { median } from './descriptive';
import { normalQuantile } from './distributions';
import { leastSquares } from './least-squares';

const at = (values: ArrayLike<number>, i: number): number => values[i] ?? Number.NaN;

/** Theil–Sen: the median of the slopes of all pairs with different x. O(n²): at most 3 000 points. @throws RangeError beyond, or without a pair */
export function theilSen(x: ArrayLike<number>, y: ArrayLike<number>): { slope: number; intercept: number } {
  if (x.length > 3000) throw new RangeError('Theil–Sen takes at most 3 000 points');
  const slopes: number[] = [];
  for (let i = 0; i < x.length; i += 1) {
    for (let j = i + 1; j < x.length; j += 1) if (at(x, i) !== at(x, j)) slopes.push((at(y, j) - at(y, i)) / (at(x, j) - at(x, i)));
  }
  const slope = median(slopes);
  return { slope, intercept: median(Array.from({ length: x.length }, (_, i) => at(y, i) - slope * at(x, i))) };
}

/**
 * Huber's M-estimate, k = 1.345, by iteratively reweighted least squares until the coefficients move by less than 1e-14 of
 * themselves. Scale = MAD about zero/`quartile`, the upper quartile Φ⁻¹(¾) of the normal distribution; some programs round it to
 * 0.6745, which moves the ninth digit of the slope.
 */
export function huber(x: ArrayLike<number>, y: ArrayLike<number>, k = 1.345, quartile = normalQuantile(0.75)): { slope: number; intercept: number; scale: number; iterations: number } {
  let { slope, intercept } = leastSquares(x, y);
  let scale = 0;
  for (let iteration = 1; iteration <= 500; iteration += 1) {
    const residuals = Array.from({ length: x.length }, (_, i) => at(y, i) - intercept - slope * at(x, i));
    scale = median(residuals.map(Math.abs)) / quartile;
    if (!(scale > 0)) return { slope, intercept, scale: 0, iterations: iteration };
    const next = weighted(x, y, residuals.map((e) => Math.min(1, (k * scale) / Math.abs(e))));
    const moved = Math.abs(next.slope - slope) / Math.abs(next.slope) + Math.abs(next.intercept - intercept) / Math.max(Math.abs(next.intercept), 1e-300);
    ({ slope, intercept } = next);
    if (moved < 1e-14) return { slope, intercept, scale, iterations: iteration };
  }
  return { slope, intercept, scale, iterations: 500 };
}

function weighted(x: ArrayLike<number>, y: ArrayLike<number>, w: readonly number[]): { slope: number; intercept: number } {
  const total = w.reduce((sum, v) => sum + v, 0);
  const mx = w.reduce((sum, v, i) => sum + v * at(x, i), 0) / total;
  const my = w.reduce((sum, v, i) => sum + v * at(y, i), 0) / total;
  let sxx = 0;
  let sxy = 0;
  w.forEach((v, i) => {
    sxx += v * (at(x, i) - mx) ** 2;
    sxy += v * (at(x, i) - mx) * (at(y, i) - my);
  });
  const slope = sxy / sxx;
  return { slope, intercept: my - slope * mx };
}
