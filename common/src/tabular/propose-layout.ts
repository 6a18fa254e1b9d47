/**
 * Proposes how to read a raw file from its first rows and rows sampled further on: delimiter and decimal sign, then heading, units
 * and first data row, then columns to channels. What is doubtful is said, never guessed silently.
 */
import type { ColumnMapping, Layout, LayoutProposal } from '../contract/runs';
import { mapColumns, type MappedColumns } from './channels-of-columns';
import { columnTexts } from './column-text';
import type { Encoding } from './decode-text';
import { decimalOf, dialectOf, filledCells, firstDataRow, isDataRow, rowsOf, usualWidth, type Dialect, type Row } from './dialect';
import { Doubts } from './doubts';
import { headingRowsAbove, type HeadingRows } from './heading-rows';
import { roleOfHeading } from './heading-words';
import { layoutSignature, splitHeading } from './headings';
import { cellValue, couldBeThousands, hasThousandsSeparators } from './numbers';
import { TabularRefused } from './tabular-refused';

const FIRST_ROWS = 40;
const MOST_COLUMNS = 64;

export interface ProposalContext {
  /** True for a pulse waveform. */
  readonly waveform: boolean;
  /** Confirmed layouts of the instrument by signature. */
  readonly remembered?: ReadonlyMap<string, Layout>;
}

interface Table {
  readonly rows: readonly Row[];
  /** Rows sampled further on in the file. */
  readonly later: readonly Row[];
  readonly first: number;
  readonly width: number;
  readonly heads: HeadingRows;
}

/** @throws TabularRefused when there are no rows of numbers */
function tableOf(rows: readonly Row[], later: readonly Row[], { decimal }: Dialect): Table {
  const width = usualWidth([...rows, ...later].filter((row) => isDataRow(row, decimal)));
  const first = firstDataRow(rows, decimal, width);
  if (first < 0) throw new TabularRefused(isOneColumn(rows) ? 'one-column' : 'no-numbers');
  if (width > MOST_COLUMNS) throw new TabularRefused('too-many-columns');
  return { rows, later, first, width, heads: headingRowsAbove(rows, first, width) };
}

function isOneColumn(rows: readonly Row[]): boolean {
  const cells = rows.map(filledCells).filter((row) => row.length > 0);
  const numbers = cells.filter((row) => row.length === 1 && row.some((c) => !Number.isNaN(cellValue(c, '.')) || !Number.isNaN(cellValue(c, ','))));
  return numbers.length >= 3 && numbers.length * 2 > cells.length;
}

const rowAt = (rows: readonly Row[], index: number | null): Row => (index === null ? [] : (rows[index] ?? []));
const dataOf = ({ rows, later, first }: Table) => [...rows.slice(first), ...later];

/** Refuses numbers that could not be told from others. @throws TabularRefused */
function refuseUnreadableNumbers(table: Table, { delimiter }: Dialect, format: Layout['format']): void {
  const data = dataOf(table).filter((row) => row.length === table.width);
  const grouped = data.flatMap((row) => [...row]).find(hasThousandsSeparators);
  if (grouped !== undefined) throw new TabularRefused('thousands-separators', `The first is “${grouped.trim()}”.`);
  const whole = data.every((row) => row.every((c) => /^\s*[+-]?\d*\s*$/.test(c)));
  if (format !== 'delimited' || delimiter !== ',' || !whole) return;
  const above = table.rows.slice(0, table.first).map(filledCells).filter((row) => row.length > 0).pop() ?? [];
  if (above.length === 1 && above.some((c) => roleOfHeading(splitHeading(c).name) !== null)) throw new TabularRefused('one-column');
  if (above.length > 1 && above.length < table.width) throw new TabularRefused('commas-both-ways');
}

/** Decimals of exactly three digits everywhere could be thousands. */
function doubtDecimals(table: Table, { delimiter, decimal }: Dialect, doubts: Doubts): void {
  if (delimiter === ',' && decimal === '.') return;
  const cells = dataOf(table).flatMap((row) => row.filter((c) => c.includes(decimal) && !Number.isNaN(cellValue(c, decimal))));
  const [example] = cells;
  if (example === undefined || !cells.every(couldBeThousands)) return;
  doubts.say(0.5, `Numbers such as ${example.trim()} could be thousands: ${decimal === ',' ? 'a decimal comma' : 'a decimal point'} is taken. If they are thousands, export the file without separators.`);
}

interface Source extends Dialect {
  readonly format: Layout['format'];
  readonly encoding: Encoding;
  readonly sheet: string;
  readonly rowCount: number;
}

/** Confirmed columns, with what has changed since said. */
function recalled(before: readonly ColumnMapping[], now: readonly ColumnMapping[]): MappedColumns {
  const doubts = new Doubts();
  doubts.say(1, 'This layout was confirmed before for this instrument.');
  const turned = before.filter((b, i) => b.channel !== 'ignore' && now[i]?.channel === b.channel && now[i]?.sign !== b.sign);
  if (turned.length > 0) doubts.say(0.5, `${turned.map((c) => c.heading || c.channel).join(', ')} ${turned.length === 1 ? 'runs' : 'run'} the other way than when it was confirmed; please check the signs.`);
  return { columns: [...before], confidence: doubts.confidence, remarks: doubts.remarks };
}

function proposalOf(table: Table, source: Source, context: ProposalContext): LayoutProposal {
  const { rows, first, width, heads } = table;
  const doubts = new Doubts();
  doubtDecimals(table, source, doubts);
  if (heads.headingRow === null) doubts.say(0.4, 'The file has no headings: the channels are proposed from the numbers alone.');
  const headings = rowAt(rows, heads.headingRow);
  const units = rowAt(rows, heads.unitsRow);
  const mapped = mapColumns(columnTexts(headings, units, dataOf(table), width, source.decimal), context.waveform);
  const layout: Layout = {
    format: source.format, encoding: source.encoding, delimiter: source.delimiter, decimal: source.decimal, sheet: source.sheet,
    ...heads, firstDataRow: first, columns: mapped.columns,
  };
  const firstRows = rows.slice(0, Math.max(FIRST_ROWS, first + 12)).map((row) => row.map((c) => c.slice(0, 200)));
  const remembered = heads.headingRow === null ? undefined : context.remembered?.get(layoutSignature(source.format, headings, units));
  const rest = { firstRows, rowCount: source.rowCount };
  if (remembered !== undefined && remembered.columns.length === width) {
    const known = recalled(remembered.columns, mapped.columns);
    return { layout: { ...layout, columns: known.columns }, origin: 'remembered', confidence: known.confidence, remarks: known.remarks, ...rest };
  }
  return { layout, origin: 'proposed', confidence: Math.min(doubts.confidence, mapped.confidence), remarks: [...doubts.remarks, ...mapped.remarks], ...rest };
}

/**
 * @param lines the first lines of the text, whole lines only
 * @param later lines sampled further on, so that signs and sizes are those of the whole test
 * @param rowCount rows of the whole file where known, else those of `lines`
 * @throws TabularRefused when there is no table of numbers
 */
export function proposeDelimitedLayout(lines: readonly string[], later: readonly string[], encoding: Encoding, rowCount: number, context: ProposalContext): LayoutProposal {
  if (lines.every((line) => line.trim() === '')) throw new TabularRefused('file-empty');
  const dialect = dialectOf([...lines, ...later]);
  if (dialect === null) throw new TabularRefused(isOneColumn(lines.map((line) => [line])) ? 'one-column' : 'no-numbers');
  const table = tableOf(rowsOf(lines, dialect), rowsOf(later, dialect), dialect);
  refuseUnreadableNumbers(table, dialect, 'delimited');
  return proposalOf(table, { format: 'delimited', encoding, ...dialect, sheet: '', rowCount }, context);
}

/** @param rows the first rows of a sheet as text @param later rows sampled further on */
export function proposeWorkbookLayout(rows: readonly Row[], later: readonly Row[], sheet: string, rowCount: number, context: ProposalContext): LayoutProposal {
  if (rows.every((row) => filledCells(row).length === 0)) throw new TabularRefused('file-empty');
  const dialect: Dialect = { delimiter: ',', decimal: decimalOf([...rows, ...later]) };
  const table = tableOf(rows, later, dialect);
  refuseUnreadableNumbers(table, dialect, 'workbook');
  return proposalOf(table, { format: 'workbook', encoding: 'utf-8', ...dialect, sheet, rowCount }, context);
}

/** The signature of a confirmed layout, by the headings and units that it names. */
export function signatureOf(layout: Layout, firstRows: readonly Row[]): string | null {
  return layout.headingRow === null ? null : layoutSignature(layout.format, rowAt(firstRows, layout.headingRow), rowAt(firstRows, layout.unitsRow));
}
