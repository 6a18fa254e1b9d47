import type { Distribution } from '../contract/result';
import { Model, type Term } from './model';
import { propagateDistributions, shortestInterval } from './monte-carlo';

const input = (model: Model, key: string, value: number, u: number, distribution: Distribution = 'normal', degreesOfFreedom = Infinity): Term =>
  model.input({ key, label: key, unit: 'm', value, standardUncertainty: u, type: 'B', distribution, degreesOfFreedom, source: 'test' });

describe('propagateDistributions', () => {
  it('keeps the tolerance for mean and spread, and five times it for the ends, which is what a comparison at δ with trials at δ/5 needs (JCGM 101 8.2)', () => {
    const tolerance = 0.03;
    let [within, worst] = [0, 0];
    for (let seed = 1; seed <= 20; seed += 1) {
      const { outputs, stable } = propagateDistributions([input(new Model(), 'x', 0, 1)], { seed, tolerances: [tolerance] });
      const [x] = outputs;
      if (x === undefined) throw new Error('no output');
      expect(stable).toBe(true);
      within += [x.mean, x.standardUncertainty - 1].filter((error) => Math.abs(error) < tolerance).length;
      worst = Math.max(worst, Math.abs(x.low + 1.95996), Math.abs(x.high - 1.95996));
    }
    expect(within).toBeGreaterThanOrEqual(38);
    expect(worst).toBeLessThan(5 * tolerance);
  });

  it('needs two batches at least, and about four times the trials for half the tolerance', () => {
    const trials = (tolerance: number) => propagateDistributions([input(new Model(), 'x', 0, 1)], { seed: 3, tolerances: [tolerance] }).trials;
    expect(trials(10)).toBe(20_000);
    const ratio = trials(0.015) / trials(0.03);
    expect(ratio).toBeGreaterThan(2.5);
    expect(ratio).toBeLessThan(6);
  });

  it('goes on until every output has settled', () => {
    const model = new Model();
    const [x, y] = [input(model, 'x', 0, 1), input(model, 'y', 0, 1)];
    expect(propagateDistributions([x, y], { seed: 3, tolerances: [10, 0.03] }).trials).toBe(propagateDistributions([y, x], { seed: 3, tolerances: [0.03, 10] }).trials);
    expect(propagateDistributions([x, y], { seed: 3, tolerances: [10, 0.03] }).trials).toBeGreaterThan(20_000);
  });

  it('ends at its limit, and says so, where tails are too heavy to settle', () => {
    const model = new Model();
    const ratio = input(model, 'x', 1, 1).over(input(model, 'y', 0, 1));
    const progress: number[] = [];
    const result = propagateDistributions([ratio], { seed: 1, maximumTrials: 100_000, tolerances: [0.01], onProgress: (fraction) => progress.push(fraction) });
    expect(result).toMatchObject({ stable: false, trials: 100_000 });
    expect(progress).toEqual(Array.from({ length: 10 }, (_, i) => (i + 1) / 10));
  });

  it('is the same for the same seed', () => {
    const run = (seed: number) => propagateDistributions([input(new Model(), 'x', 1, 0.1, 'rectangular').power(3)], { seed, tolerances: [0.01] });
    expect(run(5)).toEqual(run(5));
    expect(run(5).outputs).not.toEqual(run(6).outputs);
  });

  it('draws outputs jointly: what they share correlates them', () => {
    const model = new Model();
    const [x, y] = [input(model, 'x', 0, 1), input(model, 'y', 0, 1)];
    const { correlation } = propagateDistributions([x.plus(y), x.minus(y), x], { seed: 2, tolerances: [0.05, 0.05, 0.05] });
    expect(correlation[0]?.[0]).toBe(1);
    expect(Math.abs(correlation[0]?.[1] ?? 1)).toBeLessThan(0.01);
    expect(correlation[2]?.[0]).toBeCloseTo(Math.SQRT1_2, 2);
  });

  it('wants outputs of one model, each with a tolerance', () => {
    const x = input(new Model(), 'x', 0, 1);
    expect(() => propagateDistributions([], { seed: 1, tolerances: [] })).toThrow(RangeError);
    expect(() => propagateDistributions([x], { seed: 1, tolerances: [] })).toThrow(RangeError);
    expect(() => propagateDistributions([x, input(new Model(), 'x', 0, 1)], { seed: 1, tolerances: [1, 1] })).toThrow(RangeError);
  });
});

describe('shortestInterval', () => {
  it('lies at the end of a skewed distribution: 0 to −ln 0.05 for the exponential', () => {
    const n = 100_000;
    const { low, high } = shortestInterval(Float64Array.from({ length: n }, (_, i) => -Math.log(1 - (i + 0.5) / n)));
    expect(low).toBeLessThan(0.001);
    expect(high).toBeCloseTo(-Math.log(0.05), 2);
  });

  it('takes the narrowest stretch that holds the share, pM steps of the sorted values (JCGM 101 7.7.4)', () => {
    expect(shortestInterval(Float64Array.from([0, 5, 6, 7, 8, 20]), 0.5)).toEqual({ low: 5, high: 8 });
  });
});
