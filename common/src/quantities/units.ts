/**
 * Units in and out; SI inside. Factors are exact by definition: 1 in = 25.4 mm, 1 ft = 0.3048 m, 1 lb = 0.453 592 37 kg
 * (international yard and pound, 1959), standard gravity g_n = 9.806 65 m/s² (CGPM 1901), so 1 lbf = 4.448 221 615 260 5 N.
 */
export type Dimension = 'length' | 'mass' | 'time' | 'force' | 'pressure' | 'strain' | 'temperature' | 'frequency' | 'density' | 'velocity' | 'voltage' | 'none';

export interface Unit {
  readonly symbol: string;
  readonly dimension: Dimension;
  /** SI value = value × factor + offset. */
  readonly factor: number;
  readonly offset: number;
  /** Other spellings seen in files. */
  readonly aliases: readonly string[];
}

const INCH = 0.0254;
const POUND = 0.45359237;
const POUND_FORCE = POUND * 9.80665;
const PSI = POUND_FORCE / (INCH * INCH);

const define = (dimension: Dimension, symbol: string, factor: number, aliases: readonly string[] = [], offset = 0): Unit => ({ symbol, dimension, factor, offset, aliases });

const UNITS: readonly Unit[] = [
  define('length', 'mm', 1e-3, ['millimeter', 'millimetre']),
  define('length', 'cm', 1e-2),
  define('length', 'm', 1),
  define('length', 'in', INCH, ['inch', 'inches', '"']),
  define('length', 'ft', 0.3048, ['feet']),
  define('length', 'µm', 1e-6, ['um', 'micron', 'microns']),
  define('mass', 'g', 1e-3),
  define('mass', 'kg', 1),
  define('mass', 'lb', POUND, ['lbs', 'lbm']),
  define('mass', 'mg', 1e-6),
  define('mass', 't', 1000, ['Mg', 'tonne']),
  define('time', 's', 1, ['sec', 'seconds', 'second']),
  define('time', 'ms', 1e-3, ['msec']),
  define('time', 'µs', 1e-6, ['us', 'usec', 'microsec', 'microseconds']),
  define('time', 'ns', 1e-9),
  define('time', 'min', 60),
  define('force', 'N', 1),
  define('force', 'kN', 1e3),
  define('force', 'MN', 1e6),
  define('force', 'daN', 10),
  define('force', 'lbf', POUND_FORCE),
  define('force', 'kip', 1000 * POUND_FORCE, ['kips', 'klbf']),
  define('force', 'kgf', 9.80665),
  define('pressure', 'Pa', 1, ['N/m²', 'N/m2']),
  define('pressure', 'kPa', 1e3),
  define('pressure', 'MPa', 1e6, ['N/mm²', 'N/mm2', 'N/mm^2']),
  define('pressure', 'GPa', 1e9, ['kN/mm²', 'kN/mm2']),
  define('pressure', 'bar', 1e5),
  define('pressure', 'psi', PSI, ['lbf/in²', 'lbf/in2']),
  define('pressure', 'ksi', 1000 * PSI),
  define('pressure', 'Msi', 1e6 * PSI),
  define('strain', 'mm/mm', 1, ['m/m', 'in/in', 'strain', 'ε']),
  define('strain', '%', 1e-2, ['percent', 'pct']),
  define('strain', '‰', 1e-3, ['permille', 'mm/m']),
  define('strain', 'µε', 1e-6, ['ue', 'µm/m', 'um/m', 'microstrain', 'µstrain', 'ustrain', 'ustr', 'µD', 'micro strain']),
  define('temperature', '°C', 1, ['C', 'degC', '°c'], 273.15),
  define('temperature', 'K', 1),
  define('frequency', 'Hz', 1),
  define('frequency', 'kHz', 1e3),
  define('frequency', 'MHz', 1e6),
  define('density', 'kg/m³', 1, ['kg/m3', 'kg/m^3']),
  define('density', 'g/cm³', 1000, ['g/cm3', 'g/cc', 'Mg/m³', 't/m³']),
  define('density', 'lb/ft³', POUND / 0.3048 ** 3, ['lb/ft3', 'pcf']),
  define('velocity', 'm/s', 1),
  define('velocity', 'km/s', 1e3),
  define('velocity', 'ft/s', 0.3048),
  define('voltage', 'V', 1, ['volt', 'volts']),
  define('voltage', 'mV', 1e-3),
  define('none', '1', 1),
];

const BY_SPELLING = new Map<string, Unit>();
const BY_LOWER_CASE = new Map<string, { spelling: string; unit: Unit }[]>();
for (const u of UNITS) for (const name of [u.symbol, ...u.aliases]) {
  BY_SPELLING.set(name, u);
  const alike = BY_LOWER_CASE.get(name.toLowerCase()) ?? [];
  BY_LOWER_CASE.set(name.toLowerCase(), [...alike, { spelling: name, unit: u }]);
}

/** Spellings that could be two units apart by a prefix, or no unit at all. */
const NEVER_GUESSED: readonly string[] = ['mn', 'MV', 'c', 'k', 'T'];

/** A unit spelt in another case, as `KN`, `MPA` or `mpa`. Milli and mega differ only in case: `mPa` is refused, never read as MPa. */
function inAnotherCase(symbol: string): Unit | undefined {
  const [found, ...others] = BY_LOWER_CASE.get(symbol.toLowerCase()) ?? [];
  if (found === undefined || others.some((other) => other.unit !== found.unit) || NEVER_GUESSED.includes(symbol)) return undefined;
  const oneCase = symbol === symbol.toLowerCase() || symbol === symbol.toUpperCase();
  const prefixTurned = /^m/i.test(symbol) && symbol[0] !== found.spelling[0];
  return prefixTurned && !oneCase ? undefined : found.unit;
}

/** The unit of a symbol or one of its other spellings; undefined when unknown. */
export function unit(symbol: string): Unit | undefined {
  // Micro comes as U+00B5 or as Greek mu U+03BC.
  const asSpelt = symbol.trim().replace(/\u03bc/g, 'µ');
  return BY_SPELLING.get(asSpelt) ?? inAnotherCase(asSpelt);
}

/** Units of one dimension, the first the usual one. */
export function unitsOf(dimension: Dimension): Unit[] {
  return UNITS.filter((u) => u.dimension === dimension);
}

/** @throws RangeError when the unit is unknown */
export function toSI(value: number, symbol: string): number {
  const u = unit(symbol);
  if (u === undefined) throw new RangeError(`No unit ${symbol}`);
  return value * u.factor + u.offset;
}

/** @throws RangeError when the unit is unknown */
export function fromSI(value: number, symbol: string): number {
  const u = unit(symbol);
  if (u === undefined) throw new RangeError(`No unit ${symbol}`);
  return (value - u.offset) / u.factor;
}
