import { parseDecimal, withDecimalStyle, type DecimalStyle } from './decimal';

describe('parseDecimal', () => {
  it.each<[string, DecimalStyle, number]>([
    ['12.5', '.', 12.5], ['12,5', ',', 12.5], ['12,5', '.', 12.5], ['12.5', ',', 12.5], ['-3', '.', -3], ['−3,25', ',', -3.25], ['+ 4', '.', 4], ['.5', '.', 0.5], ['7.', '.', 7],
    ['1.234', '.', 1.234], ['1,234', ',', 1.234], ['0,234', '.', 0.234], ['1234,567', '.', 1234.567], ['1,23456', '.', 1.23456],
    ['1,234.5', '.', 1234.5], ['1.234,5', ',', 1234.5], ['1,234,567', '.', 1234567], ['1.234.567', ',', 1234567],
    ['1 234,5', ',', 1234.5], ['1 234 567', '.', 1234567], ['12\u202f345.6', '.', 12345.6], ['2.1e-5', '.', 2.1e-5], ['2,1E5', ',', 2.1e5], ['  50.02  ', '.', 50.02],
  ])('reads %j under %s as %d', (text, style, value) => {
    expect(parseDecimal(text, style)).toEqual({ value });
  });

  it.each<[string, DecimalStyle]>([['1,234', '.'], ['1.234', ','], ['-12,345', '.'], ['1.234,5', '.'], ['1,234.5', ','], ['1.234.567', '.']])('asks about %j under %s', (text, style) => {
    expect(parseDecimal(text, style)).toEqual({ problem: 'ambiguous' });
  });

  it.each(['abc', '12 34', '1 2', '12mm', '1..2', '1,2,3', '--1', '1e400', 'NaN', 'Infinity', '0x10', '1e', '٣'])('refuses %j', (text) => {
    for (const style of ['.', ','] as const) expect(parseDecimal(text, style)).toEqual({ problem: 'not a number' });
  });

  it.each(['', '   ', '\u00a0'])('tells %j is empty', (text) => {
    expect(parseDecimal(text, '.')).toEqual({ problem: 'empty' });
  });

  it('writes the decimal sign of the style', () => {
    expect([withDecimalStyle('-12.5', ','), withDecimalStyle('12.5', '.')]).toEqual(['-12,5', '12.5']);
  });
});
