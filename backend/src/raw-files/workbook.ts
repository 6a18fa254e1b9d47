import { Readable } from 'node:stream';
import { createReadStream } from 'node:fs';
import { promisify } from 'node:util';
import { TabularRefused } from '@strainwright/common/tabular/tabular-refused';
import type { ZipFile, Entry } from 'yauzl';

const LARGEST_UNPACKED = 1024 ** 3;
const LARGEST_RATIO = 100;
const RATIO_COUNTS_FROM = 10 * 1024 ** 2;
const MOST_ENTRIES = 1000;

/** Reads an archive's directory before anything is unpacked. @throws TabularRefused for an archive bomb or a broken archive */
export async function scanArchive(path: string, size: number): Promise<void> {
  const { open } = await import('yauzl');
  const archive = await (promisify(open) as (path: string, options: object) => Promise<ZipFile>)(path, { lazyEntries: true }).catch(() => {
    throw new TabularRefused('workbook-broken');
  });
  let unpacked = 0;
  let entries = 0;
  await new Promise<void>((resolve, reject) => {
    archive.on('entry', (entry: Entry) => {
      entries += 1;
      unpacked += entry.uncompressedSize;
      if (entries > MOST_ENTRIES || unpacked > LARGEST_UNPACKED || (unpacked > RATIO_COUNTS_FROM && unpacked > LARGEST_RATIO * size)) reject(new TabularRefused('archive-too-large'));
      else archive.readEntry();
    });
    archive.on('end', resolve);
    archive.on('error', () => reject(new TabularRefused('workbook-broken')));
    archive.readEntry();
  }).finally(() => archive.close());
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
 * Rows of a workbook's sheet as text, streamed: numbers with a point, row positions kept (empty rows come as empty).
 * @param sheet its name; `` takes the first sheet that has rows
 * @throws TabularRefused when the workbook cannot be read
 */
export async function* workbookRows(path: string, sheet: string): AsyncGenerator<{ sheet: string; cells: string[] }> {
  const { default: excel } = await import('exceljs');
  const source: Readable = createReadStream(path);
  try {
    const reader = new excel.stream.xlsx.WorkbookReader(source, { sharedStrings: 'cache', hyperlinks: 'ignore', styles: 'ignore', worksheets: 'emit', entries: 'emit' });
    for await (const worksheet of reader) {
      // The reader knows a sheet by its name once the workbook part was read; before that by its number.
      const name = 'name' in worksheet && typeof worksheet.name === 'string' ? worksheet.name : '';
      if (sheet !== '' && name !== sheet) continue;
      let last = 0;
      for await (const row of worksheet) {
        while (last + 1 < row.number) {
          last += 1;
          yield { sheet: name, cells: [] };
        }
        last = row.number;
        const values = Array.isArray(row.values) ? row.values.slice(1) : [];
        yield { sheet: name, cells: Array.from(values, cellText) };
      }
      if (last > 0) return;
    }
  } catch (error) {
    if (error instanceof TabularRefused) throw error;
    throw new TabularRefused('workbook-broken', error instanceof Error ? error.message.slice(0, 120) : '');
  } finally {
    source.destroy();
  }
}
