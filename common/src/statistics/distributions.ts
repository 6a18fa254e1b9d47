/** Quantiles and probabilities of the distributions in use, through a library. */
import normalCdf from '@stdlib/stats-base-dists-normal-cdf';
import normalQuantileOf from '@stdlib/stats-base-dists-normal-quantile';
import tQuantileOf from '@stdlib/stats-base-dists-t-quantile';

/** Quantile of the standard normal distribution, 0 < p < 1. */
export function normalQuantile(p: number): number {
  return normalQuantileOf(p, 0, 1);
}

/** P(Z ≤ z) of the standard normal distribution. */
export function normalProbability(z: number): number {
  return normalCdf(z, 0, 1);
}

/** Quantile of Student's t with `degreesOfFreedom` (Infinity gives the normal). */
export function tQuantile(p: number, degreesOfFreedom: number): number {
  return Number.isFinite(degreesOfFreedom) && degreesOfFreedom < 1e6 ? tQuantileOf(p, degreesOfFreedom) : normalQuantile(p);
}
