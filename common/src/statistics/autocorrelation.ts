/** Residuals that follow one another: many points of one record do not make the slope as certain as they pretend. */
const at = (values: ArrayLike<number>, i: number): number => values[i] ?? Number.NaN;

/** Lag-1 autocorrelation r₁ = Σ eᵢeᵢ₊₁ / Σ eᵢ². */
export function lagOne(residuals: ArrayLike<number>): number {
  let along = 0;
  let squares = 0;
  for (let i = 0; i < residuals.length; i += 1) {
    squares += at(residuals, i) ** 2;
    if (i > 0) along += at(residuals, i) * at(residuals, i - 1);
  }
  return squares > 0 ? along / squares : 0;
}

/** Durbin–Watson statistic Σ(eᵢ₊₁ − eᵢ)²/Σeᵢ²; 2 for independent residuals. */
export function durbinWatson(residuals: ArrayLike<number>): number {
  let steps = 0;
  let squares = 0;
  for (let i = 0; i < residuals.length; i += 1) {
    squares += at(residuals, i) ** 2;
    if (i > 0) steps += (at(residuals, i) - at(residuals, i - 1)) ** 2;
  }
  return squares > 0 ? steps / squares : 2;
}

/**
 * Standard uncertainty of a least-squares slope under first-order autoregressive residuals (sandwich form):
 * u²(b) = s²/Sxx² · Σᵢⱼ dᵢ dⱼ ρ^|i−j|, dᵢ = xᵢ − x̄. Evaluated in O(n) by the recursion fᵢ = ρ(fᵢ₋₁ + dᵢ₋₁).
 */
export function autoregressiveSlopeUncertainty(x: ArrayLike<number>, meanX: number, sumSquaresX: number, residualStandardDeviation: number, rho: number): number {
  let before = 0;
  let crossed = 0;
  for (let i = 0; i < x.length; i += 1) {
    const d = at(x, i) - meanX;
    if (i > 0) before = rho * (before + at(x, i - 1) - meanX);
    crossed += d * before;
  }
  const sum = Math.max(sumSquaresX + 2 * crossed, 0);
  return (residualStandardDeviation / sumSquaresX) * Math.sqrt(sum);
}
