/** Elastic constants with uncertainties in closed form, computed with 40 digits for this project; agreement to 1e-10. */
import { constantsOfEandNu } from '@strainwright/common/elasticity/constants-of-terms';
import { volumetricStrain } from '@strainwright/common/elasticity/volumetric-strain';
import { firstOrder } from '@strainwright/common/uncertainty/first-order';
import { Model, type Term } from '@strainwright/common/uncertainty/model';
import { expectRelative } from './agreement';

const CLOSED_FORM = 1e-10;
const input = (model: Model, key: string, value: number, u: number): Term =>
  model.input({ key, label: key, unit: '1', value, standardUncertainty: u, type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: 'O12' });

function expectTerm(term: Term | null, value: string, u: string): void {
  if (term === null) throw new Error('No term');
  expectRelative(term.value, value, CLOSED_FORM);
  expectRelative(firstOrder(term).standardUncertainty, u, CLOSED_FORM);
}

describe('O12, no transverse gauge', () => {
  it('ν assumed: G hardly feels it, K does', () => {
    const model = new Model();
    const { G, K } = constantsOfEandNu(input(model, 'E', 69.2, 0.7), input(model, 'nu', 0.33, 0.02));
    expectTerm(G, '26.015037593985', '0.47147885739085');
    expectTerm(K, '67.843137254902', '8.0109950829836');
  });

  it('ν from E and G', () => {
    const model = new Model();
    const [E, G] = [input(model, 'E', 69.2, 0.7), input(model, 'G', 25.9, 0.3)];
    const nu = E.over(G.times(2)).minus(1);
    expectTerm(nu, '0.33590733590734', '0.020543964243937');
    expectTerm(constantsOfEandNu(E, nu).K, '70.285490196078', '9.2826880485859');
    expectTerm(E.times(G).over(G.times(3).minus(E).times(3)), '70.285490196078', '9.2826880485859');
  });
});

describe('O18, change of volume: exact against first order', () => {
  it.each([
    { axial: 0.001, nu: 0.3, exact: '0.00039949009', error: '5.0991e-7' },
    { axial: 0.01, nu: 0.3, exact: '0.00394909', error: '5.091e-5' },
    { axial: 0.05, nu: 0.3, exact: '0.01873625', error: '0.00126375' },
    { axial: 0.01, nu: 0.5, exact: '-7.475e-5', error: '7.475e-5' },
    { axial: -0.002, nu: 0.2, exact: '-0.00120144032', error: '1.44032e-6' },
    { axial: 0.1, nu: 0.4999, exact: '-0.00722909989', error: '0.00724909989' },
  ])('ε = $axial, ν = $nu', ({ axial, nu, exact, error }) => {
    const found = volumetricStrain(axial, nu);
    expectRelative(found.exact, exact, CLOSED_FORM);
    expectRelative(found.error, error, CLOSED_FORM);
    expect(found.firstOrder).toBeCloseTo(axial * (1 - 2 * nu), 15);
  });
});
