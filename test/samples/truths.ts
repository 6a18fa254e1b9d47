/** What the sample files are of: true constants, specimens, instruments, and the layout that must be proposed unasked. */
import type { FilePurpose, Layout, RunRecord } from '@strainwright/common/contract/runs';
import type { MaterialClass, ReadingQuantity, Shape } from '@strainwright/common/contract/vocabulary';
import type { ReadingState } from '@strainwright/common/specimens/measure-specimen';
import type { InstrumentState } from '@strainwright/common/specimens/instrument-state';

export interface ExpectedFile {
  name: string;
  purpose: FilePurpose;
  oddity: string;
  layout: Pick<Layout, 'format' | 'encoding' | 'delimiter' | 'decimal'> & Partial<Pick<Layout, 'sheet'>>;
  /** Channel, unit and sign of each column, in order. */
  columns: [channel: string, unit: string, sign: 1 | -1][];
  /** True where the proposal is right but rests on something that a person must confirm. */
  asks?: boolean;
}

export interface SampleRun {
  title: string;
  shape: Shape;
  materialClass: MaterialClass;
  /** Mean sizes in m and kg; each is read three times (mass once). */
  sizes: Partial<Record<ReadingQuantity, number>>;
  record: RunRecord;
  truth: { E: number; nu: number };
  /** Density for pulse runs, kg/m³. */
  density?: number;
  files: ExpectedFile[];
}

const instrument = (id: string, expandedUncertainty: number, relative: boolean, resolution: number): InstrumentState => ({
  id, name: id, resolution, rangeLow: null, rangeHigh: null,
  calibration: { calibratedOn: '2026-01-10', dueOn: '2027-01-10', expandedUncertainty, relative, coverageFactor: 2, correction: 0 },
});

/** Those that made every sample. */
export const INSTRUMENTS = {
  caliper: instrument('caliper', 2e-5, false, 1e-5), balance: instrument('balance', 2e-5, false, 1e-5), pulse: instrument('pulse unit', 2e-4, true, 0),
  force: instrument('load cell', 0.005, true, 0), axial: instrument('axial extensometer', 0.005, true, 0), transverse: instrument('transverse extensometer', 0.005, true, 0),
};

/** Readings as the sizes have them: the samples' spread is in the records, not here. */
export function readingsOf(run: SampleRun): ReadingState[] {
  return Object.entries(run.sizes).flatMap(([quantity, value]) =>
    (quantity === 'mass' ? [0] : [-1e-5, 0, 1e-5]).map((offset, i): ReadingState => ({
      id: `${quantity}-${i}`, quantity: quantity as ReadingQuantity, station: i + 1, value: value + offset, readAt: '2026-06-01T10:00:00Z', instrument: quantity === 'mass' ? INSTRUMENTS.balance : INSTRUMENTS.caliper,
    })));
}

const text = (delimiter: Layout['delimiter'], decimal: Layout['decimal'], encoding: Layout['encoding'] = 'utf-8') => ({ format: 'delimited' as const, encoding, delimiter, decimal });
const WORKBOOK = { format: 'workbook' as const, encoding: 'utf-8' as const, delimiter: ',' as const, decimal: '.' as const };
const static_ = (compressive: boolean, axialGaugeLength: number | null = null, transverseGaugeLength: number | null = null): RunRecord => ({ kind: 'stress-strain', compressive, axialGaugeLength, transverseGaugeLength });
/** Typed zero times of the pulse samples, s. */
export const ZERO = { P: 0.35e-6, S: 0.52e-6 };
const pulse = (frequency: number): RunRecord => {
  const wave = (t: number) => ({ readings: [], zero: { by: 'face to face' as const, readings: [t - 1e-9, t, t + 1e-9] } });
  return { kind: 'pulse', frequency, timeResolution: 0, zeroDeterminedAt: '2026-06-01T09:00:00Z', P: wave(ZERO.P), S: wave(ZERO.S) };
};

const GRANITE = { E: 58.4e9, nu: 0.242 };
const CONCRETE = { E: 33.1e9, nu: 0.196 };
const ALUMINIUM = { E: 70.9e9, nu: 0.334 };
const NICKEL = { E: 206.5e9, nu: 0.305 };
const GLASS = { E: 81.7e9, nu: 0.207 };
const IGNORED: ExpectedFile['columns'][number] = ['ignore', '', 1];
const gauges: ExpectedFile['columns'] = [['time', 's', 1], ['force', 'kN', 1], ['axial1', 'µε', 1], ['axial2', 'µε', 1], ['transverse1', 'µε', 1]];

export const SAMPLE_RUNS: readonly SampleRun[] = [
  { title: 'Granite core, strain gauges, compression written negative', shape: 'cylinder', materialClass: 'rock', sizes: { diameter: 0.05, length: 0.125 }, record: static_(true), truth: GRANITE, files: [
    { name: 'granite-core.csv', purpose: 'record', oddity: 'semicolons, decimal comma, windows-1252 headings in German, compression negative', layout: text(';', ',', 'windows-1252'), columns: [['time', 's', 1], ['force', 'kN', -1], ['axial1', 'µε', -1], ['transverse1', 'µε', -1]] }] },
  { title: 'Concrete cylinder, two axial gauges and one lateral', shape: 'cylinder', materialClass: 'concrete', sizes: { diameter: 0.15, length: 0.3 }, record: static_(true), truth: CONCRETE, files: [
    { name: 'concrete-cylinder.tsv', purpose: 'record', oddity: 'UTF-16 with byte order mark, tabs, time stamps, a units row', layout: text('\t', '.', 'utf-16le'), columns: gauges }] },
  { title: 'Aluminium alloy in tension, extensometers', shape: 'cylinder', materialClass: 'metal', sizes: { diameter: 0.0125, length: 0.08 }, record: static_(false, 0.05, 0.0125), truth: ALUMINIUM, files: [
    { name: 'aluminium-tension.csv', purpose: 'record', oddity: 'twelve lines of header, units in brackets, extensions with gauge lengths', layout: text(',', '.'), columns: [['time', 's', 1], ['force', 'kN', 1], ['axial1', 'mm', 1], ['transverse1', 'mm', 1]] }] },
  { title: 'Nickel alloy in tension, inches and pounds', shape: 'cylinder', materialClass: 'metal', sizes: { diameter: 0.0127, length: 0.1 }, record: static_(false, 0.0508, 0.0127), truth: NICKEL, files: [
    { name: 'nickel-tension.txt', purpose: 'record', oddity: 'vertical bars, lbf and in, a units row', layout: text('|', '.'), columns: [['time', 's', 1], ['force', 'lbf', 1], ['axial1', 'in', 1], ['transverse1', 'in', 1]] }] },
  { title: 'Glass prism in compression, stress from the frame', shape: 'prism', materialClass: 'glass', sizes: { width: 0.02, thickness: 0.02, length: 0.06 }, record: static_(true), truth: GLASS, files: [
    { name: 'glass-stress.csv', purpose: 'record', oddity: 'stress already in MPa, strains in percent, no time', layout: text(',', '.'), columns: [['stress', 'MPa', 1], ['axial1', '%', 1], ['transverse1', '%', 1]] }] },
  { title: 'Aluminium alloy, crosshead column beside the gauges', shape: 'prism', materialClass: 'metal', sizes: { width: 0.0125, thickness: 0.006, length: 0.1 }, record: static_(false), truth: ALUMINIUM, files: [
    { name: 'aluminium-crosshead.csv', purpose: 'record', oddity: 'crosshead travel as a decoy, byte order mark, quoted headings', layout: text(',', '.'), columns: [['time', 's', 1], IGNORED, ['force', 'N', 1], ['axial1', 'µε', 1], ['axial2', 'µε', 1], ['transverse1', 'µε', 1]] }] },
  { title: 'Concrete cylinder, headings again in the middle', shape: 'cylinder', materialClass: 'concrete', sizes: { diameter: 0.1, length: 0.2 }, record: static_(true), truth: CONCRETE, files: [
    { name: 'concrete-repeated.txt', purpose: 'record', oddity: 'blanks as delimiters, headings repeated in the middle, a footer', layout: text(' ', '.'), columns: [['time', 's', 1], ['force', 'kN', 1], ['axial1', 'µε', 1], ['axial2', 'µε', 1], ['transverse1', 'µε', 1]] }] },
  { title: 'Nickel alloy, workbook', shape: 'cylinder', materialClass: 'metal', sizes: { diameter: 0.01, length: 0.08 }, record: static_(false), truth: NICKEL, files: [
    { name: 'nickel-workbook.xlsx', purpose: 'record', oddity: 'workbook with a title, headings and a units row', layout: WORKBOOK, columns: gauges }] },
  { title: 'Granite core, 20 000 rows, stress in ksi', shape: 'cylinder', materialClass: 'rock', sizes: { diameter: 0.05, length: 0.125 }, record: static_(true), truth: GRANITE, files: [
    { name: 'granite-long.csv', purpose: 'record', oddity: '20 000 rows, stress in ksi, strain without a dimension', layout: text(',', '.'), columns: [['time', 's', 1], ['stress', 'ksi', 1], ['axial1', 'mm/mm', 1], ['transverse1', 'mm/mm', 1]] }] },
  { title: 'Concrete cylinder, three cycles of load', shape: 'cylinder', materialClass: 'concrete', sizes: { diameter: 0.1, length: 0.2 }, record: static_(true), truth: CONCRETE, files: [
    { name: 'concrete-cycles.csv', purpose: 'record', oddity: 'dates, times and states in columns of their own; command, mean and volumetric strain as decoys; loaded three times, converter of 12 bits', layout: text(';', ','), columns: [
      IGNORED, IGNORED, ['time', 's', 1], IGNORED, ['force', 'kN', 1], ['axial1', 'µε', 1], ['axial2', 'µε', 1], IGNORED, ['transverse1', 'µε', 1], IGNORED, IGNORED] }] },
  { title: 'Granite core, lateral strain written as an amount', shape: 'cylinder', materialClass: 'rock', sizes: { diameter: 0.05, length: 0.125 }, record: static_(true), truth: GRANITE, files: [
    { name: 'granite-amounts.txt', purpose: 'record', oddity: 'big-endian UTF-16, decimal commas between tabs, confining pressure as a decoy, lateral strain positive, strains in mm/m', asks: true, layout: text('\t', ',', 'utf-16be'), columns: [['time', 's', 1], IGNORED, ['stress', 'MPa', 1], ['axial1', '‰', 1], ['transverse1', '‰', -1]] }] },
  { title: 'Aluminium alloy in tension, machine extension beside strain', shape: 'prism', materialClass: 'metal', sizes: { width: 0.0125, thickness: 0.006, length: 0.1 }, record: static_(false), truth: ALUMINIUM, files: [
    { name: 'aluminium-quoted.csv', purpose: 'record', oddity: 'UTF-16 without a mark, decimal commas in quotes between commas, the machine’s extension beside strain', layout: text(',', ',', 'utf-16le'), columns: [['time', 's', 1], IGNORED, ['force', 'N', 1], ['axial1', '%', 1], ['transverse1', '%', 1]] }] },
  { title: 'Nickel alloy in tension, French frame', shape: 'cylinder', materialClass: 'metal', sizes: { diameter: 0.01, length: 0.08 }, record: static_(false, 0.025, 0.01), truth: NICKEL, files: [
    { name: 'nickel-blocks.txt', purpose: 'record', oddity: 'thirty lines of header, pages with headings in French, a ruler and units again, blanks between columns, stopwatch, daN, true minus signs, toe and yield', layout: text(' ', '.', 'utf-8'), columns: [['time', 's', 1], IGNORED, ['force', 'daN', 1], ['axial1', 'mm', 1], ['transverse1', 'mm', 1]] }] },
  { title: 'Glass prism in compression, workbook of several sheets', shape: 'prism', materialClass: 'glass', sizes: { width: 0.02, thickness: 0.02, length: 0.06 }, record: static_(true), truth: GLASS, files: [
    { name: 'glass-sheets.xlsx', purpose: 'record', oddity: 'workbook whose second sheet holds the data, times of day as dates, compression negative, four gauges', layout: { ...WORKBOOK, sheet: 'Data' }, columns: [['time', 's', 1], ['force', 'kN', -1], ['axial1', 'µε', -1], ['axial2', 'µε', -1], ['transverse1', 'µε', -1], ['transverse2', 'µε', -1]] }] },
  { title: 'Concrete prism, pulse', shape: 'prism', materialClass: 'concrete', density: 2385, sizes: { length: 0.3, width: 0.15, thickness: 0.15 }, record: pulse(150e3), truth: CONCRETE, files: [
    { name: 'concrete-scope-p.csv', purpose: 'waveform P', oddity: 'an oscilloscope’s export: settings to the left of the data, no headings', asks: true, layout: text(',', '.'), columns: [IGNORED, IGNORED, IGNORED, ['time', 's', 1], ['trace', '', 1]] },
    { name: 'concrete-scope-s.tsv', purpose: 'waveform S', oddity: 'milliseconds, decimal commas between tabs, line ends of old, row numbers, two traces in mV', layout: text('\t', ',', 'windows-1252'), columns: [IGNORED, ['time', 'ms', 1], ['trace', 'mV', 1], ['trace', 'mV', 1]] }] },
  { title: 'Glass plate, pulse', shape: 'plate', materialClass: 'glass', density: 2513, sizes: { length: 0.03, width: 0.06, thickness: 0.06 }, record: pulse(2e6), truth: GLASS, files: [
    { name: 'glass-p.csv', purpose: 'waveform P', oddity: 'three traces, time in µs', layout: text(',', '.'), columns: [['time', 'µs', 1], ['trace', 'V', 1], ['trace', 'V', 1], ['trace', 'V', 1]] },
    { name: 'glass-s.csv', purpose: 'waveform S', oddity: 'P precursor before S', layout: text(',', '.'), columns: [['time', 'µs', 1], ['trace', 'V', 1], ['trace', 'V', 1], ['trace', 'V', 1]] }] },
  { title: 'Nickel alloy, pulse, in one workbook and one text file', shape: 'cylinder', materialClass: 'metal', density: 8190, sizes: { length: 0.04, diameter: 0.04 }, record: pulse(2e6), truth: NICKEL, files: [
    { name: 'nickel-p.xlsx', purpose: 'waveform P', oddity: 'workbook, time and four traces', layout: WORKBOOK, columns: [['time', 'µs', 1], ['trace', 'mV', 1], ['trace', 'mV', 1], ['trace', 'mV', 1], ['trace', 'mV', 1]] },
    { name: 'nickel-s.txt', purpose: 'waveform S', oddity: 'seconds in exponential notation, decimal comma, lines of header', layout: text(';', ','), columns: [['time', 's', 1], ['trace', 'V', 1], ['trace', 'V', 1], ['trace', 'V', 1]] }] },
];
