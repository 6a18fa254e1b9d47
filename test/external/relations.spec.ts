/** All fifteen pairings of the isotropic constants on five materials: standard relations, worked out for this project in higher precision. */
import { constantsFrom, RelationRefused, type ElasticName } from '@strainwright/common/elasticity/relations';
import materials from './relations.json';

const NAMES: readonly ElasticName[] = ['E', 'nu', 'G', 'K', 'lambda', 'M'];
const PAIRS = NAMES.flatMap((a, i) => NAMES.slice(i + 1).map((b): [ElasticName, ElasticName] => [a, b]));

describe.each(materials)('$material', ({ constants }) => {
  const known = (name: ElasticName) => Number(constants[name]);

  it.each(PAIRS)('from %s and %s', (a, b) => {
    if (a === 'nu' && b === 'lambda' && known('nu') === 0) {
      // ν = 0 and λ = 0 leave E undetermined.
      expect(() => constantsFrom(a, 0, b, 0)).toThrow(RelationRefused);
      return;
    }
    const found = constantsFrom(a, known(a), b, known(b), known('nu') < 0);
    for (const name of NAMES) expect(Math.abs(found[name] - known(name))).toBeLessThanOrEqual(1e-10 * (known(name) === 0 ? known('E') : Math.abs(known(name))));
  });
});

it('(E, M) of an auxetic solid has a second root, with ν above zero', () => {
  const other = constantsFrom('E', 0.05, 'M', 0.0610859728506787);
  const expected = { nu: 0.259259259259, G: 0.0198529411765, K: 0.0346153846154, lambda: 0.0213800904977 };
  for (const name of ['nu', 'G', 'K', 'lambda'] as const) expect(Math.abs(other[name] / expected[name] - 1)).toBeLessThan(1e-11);
});
