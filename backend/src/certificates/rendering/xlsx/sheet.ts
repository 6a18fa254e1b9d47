/** Writing one sheet: user text made harmless, numbers as numbers. */
import type { Workbook, Worksheet, CellValue } from 'exceljs';

/**
 * Text that no spreadsheet program takes for a formula, here or once saved as delimited text: what starts with = + - @
 * (full-width ones too), blanks before them included, gets an apostrophe in front.
 */
export function harmless(text: string): string {
  return /^(\s*[=+\-@＝＋－＠]|[\t\r\n])/u.test(text) ? `'${text}` : text;
}

export type Cell = string | number | null | { readonly formula: string; readonly result: number };
export interface SheetColumn {
  readonly head: string;
  readonly width: number;
  readonly format?: string;
}

function written(cell: Cell): CellValue {
  return typeof cell === 'string' ? harmless(cell) : cell;
}

/** A sheet with one table: a bold head that stays in view, then rows. */
export function tableSheet(workbook: Workbook, name: string, columns: readonly SheetColumn[], rows: readonly (readonly Cell[])[]): Worksheet {
  const sheet = workbook.addWorksheet(name, { views: [{ state: 'frozen', ySplit: 1 }], pageSetup: { paperSize: 9, orientation: 'landscape', fitToPage: true, fitToWidth: 1, fitToHeight: 0 } });
  sheet.columns = columns.map(({ width, format }) => ({ width, style: { font: { name: 'Arial', size: 10 }, ...(format === undefined ? {} : { numFmt: format }) } }));
  const head = sheet.addRow(columns.map((c) => c.head));
  head.font = { name: 'Arial', size: 10, bold: true };
  head.border = { bottom: { style: 'thin', color: { argb: 'FF1C2430' } } };
  for (const row of rows) sheet.addRow(row.map(written));
  return sheet;
}

/** A sheet of labels and values, one pair a row. */
export function factSheet(workbook: Workbook, name: string, pairs: readonly (readonly [label: string, value: Cell])[]): Worksheet {
  const sheet = workbook.addWorksheet(name, { pageSetup: { paperSize: 9, orientation: 'portrait', fitToPage: true, fitToWidth: 1, fitToHeight: 0 } });
  sheet.columns = [{ width: 30, style: { font: { name: 'Arial', size: 10, bold: true }, alignment: { vertical: 'top' } } }, { width: 90, style: { font: { name: 'Arial', size: 10 }, alignment: { wrapText: true, vertical: 'top', horizontal: 'left' } } }];
  for (const [label, value] of pairs) sheet.addRow([label, written(value)]);
  return sheet;
}
