/**
 * Noise of the axial strain, and how much it flattens a slope.
 *
 * A least-squares slope on a noisy regressor is too small by the factor 1 − a, a = σx²/Var(x) (attenuation, errors in variables).
 * Noise is what the second differences v(i+1) − 2v(i) + v(i−1) of the two channels do not share: a true fluctuation of the load
 * moves stress and strain together and is no error. For white noise of strain σx and stress σy on rows one step apart
 * mean(Δ²x·(Δ²x − Δ²y/b)) = 6σx² (algebra).
 */
export interface StrainNoise {
  /** σx, dimensionless. */
  readonly standardDeviation: number;
  /** a = σx²/Var(x) by which the slope is corrected; 0 where it is below 0.01 % or the rows are too few to tell. */
  readonly attenuation: number;
}

const FEWEST_ROWS = 30;
const NEGLIGIBLE = 1e-4;

/**
 * @param x strain and @param y stress (Pa) of the window, in the order recorded
 * @param slope least-squares slope of y on x, Pa
 * @param sxx Σ(x − x̄)²
 */
export function strainNoise(x: Float64Array, y: Float64Array, slope: number, sxx: number): StrainNoise {
  const n = x.length;
  if (n < FEWEST_ROWS) return { standardDeviation: 0, attenuation: 0 };
  let sum = 0;
  for (let i = 1; i < n - 1; i += 1) {
    const dx = x[i + 1]! - 2 * x[i]! + x[i - 1]!;
    const dy = y[i + 1]! - 2 * y[i]! + y[i - 1]!;
    sum += dx * (dx - dy / slope);
  }
  const variance = Math.max(0, sum / (6 * (n - 2)));
  const attenuation = variance / (sxx / (n - 1));
  return { standardDeviation: Math.sqrt(variance), attenuation: attenuation < NEGLIGIBLE ? 0 : attenuation };
}
