/**
 * Centred first and second moments of pairs, and their exact merging, so that the line through any run of blocks is had in a few
 * operations without the cancellation of plain prefix sums.
 */
export interface Moments {
  readonly n: number;
  readonly meanX: number;
  readonly meanY: number;
  readonly sxx: number;
  readonly sxy: number;
  readonly syy: number;
}

/** Moments of rows `from` to `to` − 1, in two passes: means first, then the sums of products of deviations from them. */
export function momentsOf(x: Float64Array, y: Float64Array, from = 0, to = x.length): Moments {
  const n = to - from;
  let sumX = 0;
  let sumY = 0;
  for (let i = from; i < to; i += 1) {
    sumX += x[i]!;
    sumY += y[i]!;
  }
  const meanX = sumX / n;
  const meanY = sumY / n;
  let sxx = 0;
  let sxy = 0;
  let syy = 0;
  for (let i = from; i < to; i += 1) {
    const dx = x[i]! - meanX;
    const dy = y[i]! - meanY;
    sxx += dx * dx;
    sxy += dx * dy;
    syy += dy * dy;
  }
  return { n, meanX, meanY, sxx, sxy, syy };
}

/** Moments of two disjoint sets together: S = S₁ + S₂ + δxδy·n₁n₂/(n₁ + n₂) (Chan, Golub and LeVeque 1983, from memory; algebra). */
export function merged(a: Moments, b: Moments): Moments {
  const n = a.n + b.n;
  const dx = b.meanX - a.meanX;
  const dy = b.meanY - a.meanY;
  const weight = (a.n * b.n) / n;
  return {
    n,
    meanX: a.meanX + (dx * b.n) / n,
    meanY: a.meanY + (dy * b.n) / n,
    sxx: a.sxx + b.sxx + dx * dx * weight,
    sxy: a.sxy + b.sxy + dx * dy * weight,
    syy: a.syy + b.syy + dy * dy * weight,
  };
}

/** Least-squares slope of y on x, b = Sxy/Sxx. */
export const slopeOf = (m: Moments): number => m.sxy / m.sxx;

/** Residual sum of squares about that line; rounding below zero is cut off. */
export const residualSumOf = (m: Moments): number => Math.max(0, m.syy - (m.sxy * m.sxy) / m.sxx);
