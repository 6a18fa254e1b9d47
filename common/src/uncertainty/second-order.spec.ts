import { Model, type Term } from './model';
import { secondOrderUncertainty } from './second-order';

const input = (model: Model, key: string, value: number, u: number): Term =>
  model.input({ key, label: key, unit: 'm', value, standardUncertainty: u, type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: 'test' });

describe('secondOrderUncertainty', () => {
  it('is exact for a product of independent inputs: x²u_y² + y²u_x² + u_x²u_y²', () => {
    const model = new Model();
    const u = secondOrderUncertainty(input(model, 'x', 2, 0.3).times(input(model, 'y', 5, 0.4)));
    expect(u).toBeCloseTo(Math.sqrt(4 * 0.16 + 25 * 0.09 + 0.09 * 0.16), 10);
  });

  it('is exact for the square of a normal input: 4x²u² + 2u⁴, where the first order says nothing at x = 0', () => {
    for (const x of [0, 0.2, 3]) expect(secondOrderUncertainty(input(new Model(), 'x', x, 0.5).power(2))).toBeCloseTo(Math.sqrt(4 * x * x * 0.25 + 2 * 0.5 ** 4), 9);
  });

  it('adds the third derivative: for a cube f_i f_ijj = 18x²u⁴ beside ½f_ij² = 18x²u⁴', () => {
    expect(secondOrderUncertainty(input(new Model(), 'x', 2, 0.1).power(3))).toBeCloseTo(Math.sqrt(9 * 16 * 0.01 + (18 * 4 + 18 * 4) * 1e-4), 6);
  });

  it('gives nothing for correlated inputs, for which it does not hold', () => {
    const model = new Model();
    const [x, y] = [input(model, 'x', 1, 0.1), input(model, 'y', 1, 0.1)];
    model.correlate(x, y, 0.5);
    expect(secondOrderUncertainty(x.times(y))).toBeNull();
  });
});
