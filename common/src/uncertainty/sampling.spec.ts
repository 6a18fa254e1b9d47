import type { Distribution } from '../contract/result';
import { correlation, mean, standardDeviation } from '../statistics/descriptive';
import { tQuantile } from '../statistics/distributions';
import { Model, type Term } from './model';
import { RandomStream } from './random-stream';
import { Sampler } from './sampling';

const N = 100_000;
const input = (model: Model, key: string, distribution: Distribution, u: number, degreesOfFreedom = Infinity): Term =>
  model.input({ key, label: key, unit: 'm', value: 10, standardUncertainty: u, type: 'B', distribution, degreesOfFreedom, source: 'test' });

function draw(model: Model, seed = 1): Float64Array[] {
  const trials = model.inputs.map(() => new Float64Array(N));
  new Sampler(model, new RandomStream(seed)).fill(trials);
  return trials;
}
const drawOne = (distribution: Distribution, u: number, degreesOfFreedom = Infinity): Float64Array => {
  const model = new Model();
  input(model, 'x', distribution, u, degreesOfFreedom);
  return draw(model)[0] as Float64Array;
};
const quantile = (values: Float64Array, p: number): number => values.slice().sort()[Math.floor(p * N)] as number;

describe('Sampler', () => {
  // Half-widths of the distributions with u = 1 and their quartiles: JCGM 100 4.3.7–4.3.9, JCGM 101 6.4.
  it.each<{ distribution: Distribution; half: number; quartile: number }>([
    { distribution: 'normal', half: Infinity, quartile: 0.67449 },
    { distribution: 'rectangular', half: Math.sqrt(3), quartile: Math.sqrt(3) / 2 },
    { distribution: 'triangular', half: Math.sqrt(6), quartile: Math.sqrt(6) * (1 - Math.SQRT1_2) },
    { distribution: 'arcsine', half: Math.SQRT2, quartile: 1 },
  ])('draws $distribution with its mean, spread, bounds and quartile', ({ distribution, half, quartile }) => {
    const x = drawOne(distribution, 1);
    expect(Math.abs(mean(x) - 10)).toBeLessThan(5 / Math.sqrt(N));
    expect(Math.abs(standardDeviation(x) - 1)).toBeLessThan(0.01);
    expect(Math.abs(quantile(x, 0.75) - 10 - quartile)).toBeLessThan(0.02);
    expect(x.every((v) => Math.abs(v - 10) <= half)).toBe(true);
    if (Number.isFinite(half)) expect(Math.max(...x.subarray(0, 50_000)) - 10).toBeGreaterThan(0.97 * half);
  });

  it.each([1, 3, 9])('draws a scaled and shifted t of %d degrees of freedom (JCGM 101 6.4.9)', (nu) => {
    const x = drawOne('t', 0.2, nu);
    for (const p of [0.05, 0.25, 0.9, 0.975]) {
      const expected = tQuantile(p, nu);
      expect(Math.abs((quantile(x, p) - 10) / 0.2 - expected)).toBeLessThan(0.04 * Math.max(1, Math.abs(expected)));
    }
  });

  it('draws an input without uncertainty as its value', () => {
    expect(new Set(drawOne('rectangular', 0))).toEqual(new Set([10]));
  });

  it('draws correlated inputs with their correlations, others independently', () => {
    const model = new Model();
    const [a, b, c] = [input(model, 'a', 'normal', 1), input(model, 'b', 'normal', 3), input(model, 'c', 'normal', 1)];
    input(model, 'd', 'normal', 1);
    model.correlate(a, b, -0.8);
    model.correlate(b, c, 0.5);
    const [x, y, z, w] = draw(model) as [Float64Array, Float64Array, Float64Array, Float64Array];
    const seen = [correlation(x, y), correlation(y, z), correlation(x, z), correlation(x, w)];
    [-0.8, 0.5, 0, 0].forEach((r, i) => expect(Math.abs((seen[i] as number) - r)).toBeLessThan(0.01));
    expect(Math.abs(standardDeviation(y) - 3)).toBeLessThan(0.03);
  });

  it('draws correlated inputs of few degrees of freedom as joint t', () => {
    const model = new Model();
    model.correlate(input(model, 'a', 'normal', 1, 5), input(model, 'b', 'normal', 1, 5), 0.9);
    const [x, y] = draw(model) as [Float64Array, Float64Array];
    expect(Math.abs(quantile(x, 0.975) - 10 - tQuantile(0.975, 5))).toBeLessThan(0.05);
    expect(Math.abs(correlation(x, y) - 0.9)).toBeLessThan(0.01);
  });

  it('refuses correlations that contradict one another', () => {
    const model = new Model();
    const [a, b, c] = [input(model, 'a', 'normal', 1), input(model, 'b', 'normal', 1), input(model, 'c', 'normal', 1)];
    model.correlate(a, b, 1);
    model.correlate(b, c, 1);
    model.correlate(a, c, -1);
    expect(() => new Sampler(model, new RandomStream(1))).toThrow('contradict');
  });

  it('draws the same for the same seed and other numbers for another', () => {
    const model = new Model();
    input(model, 'x', 't', 1, 4);
    expect(draw(model, 7)).toEqual(draw(model, 7));
    expect(draw(model, 7)[0]?.[0]).not.toBe(draw(model, 8)[0]?.[0]);
  });
});
