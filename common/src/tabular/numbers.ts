/** Cells of a raw file to numbers, by the file's own decimal sign; time stamps to seconds. */
export type DecimalSign = '.' | ',';

const NUMBER = { '.': /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/, ',': /^[+-]?(\d+,?\d*|,\d+)([eE][+-]?\d+)?$/ };
const CLOCK = /^(?:\d{4}-\d{2}-\d{2}[T ]|\d{1,2}[./]\d{1,2}[./]\d{2,4} )?(\d{1,2}):(\d{2}):(\d{2}(?:[.,]\d+)?)Z?$/;

/** NaN when the cell is no number. */
export function cellNumber(cell: string, decimal: DecimalSign): number {
  const text = cell.trim();
  if (text === '' || !NUMBER[decimal].test(text)) return Number.NaN;
  return Number(decimal === ',' ? text.replace(',', '.') : text);
}

/** Seconds of the day of `hh:mm:ss.sss`, with or without a date before it; NaN when it is no time stamp. */
export function clockSeconds(cell: string): number {
  const match = CLOCK.exec(cell.trim());
  if (match === null) return Number.NaN;
  return Number(match[1]) * 3600 + Number(match[2]) * 60 + Number((match[3] ?? '').replace(',', '.'));
}

/** A number or, failing that, a time stamp in seconds. */
export function cellValue(cell: string, decimal: DecimalSign): number {
  const value = cellNumber(cell, decimal);
  return Number.isNaN(value) ? clockSeconds(cell) : value;
}
