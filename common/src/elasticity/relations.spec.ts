import { constantsFrom, RelationRefused, type ElasticName } from './relations';

const NAMES: ElasticName[] = ['E', 'nu', 'G', 'K', 'lambda', 'M'];
const code = (compute: () => unknown): string => {
  try {
    compute();
  } catch (error) {
    if (error instanceof RelationRefused) return error.code;
    throw error;
  }
  return 'accepted';
};

describe('constantsFrom', () => {
  it('comes back to the same solid from each of its pairs, for ν across the admissible range', () => {
    for (const nu of [-0.9, -0.5, -0.1, 0.05, 0.2, 0.33, 0.45, 0.49]) {
      const solid = constantsFrom('E', 70e9, 'nu', nu);
      NAMES.forEach((a, i) => NAMES.slice(i + 1).forEach((b) => {
        const again = constantsFrom(a, solid[a], b, solid[b], nu < 0);
        for (const name of NAMES) expect(Math.abs(again[name] - solid[name])).toBeLessThan(1e-10 * Math.abs(solid[name]));
      }));
    }
  });

  it.each<[ElasticName, number, ElasticName, number]>([
    ['E', 1, 'nu', 0.5], ['E', 1, 'nu', -1], ['E', 1, 'nu', 0.6], ['E', -1, 'nu', 0.3], ['E', 3, 'G', 1], ['E', 9, 'K', 1], ['E', 2, 'M', 1], ['K', 1, 'lambda', 1], ['G', -1, 'K', 1], ['E', Number.NaN, 'nu', 0.3],
  ])('refuses %s = %d with %s = %d: no such solid', (a, x, b, y) => {
    expect(code(() => constantsFrom(a, x, b, y))).toBe('inadmissible');
  });

  it('refuses what leaves the constants open, and pairs in no known order', () => {
    expect(code(() => constantsFrom('nu', 0, 'lambda', 0))).toBe('undetermined');
    expect(code(() => constantsFrom('nu', 0.3, 'E', 1))).toBe('unknown-pair');
  });

  it('has two solids for (E, M): one on each side of ν = 0', () => {
    expect(constantsFrom('E', 0.9, 'M', 1).nu).toBeGreaterThan(0);
    expect(constantsFrom('E', 0.9, 'M', 1, true).nu).toBeLessThan(0);
    expect(constantsFrom('E', 1, 'M', 1).nu).toBe(constantsFrom('E', 1, 'M', 1, true).nu);
  });
});
