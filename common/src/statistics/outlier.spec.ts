import { grubbsLimit, outlierOf } from './outlier';

describe('Grubbs’ test', () => {
  // ASTM E178 Table 1 is one-sided; its 2.5 % and 0.5 % columns are 5 % and 1 % of two sides (recomputed by quadrature).
  it.each([[3, 1.1543, 1.1547], [4, 1.4813, 1.4963], [7, 2.02, 2.1391], [10, 2.29, 2.4821], [15, 2.5483, 2.8061]])('n = %d', (n, five, one) => {
    expect(grubbsLimit(n, 0.05)).toBeCloseTo(five, 3);
    expect(grubbsLimit(n, 0.01)).toBeCloseTo(one, 3);
  });

  it('finds 205.2 among seven', () => {
    const found = outlierOf([210.3, 209.8, 211.0, 210.1, 205.2, 210.6, 209.9]);
    expect(found?.value).toBe(205.2);
    expect(found?.G).toBeCloseTo(2.2169070051503, 10);
  });

  it('finds none in an even series, in three values, in values all alike', () => {
    expect(outlierOf([1, 2, 3, 4, 5])).toBeNull();
    expect(outlierOf([1, 1, 9])).toBeNull();
    expect(outlierOf([2, 2, 2, 2])).toBeNull();
  });

  it('needs three values for a limit', () => {
    expect(() => grubbsLimit(2, 0.05)).toThrow(RangeError);
  });
});
