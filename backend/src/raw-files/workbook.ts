/** Rows of a workbook as text, streamed. */
import { EventEmitter } from 'node:events';
import { createReadStream } from 'node:fs';
import { TabularRefused } from '@strainwright/common/tabular/tabular-refused';

export interface SheetRow {
  readonly sheet: string;
  readonly cells: string[];
}

function cellText(value: unknown): string {
  if (value === null || value === undefined) return '';
  if (typeof value === 'number') return String(value);
  if (value instanceof Date) return value.toISOString().replace('T', ' ').replace('Z', '');
  if (typeof value === 'object') {
    if ('result' in value) return cellText(value.result);
    if ('richText' in value && Array.isArray(value.richText)) return value.richText.map((part: { text?: string }) => part.text ?? '').join('');
    if ('text' in value) return cellText(value.text);
    return '';
  }
  return String(value);
}

/**
 * Rows of a workbook: numbers with a point, times of day as time stamps, row positions kept (empty rows come as empty).
 * @param wanted whether the rows of a sheet are wanted, asked once for each
 * @param names of sheets by the number of their part: the reader itself learns them too late in some workbooks
 * @throws TabularRefused when the workbook cannot be read
 */
export async function* workbookRows(path: string, names: ReadonlyMap<string, string>, wanted: (sheet: string) => boolean): AsyncGenerator<SheetRow> {
  const { default: excel } = await import('exceljs');
  const source = createReadStream(path);
  try {
    const reader = new excel.stream.xlsx.WorkbookReader(source, { sharedStrings: 'cache', hyperlinks: 'ignore', styles: 'cache', worksheets: 'emit', entries: 'emit' });
    // The reader renumbers sheets that it knows by name: the number of the part comes with the event just before.
    let part = '';
    if (reader instanceof EventEmitter) {
      reader.on('entry', (entry: { type: string; id?: string }) => {
        if (entry.type === 'worksheet') part = entry.id ?? '';
      });
    }
    for await (const worksheet of reader) {
      const sheet = names.get(part) ?? `sheet${part}`;
      // A sheet that is passed over is still taken to its end by the reader, which then clears away what it unpacked.
      if (!wanted(sheet)) continue;
      let last = 0;
      for await (const row of worksheet) {
        for (; last + 1 < row.number; last += 1) yield { sheet, cells: [] };
        last = row.number;
        yield { sheet, cells: Array.from(Array.isArray(row.values) ? row.values.slice(1) : [], cellText) };
      }
    }
  } catch (error) {
    if (error instanceof TabularRefused) throw error;
    throw new TabularRefused('workbook-broken', error instanceof Error ? error.message.slice(0, 120) : '');
  } finally {
    source.destroy();
  }
}
