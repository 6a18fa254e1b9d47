import type { Limit } from '../contract/orders';
import type { ConstantResult } from '../contract/result';
import { decide } from './decision-rules';

const GPa = 1e9;
const constant = (y: number, U: number, more: Partial<ConstantResult> = {}): ConstantResult => ({
  value: y * GPa, standardUncertainty: (U / 2) * GPa, expandedUncertainty: U * GPa, coverageFactor: 2, degreesOfFreedom: null, interval: { low: (y - U) * GPa, high: (y + U) * GPa }, unit: 'Pa', origin: 'measured', ...more,
});
const limit = (lower: number | null, upper: number | null, rule: Limit['rule']): Limit => ({ constant: 'E', lower: lower === null ? null : lower * GPa, upper: upper === null ? null : upper * GPa, rule });

describe('decide', () => {
  // Computed with 40 digits; p from the normal distribution; rules of ILAC-G8:09/2019, w = rU.
  const cases = [
    { y: 29.5, U: 1.2, lower: 30, upper: null, p: 0.20232838096364, simple: false, oneSided: false, guarded: false },
    { y: 30.4, U: 1.2, lower: 30, upper: null, p: 0.74750746245308, simple: true, oneSided: false, guarded: false },
    { y: 31.4, U: 1.2, lower: 30, upper: null, p: 0.99018467137135, simple: true, oneSided: true, guarded: true },
    { y: 211, U: 4, lower: 200, upper: 215, p: 0.97724984906226, simple: true, oneSided: true, guarded: true },
    { y: 200, U: 4, lower: 200, upper: 215, p: 0.49999999999997, simple: true, oneSided: false, guarded: false },
  ];
  it.each(cases)('$y ± $U GPa against $lower to $upper GPa', ({ y, U, lower, upper, p, simple, oneSided, guarded }) => {
    const by = (rule: Limit['rule']) => decide(constant(y, U), limit(lower, upper, rule), true);
    expect([by('simple').conforms, by('one-sided 5 %').conforms, by('guard band').conforms]).toEqual([simple, oneSided, guarded]);
    expect(by('simple').probability).toBeCloseTo(p, 12);
  });

  it('widens the one-sided guard band for few degrees of freedom: t₀.₉₅(4) = 2.132 (Student’s table)', () => {
    const few = decide(constant(31.2, 1.2, { degreesOfFreedom: 4.8 }), limit(30, null, 'one-sided 5 %'), true);
    expect(few.conforms).toBe(false);
    expect(few.acceptance.lower).toBeCloseTo((30 + 2.1318 * 0.6) * GPa, -5);
    expect(decide(constant(31.2, 1.2), limit(30, null, 'one-sided 5 %'), true).conforms).toBe(true);
  });

  it('takes the Monte Carlo interval where the first order is not validated', () => {
    const skewed = constant(31, 0.8, { interval: { low: 29.6 * GPa, high: 31.4 * GPa } });
    expect(decide(skewed, limit(30, null, 'guard band'), true).conforms).toBe(true);
    expect(decide(skewed, limit(30, null, 'guard band'), false).conforms).toBe(false);
  });

  it('is certain about a value without uncertainty', () => {
    const exact = constant(31, 0);
    expect(decide(exact, limit(30, 31, 'guard band'), true)).toMatchObject({ conforms: true, probability: 1 });
    expect(decide(exact, limit(31.1, null, 'simple'), true)).toMatchObject({ conforms: false, probability: 0 });
  });
});
