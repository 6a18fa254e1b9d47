import type { ElasticResult } from '@strainwright/common/contract/result';
import { plateText } from './constants-plate';

const constant = (value: number, U: number, unit: 'Pa' | '1', origin: 'measured' | 'derived') => ({
  value, standardUncertainty: U / 2, expandedUncertainty: U, coverageFactor: 2, degreesOfFreedom: null, interval: { low: value - U, high: value + U }, unit, origin,
});

describe('plateText', () => {
  it('says all four constants with units, uncertainty and origin', () => {
    const constants: ElasticResult['constants'] = { E: constant(70.3e9, 0.9e9, 'Pa', 'measured'), nu: constant(0.331, 0.006, '1', 'measured'), G: constant(26.4e9, 0.4e9, 'Pa', 'derived'), K: null };
    const text = plateText(constants, 'static');
    expect(text).toContain('E = 70.30 ± 0.90 GPa, measured');
    expect(text).toContain('ν = 0.3310 ± 0.0060, measured');
    expect(text).toContain('G = 26.40 ± 0.40 GPa, derived');
    expect(text).toContain('K not determined');
  });
});
