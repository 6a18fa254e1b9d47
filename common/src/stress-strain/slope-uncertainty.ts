/**
 * Standard uncertainty of a slope whose residuals are correlated from row to row (AR(1) sandwich). A dense record with slow noise
 * can show little correlation from one row to the next, so the sum is also taken over means of blocks of rows, and the larger
 * of the two counts. Negative correlation is not credited.
 */
import { autoregressiveSlopeUncertainty, lagOne } from '../statistics/autocorrelation';

export interface SlopeUncertainty {
  readonly standardUncertainty: number;
  /** Of s² under that correlation: n(1 − r²)/(1 + r²) less the constants fitted; at least 3, below which t has no standard deviation. */
  readonly degreesOfFreedom: number;
  readonly lagOne: number;
}

const BLOCKS = 40;
const FEWEST_ROWS_A_BLOCK = 5;

const credited = (correlation: number): number => Math.min(0.99, Math.max(0, correlation));
const degreesOfFreedom = (n: number, r: number, fitted: number): number => Math.max(3, (n * (1 - credited(r) ** 2)) / (1 + credited(r) ** 2) - fitted);

function sumOfSquares(values: Float64Array, about = 0): number {
  let sum = 0;
  for (const v of values) sum += (v - about) ** 2;
  return sum;
}

function blockMeans(values: Float64Array): Float64Array {
  return Float64Array.from({ length: BLOCKS }, (_, b) => {
    const from = Math.floor((b * values.length) / BLOCKS);
    const to = Math.floor(((b + 1) * values.length) / BLOCKS);
    let sum = 0;
    for (let i = from; i < to; i += 1) sum += values[i]!;
    return sum / (to - from);
  });
}

function atOneScale(x: Float64Array, residuals: Float64Array, meanX: number): SlopeUncertainty {
  const n = residuals.length;
  const r = lagOne(residuals);
  const s = Math.sqrt(sumOfSquares(residuals) / Math.max(1, n - 2));
  return { standardUncertainty: autoregressiveSlopeUncertainty(x, meanX, sumOfSquares(x, meanX), s, credited(r)), degreesOfFreedom: degreesOfFreedom(n, r, 2), lagOne: r };
}

/**
 * @param x regressor, in the order recorded, and @param meanX its mean
 * @param residuals about the line, in the same order
 */
export function slopeUncertainty(x: Float64Array, residuals: Float64Array, meanX: number): SlopeUncertainty {
  const byRow = atOneScale(x, residuals, meanX);
  if (residuals.length < BLOCKS * FEWEST_ROWS_A_BLOCK) return byRow;
  const byBlock = atOneScale(blockMeans(x), blockMeans(residuals), meanX);
  return byBlock.standardUncertainty > byRow.standardUncertainty ? { ...byBlock, lagOne: byRow.lagOne } : byRow;
}

/**
 * Of the difference of two end values, each a weighted mean of few neighbouring rows, over the distance between the ends.
 * @param ends weights of the rows of each end, each summing to 1
 * @param residuals noise of the rows about a smooth curve, from which `fitted` constants were taken
 */
export function chordUncertainty(ends: readonly Float64Array[], distance: number, residuals: Float64Array, fitted: number): SlopeUncertainty {
  const r = lagOne(residuals);
  const s = Math.sqrt(sumOfSquares(residuals) / Math.max(1, residuals.length - fitted));
  const uOfEnds = ends.map((weights) => autoregressiveSlopeUncertainty(weights, 0, sumOfSquares(weights), s, credited(r)) * sumOfSquares(weights));
  return { standardUncertainty: Math.hypot(...uOfEnds) / distance, degreesOfFreedom: degreesOfFreedom(residuals.length, r, fitted), lagOne: r };
}
