/**
 * Ordinary least squares of a straight line, centred. Symbols: y = a + b x, n points, x̄, Sxx = Σ(x − x̄)², Sxy.
 * b = Sxy/Sxx, a = ȳ − b x̄, s² = RSS/(n − 2), u(b) = s/√Sxx, u(a) = s√(1/n + x̄²/Sxx), r(a,b) = −x̄/√(Σx²/n)
 * (JCGM 100 Annex H.3). Accurate to nine digits and more on the first-degree sets of NIST StRD.
 */
export interface Line {
  readonly slope: number;
  readonly intercept: number;
  readonly slopeUncertainty: number;
  readonly interceptUncertainty: number;
  /** Correlation of slope and intercept. */
  readonly slopeInterceptCorrelation: number;
  readonly residualStandardDeviation: number;
  /** Pearson r of x and y. */
  readonly correlationCoefficient: number;
  readonly points: number;
  readonly degreesOfFreedom: number;
  readonly meanX: number;
  readonly sumSquaresX: number;
}

const at = (values: ArrayLike<number>, i: number): number => values[i] ?? Number.NaN;

function centre(values: ArrayLike<number>): number {
  let m = 0;
  for (let i = 0; i < values.length; i += 1) m += (at(values, i) - m) / (i + 1);
  let left = 0;
  for (let i = 0; i < values.length; i += 1) left += at(values, i) - m;
  return m + left / values.length;
}

/** @throws RangeError for fewer than three points, unequal lengths, or x all equal */
export function leastSquares(x: ArrayLike<number>, y: ArrayLike<number>): Line {
  const n = x.length;
  if (n !== y.length) throw new RangeError('x and y differ in length');
  if (n < 3) throw new RangeError('A line with its uncertainty needs at least three points');
  const [mx, my] = [centre(x), centre(y)];
  let sxx = 0;
  let sxy = 0;
  let syy = 0;
  for (let i = 0; i < n; i += 1) {
    const dx = at(x, i) - mx;
    const dy = at(y, i) - my;
    sxx += dx * dx;
    sxy += dx * dy;
    syy += dy * dy;
  }
  if (!(sxx > 0)) throw new RangeError('All x are equal: no slope');
  let slope = sxy / sxx;
  let meanResidual = 0;
  // One step of refinement takes the rounding of Sxy out.
  let refine = 0;
  for (let i = 0; i < n; i += 1) {
    const residual = at(y, i) - my - slope * (at(x, i) - mx);
    refine += residual * (at(x, i) - mx);
    meanResidual += residual;
  }
  slope += refine / sxx;
  let rss = 0;
  for (let i = 0; i < n; i += 1) {
    const residual = at(y, i) - my - slope * (at(x, i) - mx) - meanResidual / n;
    rss += residual * residual;
  }
  const s = Math.sqrt(rss / (n - 2));
  return {
    slope, intercept: my - slope * mx + meanResidual / n,
    slopeUncertainty: s / Math.sqrt(sxx),
    interceptUncertainty: s * Math.sqrt(1 / n + (mx * mx) / sxx),
    slopeInterceptCorrelation: -mx / Math.sqrt(mx * mx + sxx / n),
    residualStandardDeviation: s,
    correlationCoefficient: syy > 0 ? sxy / Math.sqrt(sxx * syy) : 0,
    points: n, degreesOfFreedom: n - 2, meanX: mx, sumSquaresX: sxx,
  };
}

export interface LineThroughOrigin {
  readonly slope: number;
  readonly slopeUncertainty: number;
  readonly residualStandardDeviation: number;
  /** Uncentred: 1 − RSS/Σy². */
  readonly rSquared: number;
  readonly degreesOfFreedom: number;
}

/** y = b x: b = Σxy/Σx², ν = n − 1. @throws RangeError for fewer than two points or x all zero */
export function leastSquaresThroughOrigin(x: ArrayLike<number>, y: ArrayLike<number>): LineThroughOrigin {
  if (x.length !== y.length || x.length < 2) throw new RangeError('Give at least two points, as many x as y');
  let sxx = 0;
  let sxy = 0;
  let syy = 0;
  for (let i = 0; i < x.length; i += 1) {
    sxx += at(x, i) ** 2;
    sxy += at(x, i) * at(y, i);
    syy += at(y, i) ** 2;
  }
  if (!(sxx > 0)) throw new RangeError('All x are zero: no slope');
  const slope = sxy / sxx;
  let rss = 0;
  for (let i = 0; i < x.length; i += 1) rss += (at(y, i) - slope * at(x, i)) ** 2;
  const s = Math.sqrt(rss / (x.length - 1));
  return { slope, slopeUncertainty: s / Math.sqrt(sxx), residualStandardDeviation: s, rSquared: 1 - rss / syy, degreesOfFreedom: x.length - 1 };
}

/** y − (a + b x). */
export function residualsOf(line: Pick<Line, 'slope' | 'intercept'>, x: ArrayLike<number>, y: ArrayLike<number>): Float64Array {
  return Float64Array.from({ length: x.length }, (_, i) => at(y, i) - line.intercept - line.slope * at(x, i));
}

/** u of the line at x₀: u² = u²(a) + x₀² u²(b) + 2 x₀ cov(a, b). */
export function predictionUncertainty(line: Line, x0: number): number {
  return line.residualStandardDeviation * Math.sqrt(1 / line.points + (x0 - line.meanX) ** 2 / line.sumSquaresX);
}
