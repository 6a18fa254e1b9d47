import { RandomStream } from '../uncertainty/random-stream';
import { chord } from './chord-fit';

const E = 30e9;
const curved = (strain: number) => E * strain * (1 - 100 * strain);

describe('chord', () => {
  const x = Float64Array.from({ length: 13 }, (_, i) => i * 1e-4);
  const branch = { x, y: x.map(curved), t: x.map((v) => -0.2 * v) };

  it('interpolates linearly between neighbouring rows', () => {
    const fit = chord(branch, { along: 'strain', from: 0.00025, to: 0.00085 })!;
    const between = (a: number, b: number) => (curved(a) + curved(b)) / 2;
    expect(fit.axial.slope / ((between(8e-4, 9e-4) - between(2e-4, 3e-4)) / 6e-4) - 1).toBeCloseTo(0, 12);
    expect(fit.transverse!.slope).toBeCloseTo(-0.2, 12);
    expect([fit.strainFrom, fit.strainTo]).toEqual([0.00025, 0.00085]);
    expect(fit.axial.intercept + fit.axial.slope * fit.strainFrom).toBeCloseTo(fit.stressFrom, 3);
  });

  it('finds the same chord by the stresses at its ends', () => {
    const fit = chord(branch, { along: 'strain', from: 0.0002, to: 0.0009 })!;
    const same = chord(branch, { along: 'stress', from: fit.stressFrom, to: fit.stressTo })!;
    expect(same.axial.slope / fit.axial.slope - 1).toBeCloseTo(0, 10);
    expect(same.strainTo).toBeCloseTo(0.0009, 12);
  });

  it('does not count the curvature of the record as noise', () => {
    const fit = chord(branch, { along: 'strain', from: 0.0001, to: 0.0011 })!;
    expect(fit.axial.slopeUncertainty).toBeLessThan(1e-6 * fit.axial.slope);
  });

  it('averages the rows about an end that noise passes several times', () => {
    const errors = Array.from({ length: 100 }, (_, seed) => {
      const random = new RandomStream(seed);
      const strains = Float64Array.from({ length: 5000 }, (_, i) => i * 4e-7);
      const noisy = { x: strains.map((v) => v + 2e-6 * random.normal()), y: strains.map((v) => E * v + 1e5 * random.normal()), t: null };
      const fit = chord(noisy, { along: 'strain', from: 0.0005, to: 0.0015 })!;
      return { error: fit.axial.slope - E, u: fit.axial.slopeUncertainty };
    });
    const scatter = Math.sqrt(errors.reduce((sum, e) => sum + e.error ** 2, 0) / errors.length);
    const claim = Math.sqrt(errors.reduce((sum, e) => sum + e.u ** 2, 0) / errors.length);
    // Two single rows would scatter by √2·√(1e5² + (E·2e-6)²)/1e-3.
    expect(scatter).toBeLessThan(0.3 * (Math.SQRT2 * Math.hypot(1e5, E * 2e-6)) / 1e-3);
    expect(claim / scatter).toBeGreaterThan(0.8);
    expect(claim / scatter).toBeLessThan(1.25);
  });

  it.each([[0.0005, 0.01], [-0.001, 0.0005], [0.00051, 0.00052]])('is null where the record does not hold %p to %p', (from, to) => {
    expect(chord(branch, { along: 'strain', from, to })).toBeNull();
  });
});
