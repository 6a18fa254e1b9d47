/** Cells of a raw file to numbers, by the file's own decimal sign; time stamps to seconds. */
export type DecimalSign = '.' | ',';

const NUMBER = { '.': /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/, ',': /^[+-]?(\d+,?\d*|,\d+)([eE][+-]?\d+)?$/ };
const DATE = String.raw`(?:\d{4}-\d{2}-\d{2}[T ]|\d{1,2}[./]\d{1,2}[./]\d{2,4} )`;
const CLOCK = new RegExp(`^${DATE}?(\\d{1,4}):(\\d{2}):(\\d{2}(?:[.,]\\d+)?)(?: ?([AP])M)?(?:Z|[+-]\\d{2}:?\\d{2})?$`, 'i');
/** Minutes and seconds since the start, told from hours and minutes by the fraction. */
const STOPWATCH = /^(\d{1,4}):(\d{2}[.,]\d+)$/;
const MINUS = '\u2212';

/** NaN when the cell is no number. Both the hyphen and the true minus sign are read. */
export function cellNumber(cell: string, decimal: DecimalSign): number {
  const text = cell.trim();
  if (text === '') return Number.NaN;
  if (!NUMBER[decimal].test(text)) return text.includes(MINUS) ? cellNumber(text.replaceAll(MINUS, '-'), decimal) : Number.NaN;
  return Number(decimal === ',' ? text.replace(',', '.') : text);
}

const seconds = (text: string | undefined) => Number((text ?? '').replace(',', '.'));

/** Seconds of the day of `hh:mm:ss.sss`, with or without a date before it, or of `mm:ss.s` since the start; NaN when it is no time stamp. */
export function clockSeconds(cell: string): number {
  const text = cell.trim();
  const match = CLOCK.exec(text);
  if (match === null) {
    const since = STOPWATCH.exec(text);
    return since === null ? Number.NaN : Number(since[1]) * 60 + seconds(since[2]);
  }
  const half = match[4]?.toUpperCase();
  const hours = half === undefined ? Number(match[1]) : (Number(match[1]) % 12) + (half === 'P' ? 12 : 0);
  return hours * 3600 + Number(match[2]) * 60 + seconds(match[3]);
}

/** A number or, failing that, a time stamp in seconds. */
export function cellValue(cell: string, decimal: DecimalSign): number {
  const value = cellNumber(cell, decimal);
  return Number.isNaN(value) ? clockSeconds(cell) : value;
}

const GROUPED = /^[+-]?\d{1,3}(?:(?:,\d{3})+\.\d*|(?:\.\d{3})+,\d*|(?:,\d{3}){2,}|(?:\.\d{3}){2,}|(?:[' \u2019\u00a0\u202f]\d{3})+(?:[.,]\d*)?)$/;

/** True for a number with thousands separators that can be read in no other way, as `1,234.5` or `1.234,5`. */
export function hasThousandsSeparators(cell: string): boolean {
  return GROUPED.test(cell.trim());
}

/** True for `1,234` or `1.234`: one thousand or a little more than one. `0,123` and `1,23` can only be decimals. */
export function couldBeThousands(cell: string): boolean {
  return /^[+-]?[1-9]\d{0,2}[.,]\d{3}$/.test(cell.trim());
}
