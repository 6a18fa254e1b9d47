/** Mean and spread, centred: sums of squares without centring lose half the digits. */

export function mean(values: ArrayLike<number>): number {
  if (values.length === 0) throw new RangeError('The mean of no values');
  let m = 0;
  for (let i = 0; i < values.length; i += 1) m += ((values[i] ?? Number.NaN) - m) / (i + 1);
  let correction = 0;
  for (let i = 0; i < values.length; i += 1) correction += (values[i] ?? Number.NaN) - m;
  return m + correction / values.length;
}

/** Sample standard deviation s, n − 1 degrees of freedom; @throws RangeError for fewer than two values */
export function standardDeviation(values: ArrayLike<number>): number {
  if (values.length < 2) throw new RangeError('A spread needs at least two values');
  const m = mean(values);
  let squares = 0;
  for (let i = 0; i < values.length; i += 1) squares += ((values[i] ?? Number.NaN) - m) ** 2;
  return Math.sqrt(squares / (values.length - 1));
}

export function range(values: readonly number[]): number {
  return Math.max(...values) - Math.min(...values);
}

export function median(values: ArrayLike<number>): number {
  if (values.length === 0) throw new RangeError('The median of no values');
  const sorted = Float64Array.from(values).sort();
  const half = sorted.length >> 1;
  const upper = sorted[half] ?? Number.NaN;
  return sorted.length % 2 === 1 ? upper : ((sorted[half - 1] ?? Number.NaN) + upper) / 2;
}

/** Pearson correlation r of two equally long series. */
export function correlation(x: ArrayLike<number>, y: ArrayLike<number>): number {
  const [mx, my] = [mean(x), mean(y)];
  let sxy = 0;
  let sxx = 0;
  let syy = 0;
  for (let i = 0; i < x.length; i += 1) {
    const dx = (x[i] ?? Number.NaN) - mx;
    const dy = (y[i] ?? Number.NaN) - my;
    sxy += dx * dy;
    sxx += dx * dx;
    syy += dy * dy;
  }
  return sxy / Math.sqrt(sxx * syy);
}
