import { coverageFactor, covariance, firstOrder, uncertaintyOf } from './first-order';
import { Model, type Term } from './model';

const input = (model: Model, key: string, value: number, u: number, degreesOfFreedom = Infinity): Term =>
  model.input({ key, label: key, unit: 'm', value, standardUncertainty: u, type: 'A', distribution: 'normal', degreesOfFreedom, source: 'test' });

describe('firstOrder', () => {
  it('adds relative variances of a product and a quotient (JCGM 100 5.1.6)', () => {
    const model = new Model();
    const y = input(model, 'a', 2, 0.02).times(input(model, 'b', 5, 0.1)).over(input(model, 'c', 4, 0.12));
    expect(firstOrder(y).standardUncertainty / y.value).toBeCloseTo(Math.sqrt(0.01 ** 2 + 0.02 ** 2 + 0.03 ** 2), 14);
  });

  it('counts a shared input once: x − x is certain, x + x is twice as uncertain', () => {
    const model = new Model();
    const x = input(model, 'x', 3, 0.1);
    expect(firstOrder(x.minus(x)).standardUncertainty).toBe(0);
    expect(firstOrder(x.plus(x)).standardUncertainty).toBeCloseTo(0.2, 15);
  });

  it.each([[1, 0.7], [-1, 0.1], [0, 0.5], [0.5, Math.sqrt(0.25 + 0.12)]])('adds 0.3 and 0.4 correlated by %d to %d', (r, u) => {
    const model = new Model();
    const [a, b] = [input(model, 'a', 1, 0.3), input(model, 'b', 1, 0.4)];
    model.correlate(a, b, r);
    expect(firstOrder(a.plus(b)).standardUncertainty).toBeCloseTo(u, 14);
  });

  it('gives the covariance of two quantities of the same inputs', () => {
    const model = new Model();
    const [a, b] = [input(model, 'a', 1, 0.3), input(model, 'b', 1, 0.4)];
    const gradient = (term: Term) => model.gradient(term);
    expect(covariance(model, gradient(a.plus(b)), gradient(a.minus(b)))).toBeCloseTo(0.09 - 0.16, 15);
  });

  it('gives correlated inputs one share of the degrees of freedom, the fewest among them', () => {
    const model = new Model();
    const [a, b] = [input(model, 'a', 1, 0.3, 9), input(model, 'b', 1, 0.3, 5)];
    model.correlate(a, b, 1);
    expect(firstOrder(a.plus(b)).degreesOfFreedom).toBeCloseTo(5, 12);
    expect(uncertaintyOf(input(model, 'c', 1, 0.1), 'm')).toEqual({ value: 1, standardUncertainty: 0.1, degreesOfFreedom: null, unit: 'm' });
  });

  // Student's t at 95 %, any table: t(16) 2.120, t(1) 12.706, t(∞) 1.960.
  it.each([[16.99, 2.1199], [16, 2.1199], [0.4, 12.7062], [Infinity, 1.95996]])('covers 95 %% at ν = %d with k = %d, ν truncated down', (nu, k) => {
    expect(coverageFactor(nu)).toBeCloseTo(k, 4);
  });
});
