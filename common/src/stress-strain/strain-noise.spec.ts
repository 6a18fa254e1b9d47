import { RandomStream } from '../uncertainty/random-stream';
import { regression } from './line-fit';
import { momentsOf, slopeOf } from './moments';
import { strainNoise } from './strain-noise';

const E = 70e9;
const rows = 500;
const SPAN = 5e-4;

/** Mean relative error of plain and corrected slopes over seeded records. */
function meanErrors(make: (i: number, random: RandomStream) => { strain: number; stress: number }): { plain: number; corrected: number } {
  let [plain, corrected] = [0, 0];
  const records = 200;
  for (let seed = 0; seed < records; seed += 1) {
    const random = new RandomStream(seed);
    const points = Array.from({ length: rows }, (_, i) => make(i, random));
    const x = Float64Array.from(points, (p) => p.strain);
    const y = Float64Array.from(points, (p) => p.stress);
    plain += (slopeOf(momentsOf(x, y)) / E - 1) / records;
    corrected += (regression({ x, y, t: null }, 0, rows - 1).axial.slope / E - 1) / records;
  }
  return { plain, corrected };
}

describe('strainNoise', () => {
  const truth = (i: number) => (SPAN * i) / rows;

  it('frees the slope of what noisy strain takes from it', () => {
    const noise = 1e-5;
    const { plain, corrected } = meanErrors((i, random) => ({ strain: truth(i) + noise * random.normal(), stress: E * truth(i) }));
    // σx²/Var(x) = (1e-5)²·12/(5e-4)² = 0.48 %.
    expect(plain).toBeCloseTo(-0.0048, 3);
    expect(Math.abs(corrected)).toBeLessThan(0.0005);
  });

  it('takes a fluctuation of the load, which moves both channels, for no error', () => {
    const { corrected } = meanErrors((i, random) => {
      const strain = truth(i) + 1e-5 * random.normal();
      return { strain, stress: E * strain };
    });
    expect(Math.abs(corrected)).toBeLessThan(1e-9);
  });

  it('does not correct for noise of the stress', () => {
    const random = new RandomStream(1);
    const x = Float64Array.from({ length: rows }, (_, i) => truth(i));
    const y = x.map((v) => E * v + 1e6 * random.normal());
    const m = momentsOf(x, y);
    expect(strainNoise(x, y, slopeOf(m), m.sxx).attenuation).toBe(0);
  });
});
