import { formatMeasured, measuredText, roundStatement } from './presentation';

describe('formatMeasured', () => {
  it.each([
    { value: 210.6364386e9, U: 0.99186e9, said: '210.64 ± 0.99 GPa' },
    { value: 26.676093e9, U: 0.96e9, said: '26.68 ± 0.96 GPa' },
    { value: 3.2e6, U: 0.5e6, said: '3.20 ± 0.50 MPa' },
    { value: 999_999_999.99, U: 1e6, said: '1.0000 ± 0.0010 GPa' },
    { value: -45.3e9, U: 12.4e9, said: '-45 ± 12 GPa' },
    { value: 70.3e9, U: 1234e9, said: '100 ± 1200 GPa' },
    { value: 850, U: 9.96, said: '850 ± 10 Pa' },
  ])('says $said', ({ value, U, said }) => {
    expect(measuredText(value, U, 'Pa')).toBe(said);
  });

  it('shows ν without a unit, other SI units as they are', () => {
    expect(formatMeasured(0.285984562, 0.0023915, '1')).toEqual({ value: '0.2860', uncertainty: '0.0024', unit: '' });
    expect(measuredText(2647.852, 3.26, 'kg/m³')).toBe('2647.9 ± 3.3 kg/m³');
  });

  it('never prints a negative zero, and marks what cannot be stated', () => {
    expect(formatMeasured(-0.001, 0.52, '1').value).toBe('0.00');
    expect(formatMeasured(Number.NaN, 1, 'Pa')).toEqual({ value: '–', uncertainty: '–', unit: 'Pa' });
    expect(formatMeasured(2e9, Infinity, 'Pa')).toEqual({ value: '2', uncertainty: '∞', unit: 'GPa' });
  });

  it('rounds a tie to even by default and away from zero when asked', () => {
    expect(roundStatement('0.25', '1', 'half-even', 2)).toEqual({ value: '0.2', uncertainty: '1.0' });
    expect(roundStatement('0.25', '1', 'half-up', 2)).toEqual({ value: '0.3', uncertainty: '1.0' });
    expect(roundStatement('12.3450', '0')).toEqual({ value: '12.345', uncertainty: '0' });
  });
});
