import { isSatisfactory, normalizedError } from './normalized-error';

describe('normalizedError', () => {
  // By hand: √(0.3² + 0.4²) = 0.5.
  it.each([
    { value: 10.2, en: 0.4, satisfactory: true },
    { value: 9.5, en: -1, satisfactory: true },
    { value: 10.6, en: 1.2, satisfactory: false },
  ])('gives $en for $value ± 0.3 against 10 ± 0.4', ({ value, en, satisfactory }) => {
    const got = normalizedError({ value, expandedUncertainty: 0.3 }, { value: 10, expandedUncertainty: 0.4 });
    expect(got).toBeCloseTo(en, 12);
    expect(isSatisfactory(en)).toBe(satisfactory);
  });

  it('refuses values without any uncertainty, which say nothing', () => {
    expect(() => normalizedError({ value: 1, expandedUncertainty: 0 }, { value: 1, expandedUncertainty: 0 })).toThrow(RangeError);
  });
});
