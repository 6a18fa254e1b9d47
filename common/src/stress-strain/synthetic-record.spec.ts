import { strainAt, syntheticRecord, type RecordSpec } from './synthetic-record';

const spec: RecordSpec = { rows: 201, interval: 0.1, E: 70e9, nu: 0.33, peakStress: 100e6, area: 1e-4, noise: { force: 0, strain: 0 }, seed: 5 };

describe('syntheticRecord', () => {
  it('has the slope E and the ratio ν in every step when nothing disturbs it', () => {
    const { force, axial1, transverse } = syntheticRecord(spec);
    for (let i = 1; i < spec.rows; i += 1) {
      const [dF, de, dt] = [(force[i] ?? NaN) - (force[i - 1] ?? NaN), (axial1[i] ?? NaN) - (axial1[i - 1] ?? NaN), (transverse[i] ?? NaN) - (transverse[i - 1] ?? NaN)];
      expect(dF / spec.area / de / spec.E).toBeCloseTo(1, 9);
      expect(-dt / de).toBeCloseTo(spec.nu, 9);
    }
  });

  it('keeps the slope E between a toe that has died out and the knee', () => {
    const shaped: RecordSpec = { ...spec, toe: { strain: 1e-4, stress: 2e6 }, knee: { stress: 80e6, curvature: 1e-8 } };
    const slope = (from: number, to: number) => (to - from) / (strainAt(shaped, to) - strainAt(shaped, from));
    expect(slope(40e6, 80e6) / spec.E).toBeCloseTo(1, 6);
    expect(slope(0, 2e6)).toBeLessThan(0.5 * spec.E);
    expect(slope(90e6, 100e6)).toBeLessThan(0.95 * spec.E);
  });

  it('spreads opposed gauges by the bending and leaves their mean alone', () => {
    const { axial1, axial2 } = syntheticRecord({ ...spec, bending: 0.04 });
    const [a, b] = [axial1.at(-1) ?? NaN, axial2.at(-1) ?? NaN];
    expect((a + b) / 2).toBeCloseTo(spec.peakStress / spec.E, 12);
    expect((a - b) / (a + b)).toBeCloseTo(0.04, 12);
  });

  it('gives the same record for the same seed, and noise of the size asked for', () => {
    const noisy = { ...spec, rows: 4001, noise: { force: 0, strain: 2e-6 } };
    const [one, again] = [syntheticRecord(noisy), syntheticRecord(noisy)];
    expect(again.axial1).toEqual(one.axial1);
    const rest = Array.from(one.axial1, (v, i) => v - (noisy.peakStress * i) / (noisy.rows - 1) / noisy.E);
    const s = Math.sqrt(rest.reduce((sum, r) => sum + r * r, 0) / rest.length);
    expect(s / 2e-6).toBeCloseTo(1, 1);
  });
});
