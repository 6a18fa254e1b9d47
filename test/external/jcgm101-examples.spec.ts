/**
 * Worked examples of JCGM 101:2008 clause 9, to the digits printed there (from memory) or computed exactly. Intervals are shortest 95 %.
 * The ends of a shortest interval settle slowly with the trials, its width fast; tolerances say so.
 */
import type { Distribution } from '@strainwright/common/contract/result';
import { elasticResult } from '@strainwright/common/uncertainty/elastic-result';
import { coverageFactor, firstOrder } from '@strainwright/common/uncertainty/first-order';
import { Model, type Term } from '@strainwright/common/uncertainty/model';
import { numericalTolerance, propagateDistributions, type Propagated } from '@strainwright/common/uncertainty/monte-carlo';
import { secondOrderUncertainty } from '@strainwright/common/uncertainty/second-order';
import { expectPrinted, expectRelative } from './agreement';

const input = (model: Model, key: string, value: number, standardUncertainty: number, distribution: Distribution = 'normal'): Term =>
  model.input({ key, label: key, unit: '1', value, standardUncertainty, type: 'B', distribution, degreesOfFreedom: Infinity, source: 'JCGM 101 clause 9' });
const rectangular = (model: Model, key: string, low: number, high: number): Term => input(model, key, (low + high) / 2, (high - low) / Math.sqrt(12), 'rectangular');

/** A million trials: no tolerance is met. */
function trials(term: Term): Propagated {
  const [output] = propagateDistributions([term], { seed: 20260101, maximumTrials: 1_000_000, tolerances: [0] }).outputs;
  if (output === undefined) throw new Error('No output');
  return output;
}
const guf = (term: Term) => {
  const { value, standardUncertainty, degreesOfFreedom } = firstOrder(term);
  const U = coverageFactor(degreesOfFreedom) * standardUncertainty;
  return { y: value, u: standardUncertainty, low: value - U, high: value + U };
};
/** How the product judges a quantity; which of the four constants it stands for does not matter. */
const judged = (term: Term) =>
  elasticResult({ basis: 'static', constants: { E: term, nu: null, G: null, K: null }, origin: { E: 'measured', nu: 'measured', G: 'derived', K: 'derived' }, findings: [], seed: 1 }).monteCarlo.comparison.E;

// 7.9.2: u = c·10^ℓ with c of n digits gives δ = ½·10^ℓ. The last is the standard's own example, from memory.
it.each([[0.35, 2, 0.005], [0.0754, 1, 0.005], [0.0754, 2, 0.0005], [2, 2, 0.05], [0.00035, 1, 0.00005], [0.096, 1, 0.05], [9.96, 2, 0.5]])('7.9.2: u = %d to %d digits has the tolerance %d', (u, digits, tolerance) => {
  expectRelative(numericalTolerance(u, digits), tolerance, 1e-12);
});

describe('9.2, sums of four inputs of unit variance', () => {
  it('9.2.2, normal: u = 2.0, ±3.92', () => {
    const model = new Model();
    const sum = ['X1', 'X2', 'X3', 'X4'].map((key) => input(model, key, 0, 1)).reduce((a, b) => a.plus(b));
    const { mean, standardUncertainty, low, high } = trials(sum);
    expect(Math.abs(mean)).toBeLessThan(0.01);
    expect(Math.abs(standardUncertainty - 2)).toBeLessThan(0.005);
    expect(Math.abs((high - low) / 2 - 3.91992797)).toBeLessThan(0.015);
    expectPrinted(guf(sum).u, '2.0');
    expectPrinted(guf(sum).high, '3.92');
    expect(judged(sum)?.agrees).toBe(true);
  });

  it('9.2.3, rectangular: ±3.88 where the first order says ±3.92', () => {
    const model = new Model();
    const sum = ['X1', 'X2', 'X3', 'X4'].map((key) => input(model, key, 0, 1, 'rectangular')).reduce((a, b) => a.plus(b));
    const { low, high } = trials(sum);
    const exact = 2 * Math.sqrt(3) * (2 - (3 / 5) ** 0.25);
    expect(Math.abs((high - low) / 2 - exact)).toBeLessThan(0.015);
    expectPrinted(exact, '3.88');
    expectPrinted(guf(sum).high, '3.92');
  });
});

describe('9.3, calibration of a mass (mg)', () => {
  const model = new Model();
  const nominal = 100_000;
  const balance = input(model, 'm_Rc', 100_000, 0.05).plus(input(model, 'δm_Rc', 1.234, 0.02));
  const buoyancy = rectangular(model, 'ρ_a', 1.1, 1.3).minus(1.2).times(rectangular(model, 'ρ_W', 7000, 9000).power(-1).minus(rectangular(model, 'ρ_R', 7950, 8050).power(-1)));
  const deviation = balance.times(buoyancy.plus(1)).minus(nominal);

  it('first order: u = 0.0539, not validated', () => {
    const first = guf(deviation);
    expectPrinted(first.y, '1.234');
    expectRelative(first.u, 0.05385164807134504, 1e-6);
    expectPrinted(first.low, '1.1285');
    expectPrinted(first.high, '1.3395');
    const check = judged(deviation);
    expectRelative(check?.tolerance ?? 0, 0.005, 1e-12);
    expect(check?.agrees).toBe(false);
    expect(Math.abs((check?.lowDifference ?? 0) - 0.0451)).toBeLessThan(0.003);
    expect(Math.abs((check?.highDifference ?? 0) - 0.043)).toBeLessThan(0.003);
  });

  it('Monte Carlo: 1.2341, u = 0.0754, 1.0834 to 1.3825', () => {
    const { mean, standardUncertainty, low, high } = trials(deviation);
    expect(Math.abs(mean - 1.234)).toBeLessThan(3e-4);
    expect(Math.abs(standardUncertainty - 0.0755)).toBeLessThan(2e-4);
    expect(Math.abs(low - 1.0834)).toBeLessThan(0.002);
    expect(Math.abs(high - 1.3825)).toBeLessThan(0.002);
  });

  it('second order: u = 0.075, validated', () => {
    const u = secondOrderUncertainty(deviation) ?? Number.NaN;
    expectPrinted(u, '0.075');
    expectRelative(u, 0.07496302618717371, 1e-3);
    const { low, high } = trials(deviation);
    expect(Math.max(Math.abs(1.234 - 1.96 * u - low), Math.abs(1.234 + 1.96 * u - high))).toBeLessThan(0.005);
  });
});

describe('9.4, comparison loss: δY = X1² + X2², u = 0.005, uncorrelated', () => {
  // Exact from the non-central χ² distribution; the printed intervals differ from these in the last digit.
  it.each([
    { x: 0, mean: 5e-5, u: 5e-5, low: 0, high: 0.00014978661367769948, first: '0', second: '0.000050' },
    { x: 0.01, mean: 1.5e-4, u: 0.0001118033988749895, low: 0, high: 0.0003660052897467759, first: '0.000100', second: '0.000112' },
    { x: 0.05, mean: 0.00255, u: 0.0005024937810560445, low: 0.0015935696605409136, high: 0.0035485698056907902, first: '0.000500', second: '0.000502' },
  ])('x1 = $x', ({ x, mean, u, low, high, first, second }) => {
    const model = new Model();
    const loss = input(model, 'X1', x, 0.005).power(2).plus(input(model, 'X2', 0, 0.005).power(2));
    const mc = trials(loss);
    expect(Math.abs(mc.mean - mean)).toBeLessThan(0.005 * u);
    expect(Math.abs(mc.standardUncertainty - u)).toBeLessThan(0.01 * u);
    expect(Math.abs(mc.low - low)).toBeLessThan(0.06 * u);
    expect(Math.abs(mc.high - high)).toBeLessThan(0.06 * u);
    expectPrinted(loss.value, String(x * x));
    expectPrinted(firstOrder(loss).standardUncertainty, first);
    expectPrinted(secondOrderUncertainty(loss) ?? Number.NaN, second);
    expect(judged(loss)?.agrees).toBe(false);
  });
});
