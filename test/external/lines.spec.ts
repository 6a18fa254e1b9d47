/**
 * Straight lines: the first-degree sets of NIST StRD (certified to fifteen digits, recomputed with 120), Anscombe's four sets of 1973
 * (regressions recomputed in higher precision; the Huber estimate of a public statistics package), and the example of ISO/TS 28037:2010
 * clause 6 (data and results from memory).
 */
import { leastSquares, leastSquaresThroughOrigin } from '@strainwright/common/statistics/least-squares';
import { huber, theilSen } from '@strainwright/common/statistics/robust';
import { expectRelative } from './agreement';
import nist from './nist-lines.json';
import quartet from './quartet.json';

const NINE_DIGITS = 5e-10;

describe('NIST StRD', () => {
  it('Norris', () => {
    const { x, y, coefficients, standardErrors, residualStandardDeviation, rSquared } = nist.Norris;
    const line = leastSquares(x, y);
    expectRelative(line.intercept, coefficients[0] as string, NINE_DIGITS);
    expectRelative(line.slope, coefficients[1] as string, NINE_DIGITS);
    expectRelative(line.interceptUncertainty, standardErrors[0] as string, NINE_DIGITS);
    expectRelative(line.slopeUncertainty, standardErrors[1] as string, NINE_DIGITS);
    expectRelative(line.residualStandardDeviation, residualStandardDeviation, NINE_DIGITS);
    expectRelative(line.correlationCoefficient ** 2, rSquared, NINE_DIGITS);
  });

  it('NoInt1, through the origin, r² uncentred', () => {
    const { x, y, coefficients, standardErrors, residualStandardDeviation, rSquared } = nist.NoInt1;
    const line = leastSquaresThroughOrigin(x, y);
    expectRelative(line.slope, coefficients[0] as string, NINE_DIGITS);
    expectRelative(line.slopeUncertainty, standardErrors[0] as string, NINE_DIGITS);
    expectRelative(line.residualStandardDeviation, residualStandardDeviation, NINE_DIGITS);
    expectRelative(line.rSquared, rSquared, NINE_DIGITS);
  });
});

describe('Anscombe 1973', () => {
  it.each(quartet)('set $set', ({ x, y, leastSquares: expected, theilSen: robust }) => {
    const line = leastSquares(x, y);
    for (const name of ['slope', 'intercept', 'slopeUncertainty', 'interceptUncertainty', 'residualStandardDeviation', 'correlationCoefficient'] as const) expectRelative(line[name], expected[name], 1e-9);
    const { slope, intercept } = theilSen(x, y);
    expectRelative(slope, robust.slope, 1e-12);
    expectRelative(intercept, robust.intercept, 1e-12);
  });

  it('set y3 by Huber, k = 1.345, in the convention that rounds the quartile to 0.6745', () => {
    const { x, y } = quartet[2] as (typeof quartet)[number];
    const { slope, intercept } = huber(x, y, 1.345, 0.6745);
    expectRelative(slope, 0.345726221599332, 1e-9);
    expectRelative(intercept, 4.003461377786163, 1e-9);
  });
});

it('ISO/TS 28037 clause 6, coefficients', () => {
  const line = leastSquares([1, 2, 3, 4, 5, 6], [3.3, 5.6, 7.1, 9.3, 10.7, 12.1]);
  expect([line.intercept.toFixed(3), line.slope.toFixed(3)]).toEqual(['1.867', '1.757']);
  // χ² for u(y) = 0.5.
  expect((4 * line.residualStandardDeviation ** 2) / 0.25).toBeCloseTo(1.665, 3);
});
