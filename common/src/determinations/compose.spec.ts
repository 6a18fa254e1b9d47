import type { ElasticResult } from '../contract/result';
import { constantsOfEandNu } from '../elasticity/constants-of-terms';
import { elasticResult } from '../uncertainty/elastic-result';
import { Model } from '../uncertainty/model';
import { agreements, composeDetermination } from './compose';

const ORIGIN = { E: 'measured', nu: 'measured', G: 'derived', K: 'derived' } as const;

/** E = slope · (1 + c): c is the load cell's calibration, common to all fits; the slope's own uncertainty is not. */
function fit(slope: number, own: number, common = 0.005): ElasticResult {
  const model = new Model();
  const input = (key: string, value: number, standardUncertainty: number, unit: string) => model.input({ key, label: key, unit, value, standardUncertainty, type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: 'test' });
  const E = input('slope', slope, own, 'Pa').times(input('calibration.cell', 0, common, '1').plus(1));
  const nu = input('ratio', 0.3, 0.003, '1');
  return elasticResult({ basis: 'static', constants: constantsOfEandNu(E, nu), origin: ORIGIN, findings: [], seed: 1, maximumTrials: 20_000 });
}

const adopted = (...slopes: [slope: number, own: number][]) => slopes.map(([slope, own], i) => ({ id: `fit-${i}`, result: fit(slope, own) }));
const u = (result: ElasticResult) => result.constants.E?.standardUncertainty ?? Number.NaN;

describe('composeDetermination', () => {
  it('leaves one fit as it is', () => {
    const [only] = adopted([70e9, 0.1e9]);
    if (only === undefined) throw new Error('no fit');
    const { detail: _none, ...rest } = { detail: null, ...only.result };
    expect(composeDetermination([only], 'static', 1)).toEqual(rest);
  });

  it('divides what is each fit’s own by √n, and what is common not at all', () => {
    const result = composeDetermination(adopted([70e9, 0.1e9], [70.1e9, 0.1e9]), 'static', 1);
    expect(result.constants.E?.value).toBeCloseTo(70.05e9, -3);
    expect(u(result)).toBeCloseTo(Math.hypot(0.1e9 / Math.SQRT2, 70.05e9 * 0.005), -4);
  });

  it('keeps the constants consistent: G = E/(2(1 + ν))', () => {
    const { E, nu, G } = composeDetermination(adopted([70e9, 0.1e9], [71e9, 0.1e9]), 'static', 1).constants;
    expect((G?.value ?? 0) / ((E?.value ?? 0) / (2 * (1 + (nu?.value ?? 0))))).toBeCloseTo(1, 12);
  });

  it('never mixes static and dynamic, and needs a fit', () => {
    expect(() => composeDetermination(adopted([70e9, 0.1e9]), 'dynamic', 1)).toThrow(RangeError);
    expect(() => composeDetermination([], 'static', 1)).toThrow(RangeError);
  });

  it('names fits that disagree', () => {
    const { findings } = composeDetermination(adopted([70e9, 0.05e9], [72e9, 0.05e9]), 'static', 1);
    expect(findings.map((f) => f.code)).toContain('FITS_DISAGREE');
  });
});

describe('agreements', () => {
  it('judges by the uncertainty of the difference, the common calibration cancelled', () => {
    // 0.3 GPa apart: within the calibration's 0.35 GPa each, yet beyond what the slopes alone explain.
    const [E] = agreements(adopted([70e9, 0.05e9], [70.3e9, 0.05e9]), 'static');
    expect(E).toMatchObject({ constant: 'E', agrees: false });
    expect(E?.en).toBeCloseTo(0.3 / (2 * 0.05 * Math.SQRT2), 1);
    expect(agreements(adopted([70e9, 0.05e9], [70.1e9, 0.05e9]), 'static')[0]?.agrees).toBe(true);
  });
});
