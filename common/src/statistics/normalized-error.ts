/**
 * The normalised error of a value against a reference: E_n = (x − X)/√(U_x² + U_X²), both uncertainties expanded with the same
 * coverage (about 95 %), the two values independent (ISO/IEC 17043; ISO 13528, from memory). |E_n| ≤ 1 is satisfactory.
 *
 * `normalizedError({ value: 10.2, expandedUncertainty: 0.3 }, { value: 10, expandedUncertainty: 0.4 })` gives 0.4.
 * @throws RangeError when the uncertainties are not finite and positive together
 */
export function normalizedError(measured: { value: number; expandedUncertainty: number }, reference: { value: number; expandedUncertainty: number }): number {
  const combined = Math.hypot(measured.expandedUncertainty, reference.expandedUncertainty);
  if (!(combined > 0 && Number.isFinite(combined))) throw new RangeError('E_n needs expanded uncertainties above zero');
  return (measured.value - reference.value) / combined;
}

/** Whether the value agrees with its reference within their uncertainties. */
export const isSatisfactory = (en: number): boolean => Math.abs(en) <= 1;
