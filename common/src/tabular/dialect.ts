/** How a text file is written: which sign parts its cells and which its decimals. */
import { cellValue, type DecimalSign } from './numbers';
import { splitHeadingLine, splitLine, type Delimiter } from './split-line';

const DELIMITERS: readonly Delimiter[] = ['\t', ';', ',', '|', ' '];
const DECIMALS: readonly DecimalSign[] = ['.', ','];

export type Row = readonly string[];

export interface Dialect {
  readonly delimiter: Delimiter;
  readonly decimal: DecimalSign;
}

const isFilled = (cell: string) => cell.trim() !== '';
export const filledCells = (row: Row | undefined): string[] => (row ?? []).filter(isFilled);

/** Cells that hold a number or a time stamp. */
const numbersIn = (row: Row, decimal: DecimalSign) => row.reduce((n, cell) => (isFilled(cell) && !Number.isNaN(cellValue(cell, decimal)) ? n + 1 : n), 0);

/** Numbers among the filled cells of a row, 0 to 1; 0 for a row with fewer than two. */
function numericShare(row: Row, decimal: DecimalSign): number {
  const numbers = numbersIn(row, decimal);
  return numbers < 2 ? 0 : numbers / filledCells(row).length;
}

/** A row of data: at least two numbers, and numbers in at least half of its cells (dates and states stand beside them). */
export function isDataRow(row: Row, decimal: DecimalSign): boolean {
  return numericShare(row, decimal) >= 0.5;
}

function mostFrequent(values: readonly number[]): number {
  const counts = new Map<number, number>();
  for (const value of values) counts.set(value, (counts.get(value) ?? 0) + 1);
  return [...counts.entries()].sort((a, b) => b[1] - a[1])[0]?.[0] ?? 0;
}

/** The width that most rows have. */
export const usualWidth = (rows: readonly Row[]): number => mostFrequent(rows.map((row) => row.length));

/** How many cells of the rows of usual width are numbers, counted in rows. A wrong dialect splits numbers or leaves cells that are none. */
function score(rows: readonly Row[], decimal: DecimalSign): number {
  const data = rows.filter((row) => isDataRow(row, decimal));
  const width = usualWidth(data);
  return data.filter((row) => row.length === width).reduce((sum, row) => sum + numericShare(row, decimal), 0);
}

/** The delimiter and decimal sign by which the lines hold most rows of one width made of numbers; null when no pair yields a row of data. */
export function dialectOf(lines: readonly string[]): Dialect | null {
  let best: Dialect | null = null;
  let bestScore = 0;
  for (const delimiter of DELIMITERS) {
    const rows = lines.map((line) => splitLine(line, delimiter));
    for (const decimal of DECIMALS) {
      const found = score(rows, decimal);
      if (found <= bestScore) continue;
      best = { delimiter, decimal };
      bestScore = found;
    }
  }
  return best;
}

/** The decimal sign of cells that are parted already; a point unless a comma reads more of them. */
export function decimalOf(rows: readonly Row[]): DecimalSign {
  return score(rows, ',') > score(rows, '.') ? ',' : '.';
}

/** Lines to rows. Where blanks part the cells, lines above the data are taken apart as headings, whose words hold blanks themselves. */
export function rowsOf(lines: readonly string[], { delimiter, decimal }: Dialect): Row[] {
  const rows = lines.map((line) => splitLine(line, delimiter));
  if (delimiter !== ' ') return rows;
  const width = usualWidth(rows.filter((row) => isDataRow(row, decimal)));
  const first = firstDataRow(rows, decimal, width);
  return rows.map((row, i) => (i < first ? splitHeadingLine(lines[i] ?? '', width) : row));
}

/** First of two data rows in a row, of the usual width and with about the usual count of numbers; −1 when there is none. */
export function firstDataRow(rows: readonly Row[], decimal: DecimalSign, width: number): number {
  const usual = mostFrequent(rows.filter((row) => row.length === width && isDataRow(row, decimal)).map((row) => numbersIn(row, decimal)));
  const fits = (i: number) => {
    const row = rows[i];
    return row !== undefined && row.length >= width - 1 && isDataRow(row, decimal) && numbersIn(row, decimal) >= usual - 1;
  };
  for (let i = 0; i < rows.length; i += 1) if (fits(i) && (fits(i + 1) || i + 1 >= rows.length)) return i;
  return -1;
}
