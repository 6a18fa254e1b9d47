import { fromSI, toSI, unit, unitsOf, type Dimension } from './units';

describe('units', () => {
  // Definitions: international yard and pound agreement (1959); standard gravity, CGPM 1901; psi = lbf/in².
  it.each([
    [1, 'in', 0.0254], [1, 'ft', 0.3048], [1, 'lb', 0.45359237], [1, 'lbf', 4.4482216152605], [1, 'kip', 4448.2216152605], [1, 'kgf', 9.80665],
    [1, 'psi', 6894.757293168361], [1, 'ksi', 6894757.293168361], [1, 'Msi', 6894757293.168361], [1, 'lb/ft³', 16.018463373960142],
    [1, 'g/cm³', 1000], [20, '°C', 293.15], [1, '%', 0.01], [1, '‰', 0.001], [500, 'µε', 5e-4], [54, 'kHz', 54_000], [1, 't', 1000],
  ])('%d %s is %d in SI', (value, symbol, si) => {
    expect(Math.abs(toSI(value, symbol) / si - 1)).toBeLessThan(1e-15 * 4);
  });

  it.each<[string, string]>([
    ['um', 'µm'], ['us', 'µs'], ['uS', 'µs'], ['μm', 'µm'], ['microstrain', 'µε'], ['µstrain', 'µε'], ['um/m', 'µε'], ['in/in', 'mm/mm'],
    ['N/mm²', 'MPa'], ['KN', 'kN'], ['MPA', 'MPa'], ['mpa', 'MPa'], ['Mpa', 'MPa'], ['PSI', 'psi'], ['MM', 'mm'], ['Kg', 'kg'], ['inches', 'in'], [' mm ', 'mm'], ['Mg', 't'],
  ])('reads %s as %s', (spelt, symbol) => {
    expect(unit(spelt)?.symbol).toBe(symbol);
  });

  it.each(['mPa', 'mHz', 'mN', 'Mm', 'Ms', 'MV', 'mn', 'MG', 'furlong', '', 'k'])('does not guess %s', (spelt) => {
    expect(unit(spelt)).toBeUndefined();
    expect(() => toSI(1, spelt)).toThrow(RangeError);
    expect(() => fromSI(1, spelt)).toThrow(RangeError);
  });

  const dimensions: Dimension[] = ['length', 'mass', 'time', 'force', 'pressure', 'strain', 'temperature', 'frequency', 'density', 'velocity', 'voltage', 'none'];
  it.each(dimensions)('goes to SI and back in every unit of %s', (dimension) => {
    expect(unitsOf(dimension).length).toBeGreaterThan(0);
    for (const u of unitsOf(dimension)) {
      expect(fromSI(toSI(12.375, u.symbol), u.symbol)).toBeCloseTo(12.375, 10);
      for (const alias of u.aliases) expect(unit(alias)?.symbol).toBe(u.symbol);
    }
  });
});
