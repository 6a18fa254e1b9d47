/** One column of a table as it was sampled: its heading, its unit, and how its numbers behave. */
import { unit, type Dimension } from '../quantities/units';
import { splitHeading, unitCell } from './headings';
import { isDataRow, type Row } from './dialect';
import { cellNumber, cellValue, clockSeconds, type DecimalSign } from './numbers';

export interface ColumnText {
  /** 0-based place in the file. */
  readonly index: number;
  readonly heading: string;
  /** As the file writes it; empty when it states none. */
  readonly unitText: string;
  /** Numbers of the rows that were sampled over the file, NaN where a cell is none. */
  readonly values: readonly number[];
  readonly isClock: boolean;
}

/** @param data rows of data sampled over the file */
export function columnTexts(headings: Row, units: Row, data: readonly Row[], width: number, decimal: DecimalSign): ColumnText[] {
  const rows = data.filter((row) => isDataRow(row, decimal));
  return Array.from({ length: width }, (_, index) => {
    const { name, unitText } = splitHeading(headings[index] ?? '');
    const cells = rows.map((row) => row[index] ?? '');
    const filled = cells.filter((c) => c.trim() !== '');
    const isClock = filled.length > 0 && filled.every((c) => Number.isNaN(cellNumber(c, decimal)) && !Number.isNaN(clockSeconds(c)));
    const stated = (units[index] ?? '').trim();
    return { index, heading: name, unitText: stated === '' ? unitText : (unitCell(stated) ?? stated), values: cells.map((c) => cellValue(c, decimal)), isClock };
  });
}

export const nameOf = (column: ColumnText): string => column.heading || `Column ${column.index + 1}`;

export const finiteOf = (values: readonly number[]): number[] => values.filter(Number.isFinite);

/** Numbers in at least half of the sampled rows. */
export function isNumeric(column: ColumnText): boolean {
  return finiteOf(column.values).length * 2 >= column.values.length && column.values.length > 0;
}

export function isIncreasing(column: ColumnText): boolean {
  const values = finiteOf(column.values);
  return values.length > 3 && values.every((v, i) => i === 0 || v > (values[i - 1] ?? Number.NaN));
}

export const largestOf = (column: ColumnText): number => finiteOf(column.values).reduce((top, v) => Math.max(top, Math.abs(v)), 0);

export const dimensionOf = (column: ColumnText): Dimension | undefined => unit(column.unitText)?.dimension;
