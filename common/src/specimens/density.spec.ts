import { firstOrder } from '../uncertainty/first-order';
import { Model, type Term } from '../uncertainty/model';
import { densityInWater, waterDensity, waterRefusal } from './density';

const exact = (model: Model, key: string, value: number): Term => model.input({ key, label: key, unit: '', value, standardUncertainty: 0, type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: '' });

describe('waterDensity', () => {
  // CIPM-recommended table of 2001 (from memory): 999.8428 at 0 °C, its maximum near 3.98 °C, 998.2067 at 20 °C, 995.6488 at 30 °C, 992.2152 at 40 °C.
  it.each([[0, 999.8428], [3.983035, 999.97495], [20, 998.2067], [25, 997.047], [30, 995.6488], [40, 992.2152]])('%d °C', (celsius, expected) => {
    expect(Math.abs(waterDensity(celsius + 273.15) - expected)).toBeLessThan(0.002);
  });

  it.each([-0.1, 40.1, Number.NaN])('refuses %d °C', (celsius) => {
    expect(() => waterDensity(celsius + 273.15)).toThrow(RangeError);
  });
});

describe('densityInWater', () => {
  // A body of V = 20 cm³ and ρ = 2650 kg/m³ on a balance adjusted with weights of 8000 kg/m³ in air of 1.2 kg/m³, water at 20 °C:
  // the balance shows (ρ − 1.2) V/(1 − 1.2/8000) in air and (ρ − ρ_w) V/(1 − 1.2/8000) in water.
  const [V, rho, air, water, scale] = [20e-6, 2650, 1.2, waterDensity(293.15), 1 - 1.2 / 8000];
  const model = new Model();
  const [mass, apparent, temperature] = [exact(model, 'm', ((rho - air) * V) / scale), exact(model, 'w', ((rho - water) * V) / scale), exact(model, 't', 293.15)];
  const found = densityInWater(model, mass, apparent, temperature);

  it('gives the density back, buoyancy of air and weights included', () => {
    expect(found.value / rho).toBeCloseTo(1, 12);
  });

  it('feels the water’s temperature as its density changes, 0.0207 % a kelvin at 20 °C', () => {
    const first = firstOrder(found);
    const perKelvin = first.sensitivities[model.inputs.findIndex((i) => i.key === 't')] ?? 0;
    expect(perKelvin / rho).toBeCloseTo(-2.07e-4, 6);
  });

  it('says why a weighing cannot be', () => {
    expect(waterRefusal(mass, apparent, temperature)).toBeNull();
    expect(waterRefusal(apparent, mass, temperature)).toContain('in air');
    expect(waterRefusal(mass, apparent, exact(model, 'cold', 20))).toContain('Water at');
    // A body that floats pulls upwards: its apparent mass is negative, and that is no slip.
    expect(waterRefusal(mass, exact(model, 'floats', -0.001), temperature)).toBeNull();
  });
});
