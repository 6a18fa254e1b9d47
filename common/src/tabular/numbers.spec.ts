import { cellNumber, couldBeThousands, hasThousandsSeparators } from './numbers';

describe('a cell', () => {
  it.each<[string, '.' | ',', number]>([
    ['1.5', '.', 1.5], [' -0.25 ', '.', -0.25], ['+3', '.', 3], ['.5', '.', 0.5], ['5.', '.', 5], ['1e-3', '.', 1e-3], ['-1.5E+03', '.', -1500],
    ['1,5', ',', 1.5], ['-,5', ',', -0.5], ['2,5E-3', ',', 2.5e-3], ['7', ',', 7], ['\u22121.5', '.', -1.5], ['1,5e\u22123', ',', 1.5e-3], ['\u00a02.5\u00a0', '.', 2.5],
  ])('%j with decimal %j is %d', (cell, decimal, value) => {
    expect(cellNumber(cell, decimal)).toBe(value);
  });

  it.each<[string, '.' | ',']>([['1,5', '.'], ['1.5', ','], ['1.2.3', '.'], ['', '.'], ['-', '.'], ['1 5', '.'], ['1O', '.'], ['0x10', '.'], ['Infinity', '.'], ['NaN', '.'], ['12 kN', '.'], ['1e', '.'], ['e5', '.'], ['10:00:00', '.']])('%j with decimal %j is no number', (cell, decimal) => {
    expect(cellNumber(cell, decimal)).toBeNaN();
  });
});

describe('thousands', () => {
  it.each(['1,234.5', '1.234,5', '-12,345,678', '1.234.567', "1'234", '1 234,5', '1\u00a0234', '1\u2019234.5'])('%s has separators', (cell) => {
    expect(hasThousandsSeparators(cell)).toBe(true);
  });

  it.each(['1,234', '1.234', '1234.5', '0.123', '01.06.2026', '10:00', '1.5e3', '12,34,56', '2026-06-01'])('%s is not known to have any', (cell) => {
    expect(hasThousandsSeparators(cell)).toBe(false);
  });

  it.each([['1,234', true], ['12.345', true], ['0,123', false], ['1,23', false], ['1234,567', false]])('%s could be thousands: %s', (cell, could) => {
    expect(couldBeThousands(cell)).toBe(could);
  });
});
