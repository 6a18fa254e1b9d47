/** Fails unless two numbers agree to a share of the expected one. */
export function expectRelative(value: number, expected: number | string, tolerance: number): void {
  expect(Math.abs(value / Number(expected) - 1)).toBeLessThan(tolerance);
}

/** Fails unless a number rounds to what was printed: half a unit of the last printed digit. */
export function expectPrinted(value: number, printed: string): void {
  const decimals = printed.split('.')[1]?.length ?? 0;
  expect(Math.abs(value - Number(printed))).toBeLessThanOrEqual(0.5000001 * 10 ** -decimals);
}
