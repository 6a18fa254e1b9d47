import { firstOrder } from '../uncertainty/first-order';
import { Model, type Term } from '../uncertainty/model';
import { constantsOfEandNu, constantsOfVelocities } from './constants-of-terms';
import { constantsFrom } from './relations';

const given = (model: Model, key: string, value: number, u: number): Term =>
  model.input({ key, label: key, unit: '1', value, standardUncertainty: u, type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: 'test' });

describe('constants as terms', () => {
  it('agrees with the relations between numbers', () => {
    const model = new Model();
    const dynamic = constantsOfVelocities(given(model, 'rho', 2700, 1), given(model, 'vP', 6420, 1), given(model, 'vS', 3040, 1));
    const byPair = constantsFrom('G', 2700 * 3040 ** 2, 'M', 2700 * 6420 ** 2);
    const fixed = constantsOfEandNu(model.constant(byPair.E), model.constant(byPair.nu));
    for (const name of ['E', 'nu', 'G', 'K'] as const) {
      expect(dynamic[name].value / byPair[name]).toBeCloseTo(1, 12);
      expect((fixed[name]?.value ?? Number.NaN) / byPair[name]).toBeCloseTo(1, 12);
    }
  });

  it('leaves ν free of the density and of a length that both velocities share', () => {
    const model = new Model();
    const length = given(model, 'length', 0.05, 1e-3);
    const { nu } = constantsOfVelocities(given(model, 'rho', 2700, 270), length.over(8e-6), length.over(16e-6));
    expect(nu.value).toBeCloseTo(1 / 3, 12);
    expect(firstOrder(nu).standardUncertainty).toBeLessThan(1e-12);
  });

  it('gives E alone where ν is missing', () => {
    const E = given(new Model(), 'E', 7e10, 1e8);
    expect(constantsOfEandNu(E, null)).toEqual({ E, nu: null, G: null, K: null });
  });
});
