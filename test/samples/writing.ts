/** Numbers and files as test frames and pulse units write them. */
import excel from 'exceljs';
import JSZip from 'jszip';

export const at = (values: ArrayLike<number>, i: number): number => values[i] ?? Number.NaN;
export const comma = (n: number, digits: number): string => n.toFixed(digits).replace('.', ',');
/** With the true minus sign. */
export const typeset = (n: number, digits: number): string => n.toFixed(digits).replace('-', '\u2212');
export const dayTime = (s: number): Date => new Date(Date.UTC(2026, 5, 1, 10, 0, 0) + Math.round(s * 1000));
export const clock = (s: number): string => dayTime(s).toISOString().slice(11, 23);
export const stopwatch = (s: number): string => `${String(Math.floor(s / 60)).padStart(2, '0')}:${(s % 60).toFixed(1).padStart(4, '0')}`;
/** To whole steps of an analogue converter. */
export const converted = (value: number, range: number, bits: number): number => Math.round((value / range) * 2 ** bits) * (range / 2 ** bits);

export type Cell = string | number | Date;

/** A workbook whose bytes do not tell when it was made. @param stamped sheets whose first column is formatted as a time of day */
export async function workbook(sheets: Readonly<Record<string, readonly (readonly Cell[])[]>>, stamped: readonly string[] = []): Promise<Uint8Array> {
  const book = new excel.Workbook();
  const made = new Date(Date.UTC(2026, 5, 1));
  book.created = made;
  book.modified = made;
  for (const [name, rows] of Object.entries(sheets)) {
    const sheet = book.addWorksheet(name);
    if (stamped.includes(name)) sheet.getColumn(1).numFmt = 'hh:mm:ss.000';
    sheet.addRows(rows.map((row) => [...row]));
  }
  const zip = await JSZip.loadAsync(await book.xlsx.writeBuffer());
  const dated = new JSZip();
  for (const [path, file] of Object.entries(zip.files)) if (!file.dir) dated.file(path, await file.async('uint8array'), { date: made, createFolders: false });
  return dated.generateAsync({ type: 'uint8array', compression: 'DEFLATE', platform: 'UNIX' });
}
