/**
 * Proposes how to read a raw file from its first rows: delimiter and decimal sign by which of them makes the most rows of
 * numbers, then heading, units and first data row, then columns to channels. What is doubtful is said, never guessed silently.
 */
import type { Layout, LayoutProposal } from '../contract/runs';
import { mapColumns, type ColumnText } from './channels-of-columns';
import type { Encoding } from './decode-text';
import { layoutSignature, splitHeading, unitCell } from './headings';
import { cellNumber, cellValue, clockSeconds, type DecimalSign } from './numbers';
import { splitLine, type Delimiter } from './split-line';
import { TabularRefused } from './tabular-refused';

const FIRST_ROWS = 40;
const DELIMITERS: readonly Delimiter[] = ['\t', ';', ',', '|', ' '];

export interface ProposalContext {
  /** True for a pulse waveform. */
  readonly waveform: boolean;
  /** Confirmed layouts of the instrument by signature. */
  readonly remembered?: ReadonlyMap<string, Layout>;
}

const isNumber = (cell: string, decimal: DecimalSign) => !Number.isNaN(cellValue(cell, decimal));

/** A row of data: at least two numbers, and numbers in most of its cells. */
function isDataRow(cells: readonly string[], decimal: DecimalSign): boolean {
  let numbers = 0;
  let filled = 0;
  for (const cell of cells) {
    if (cell.trim() === '') continue;
    filled += 1;
    if (isNumber(cell, decimal)) numbers += 1;
  }
  return numbers >= 2 && numbers >= filled - 1;
}

function modalWidth(rows: readonly (readonly string[])[]): number {
  const counts = new Map<number, number>();
  for (const row of rows) counts.set(row.length, (counts.get(row.length) ?? 0) + 1);
  return [...counts.entries()].sort((a, b) => b[1] - a[1])[0]?.[0] ?? 0;
}

interface Dialect {
  readonly delimiter: Delimiter;
  readonly decimal: DecimalSign;
  readonly rows: readonly (readonly string[])[];
  readonly score: number;
}

function dialectOf(lines: readonly string[]): Dialect {
  let best: Dialect = { delimiter: ',', decimal: '.', rows: lines.map((l) => [l]), score: 0 };
  for (const delimiter of DELIMITERS) {
    const rows = lines.map((line) => splitLine(line, delimiter));
    for (const decimal of ['.', ','] as const) {
      if (decimal === delimiter) continue;
      const data = rows.filter((row) => isDataRow(row, decimal));
      const width = modalWidth(data);
      const score = data.filter((row) => row.length === width).length;
      if (score > best.score) best = { delimiter, decimal, rows, score };
    }
  }
  return best;
}

/** First of two data rows in a row, of the usual width. */
function firstDataRow(rows: readonly (readonly string[])[], decimal: DecimalSign, width: number): number {
  const fits = (i: number) => {
    const row = rows[i];
    return row !== undefined && row.length >= width - 1 && isDataRow(row, decimal);
  };
  for (let i = 0; i < rows.length; i += 1) if (fits(i) && (fits(i + 1) || i + 1 >= rows.length)) return i;
  return -1;
}

const filledCells = (row: readonly string[] | undefined) => (row ?? []).filter((c) => c.trim() !== '');

/** Rows just above the data: units where most cells are units, headings above them. */
function headingRows(rows: readonly (readonly string[])[], first: number, width: number): { headingRow: number | null; unitsRow: number | null } {
  const above: number[] = [];
  for (let i = first - 1; i >= 0 && above.length < 2; i -= 1) {
    const filled = filledCells(rows[i]).length;
    if (filled === 0) continue;
    if (filled < Math.max(2, Math.ceil(width / 2)) || (rows[i]?.length ?? 0) > width + 1) break;
    above.push(i);
  }
  const [nearest, next] = above;
  if (nearest === undefined) return { headingRow: null, unitsRow: null };
  const cells = filledCells(rows[nearest]);
  const units = cells.filter((c) => unitCell(c) !== null).length;
  if (next !== undefined && units >= cells.length - 1 && units > 0) return { headingRow: next, unitsRow: nearest };
  return { headingRow: nearest, unitsRow: null };
}

function columnTexts(rows: readonly (readonly string[])[], first: number, width: number, heads: { headingRow: number | null; unitsRow: number | null }, decimal: DecimalSign): ColumnText[] {
  const headings = heads.headingRow === null ? [] : (rows[heads.headingRow] ?? []);
  const units = heads.unitsRow === null ? [] : (rows[heads.unitsRow] ?? []);
  const data = rows.slice(first).filter((row) => isDataRow(row, decimal));
  return Array.from({ length: width }, (_, i) => {
    const { name, unitText } = splitHeading(headings[i] ?? '');
    const cells = data.map((row) => row[i] ?? '');
    const isClock = cells.length > 0 && cells.every((c) => Number.isNaN(cellNumber(c, decimal)) && !Number.isNaN(clockSeconds(c)));
    return { heading: name, unitText: unitCell(units[i] ?? '') || unitText, values: cells.map((c) => cellValue(c, decimal)), isClock };
  });
}

interface Source {
  readonly format: Layout['format'];
  readonly encoding: Encoding;
  readonly delimiter: Delimiter;
  readonly decimal: DecimalSign;
  readonly sheet: string;
  readonly rowCount: number;
}

function propose(rows: readonly (readonly string[])[], source: Source, context: ProposalContext): LayoutProposal {
  const data = rows.filter((row) => isDataRow(row, source.decimal));
  const width = modalWidth(data);
  const first = firstDataRow(rows, source.decimal, width);
  if (first < 0) throw new TabularRefused(rows.some((row) => row.some((c) => isNumber(c, source.decimal))) && rows.every((row) => filledCells(row).length <= 1) ? 'one-column' : 'no-numbers');
  if (width > 64) throw new TabularRefused('too-many-columns');
  const heads = headingRows(rows, first, width);
  const columns = columnTexts(rows, first, width, heads, source.decimal);
  const mapped = mapColumns(columns, context.waveform);
  const headings = heads.headingRow === null ? [] : (rows[heads.headingRow] ?? []);
  const signature = layoutSignature(source.format, headings);
  const remarks = [...mapped.remarks];
  let { confidence } = mapped;
  if (heads.headingRow === null) {
    confidence = Math.min(confidence, 0.4);
    remarks.unshift('The file has no headings: the channels are proposed from the numbers alone.');
  }
  const layout: Layout = {
    format: source.format, encoding: source.encoding, delimiter: source.delimiter, decimal: source.decimal, sheet: source.sheet,
    ...heads, firstDataRow: first, columns: mapped.columns,
  };
  const remembered = heads.headingRow === null ? undefined : context.remembered?.get(signature);
  const firstRows = rows.slice(0, Math.max(FIRST_ROWS, first + 12)).map((row) => row.map((c) => c.slice(0, 200)));
  if (remembered !== undefined && remembered.columns.length === layout.columns.length) {
    return { layout: { ...layout, columns: remembered.columns }, origin: 'remembered', confidence: 1, remarks: ['This layout was confirmed before for this instrument.'], firstRows, rowCount: source.rowCount };
  }
  return { layout, origin: 'proposed', confidence, remarks, firstRows, rowCount: source.rowCount };
}

/**
 * @param lines the first lines of the text, whole lines only
 * @param rowCount rows of the whole file where known, else those of `lines`
 * @throws TabularRefused when there is no table of numbers
 */
export function proposeDelimitedLayout(lines: readonly string[], encoding: Encoding, rowCount: number, context: ProposalContext): LayoutProposal {
  if (lines.every((line) => line.trim() === '')) throw new TabularRefused('file-empty');
  const dialect = dialectOf(lines);
  if (dialect.score === 0) {
    const numbers = lines.filter((l) => !Number.isNaN(cellValue(l, '.')) || !Number.isNaN(cellValue(l, ','))).length;
    throw new TabularRefused(numbers >= 3 ? 'one-column' : 'no-numbers');
  }
  return propose(dialect.rows, { format: 'delimited', encoding, delimiter: dialect.delimiter, decimal: dialect.decimal, sheet: '', rowCount }, context);
}

/** @param rows the first rows of a sheet as text, numbers written with a point */
export function proposeWorkbookLayout(rows: readonly (readonly string[])[], sheet: string, rowCount: number, context: ProposalContext): LayoutProposal {
  if (rows.length === 0) throw new TabularRefused('file-empty');
  return propose(rows, { format: 'workbook', encoding: 'utf-8', delimiter: ',', decimal: '.', sheet, rowCount }, context);
}

/** The signature of a confirmed layout, by the headings that it names. */
export function signatureOf(layout: Layout, firstRows: readonly (readonly string[])[]): string | null {
  return layout.headingRow === null ? null : layoutSignature(layout.format, firstRows[layout.headingRow] ?? []);
}
