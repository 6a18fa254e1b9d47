/**
 * Grubbs' test for one outlier among n normal values (two-sided): G = max|x − x̄|/s against
 * (n − 1)/√n · √(t²/(n − 2 + t²)), t the quantile of n − 2 degrees of freedom at 1 − α/(2n). An outlier is reported, never removed.
 */
import { mean, standardDeviation } from './descriptive';
import { tQuantile } from './distributions';

/** Critical G for n values. @throws RangeError below three */
export function grubbsLimit(n: number, alpha: number): number {
  if (n < 3) throw new RangeError('Grubbs’ test needs three values');
  const t = tQuantile(1 - alpha / (2 * n), n - 2);
  return ((n - 1) / Math.sqrt(n)) * Math.sqrt((t * t) / (n - 2 + t * t));
}

/** The value farthest from the mean with its G, when that exceeds the limit at α = 1 % (ISO 5725-2's outlier); null otherwise, and below four values. */
export function outlierOf(values: readonly number[]): { readonly value: number; readonly G: number } | null {
  if (values.length < 4) return null;
  const [m, s] = [mean(values), standardDeviation(values)];
  if (!(s > 0)) return null;
  const value = values.reduce((far, v) => (Math.abs(v - m) > Math.abs(far - m) ? v : far));
  const G = Math.abs(value - m) / s;
  return G > grubbsLimit(values.length, 0.01) ? { value, G } : null;
}
