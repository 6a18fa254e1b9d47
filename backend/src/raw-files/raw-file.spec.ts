/** Raw files as they lie on disk: text sampled over its length, workbooks with several sheets, archives that are not what they say. */
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { deflateRawSync } from 'node:zlib';
import type { LayoutProposal } from '@strainwright/common/contract/runs';
import excel from 'exceljs';
import JSZip from 'jszip';
import { inspectRawFile, readRawFile } from './raw-file';

let folder: string;
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'raw-file-'));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

let count = 0;
function kept(content: string | Uint8Array): string {
  count += 1;
  const path = join(folder, `${count}`);
  writeFileSync(path, content);
  return path;
}

const inspect = async (content: string | Uint8Array): Promise<LayoutProposal> => (await inspectRawFile(kept(content), { waveform: false })).proposal;
const channels = ({ layout }: LayoutProposal) => layout.columns.map((c) => `${c.channel} ${c.unit} ${c.sign}`.replace(/ignore.*/, 'ignore'));
const steps = Array.from({ length: 50 }, (_, i) => i);

type Cell = string | number | Date;
async function workbook(sheets: Readonly<Record<string, readonly (readonly Cell[])[]>>, change: (book: excel.Workbook) => void = () => undefined): Promise<Uint8Array> {
  const book = new excel.Workbook();
  for (const [name, rows] of Object.entries(sheets)) book.addWorksheet(name).addRows(rows.map((row) => [...row]));
  change(book);
  return new Uint8Array(await book.xlsx.writeBuffer());
}
const DATA: readonly (readonly Cell[])[] = [['Time (s)', 'Load (kN)', 'Strain (%)'], ...steps.map((i) => [0.5 * i, 2.5 * i, 0.001 * i])];
const MAPPED = ['time s 1', 'force kN 1', 'axial1 % 1'];

describe('a text file', () => {
  it('whose loading begins long after its head is turned by the whole of it', async () => {
    const rows = Array.from({ length: 60_000 }, (_, i) => [0.01 * i, i < 40_000 ? 0.01 * (i % 2) : -0.005 * (i - 40_000), i < 40_000 ? 0.2 * (i % 2) : -0.05 * (i - 40_000)].map((v) => v.toFixed(4)).join(';'));
    const proposal = await inspect(['Time (s);Load (kN);Strain (µε)', ...rows].join('\n'));
    expect(channels(proposal)).toEqual(['time s 1', 'force kN -1', 'axial1 µε -1']);
    expect(proposal.rowCount).toBe(60_000);
  });

  it('whose headings say nothing is kept for a person to map', async () => {
    const proposal = await inspect(['Kanal A;Kanal B', ...steps.map((i) => `${(i * 7) % 5};${(i * 3) % 4}`)].join('\n'));
    expect(channels(proposal)).toEqual(['ignore', 'ignore']);
    expect(proposal.rowCount).toBe(50);
    expect(proposal.confidence).toBeLessThan(0.6);
  });

  it('with many unreadable rows says so, and how many', async () => {
    const proposal = await inspect(['Load (kN);Strain (%)', ...steps.map((i) => `${2.5 * i};${i > 40 ? 'OVL' : 0.001 * i}`)].join('\n'));
    expect(proposal).toMatchObject({ rowCount: 41, confidence: 0.5 });
    expect(proposal.remarks).toContain('9 rows could not be read; row 43: Strain holds “OVL”, not a number.');
  });

  it.each<[string, string | Uint8Array, string]>([
    ['nothing', '', 'file-empty'],
    ['blank lines', '\n \n\n', 'file-empty'],
    ['a picture', Uint8Array.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13, 0x49, 0x48, 0x44, 0x52, 0, 0, 2, 0]), 'file-binary'],
    ['one line of 100 001 characters', 'x'.repeat(100_001), 'line-too-long'],
    ['one column', `strain\n${steps.join('\n')}`, 'one-column'],
    ['headings only', 'Load (kN);Strain (%)\n', 'no-numbers'],
  ])('of %s is refused', async (_, content, code) => {
    await expect(inspect(content)).rejects.toMatchObject({ code });
  });
});

describe('a workbook', () => {
  it('is read from the sheet that holds the rows, not from the first', async () => {
    const bytes = await workbook({ Parameters: [['Specimen', 'A1'], ['Diameter', 50], ['Height', 100]], 'Data & more': DATA });
    const proposal = await inspect(bytes);
    expect(proposal.layout.sheet).toBe('Data & more');
    expect(channels(proposal)).toEqual(MAPPED);
    expect(proposal).toMatchObject({ rowCount: 50, confidence: 1 });
    const read = await readRawFile(kept(bytes), proposal.layout);
    expect([...(read.columns[1]?.values ?? [])]).toEqual(steps.map((i) => 2.5 * i));
  });

  it('with two tests asks which', async () => {
    const proposal = await inspect(await workbook({ 'Specimen 1': DATA, 'Specimen 2': DATA.slice(0, 45) }));
    expect(proposal.layout.sheet).toBe('Specimen 1');
    expect(proposal.confidence).toBeLessThan(0.6);
    expect(proposal.remarks[0]).toBe('Sheet “Specimen 1” is read; “Specimen 2” holds numbers too.');
  });

  it('has times of day as cells of its own kind', async () => {
    const rows = [['Time', 'Load (kN)', 'Strain (%)'], ...steps.map((i) => [new Date(Date.UTC(2026, 5, 1, 10, 0, 0, 500 * i)), 2.5 * i, 0.001 * i])];
    const bytes = await workbook({ Data: rows }, (book) => {
      book.getWorksheet('Data')?.getColumn(1).eachCell((cell, row) => {
        if (row > 1) cell.numFmt = 'yyyy-mm-dd hh:mm:ss.000';
      });
    });
    const proposal = await inspect(bytes);
    expect(channels(proposal)).toEqual(MAPPED);
    const [time] = (await readRawFile(kept(bytes), proposal.layout)).columns;
    time?.values.forEach((t, i) => expect(t).toBeCloseTo(0.5 * i, 3));
  });

  it('takes the results of formulas', async () => {
    const bytes = await workbook({ Data: DATA }, (book) => {
      const load = book.getWorksheet('Data')?.getColumn(2);
      load?.eachCell((cell, row) => {
        if (row > 1) cell.value = { formula: `A${row}*5+1`, result: 2.5 * (row - 2) + 1 };
      });
    });
    const proposal = await inspect(bytes);
    const read = await readRawFile(kept(bytes), proposal.layout);
    expect([...(read.columns[1]?.values ?? [])]).toEqual(steps.map((i) => 2.5 * i + 1));
  });

  it('is named by its parts where other software wrote them from the root', async () => {
    const zip = await JSZip.loadAsync(await workbook({ Notes: [['a', 'b']], Data: DATA }));
    const relations = (await zip.file('xl/_rels/workbook.xml.rels')?.async('string')) ?? '';
    zip.file('xl/_rels/workbook.xml.rels', relations.replaceAll('Target="worksheets', 'Target="/xl/worksheets'));
    const proposal = await inspect(await zip.generateAsync({ type: 'uint8array', compression: 'DEFLATE' }));
    expect(proposal.layout.sheet).toBe('Data');
  });
});

/** One entry of an archive, its sizes as `says` has them. */
function entryOf(name: string, content: Uint8Array, says = content.length) {
  const data = deflateRawSync(content);
  const local = Buffer.alloc(30);
  local.writeUInt32LE(0x04034b50, 0);
  local.writeUInt16LE(20, 4);
  local.writeUInt16LE(8, 8);
  local.writeUInt32LE(data.length, 18);
  local.writeUInt32LE(says, 22);
  local.writeUInt16LE(name.length, 26);
  return { name: Buffer.from(name), data, says, bytes: Buffer.concat([local, Buffer.from(name), data]) };
}

/** An archive of entries, of which the directory lists only some. */
function archiveOf(entries: readonly ReturnType<typeof entryOf>[], listed = entries): Uint8Array {
  const directory = listed.map((entry) => {
    const head = Buffer.alloc(46);
    head.writeUInt32LE(0x02014b50, 0);
    head.writeUInt16LE(20, 4);
    head.writeUInt16LE(20, 6);
    head.writeUInt16LE(8, 10);
    head.writeUInt32LE(entry.data.length, 20);
    head.writeUInt32LE(entry.says, 24);
    head.writeUInt16LE(entry.name.length, 28);
    head.writeUInt32LE(entries.slice(0, entries.indexOf(entry)).reduce((sum, e) => sum + e.bytes.length, 0), 42);
    return Buffer.concat([head, entry.name]);
  });
  const [body, central] = [Buffer.concat(entries.map((e) => e.bytes)), Buffer.concat(directory)];
  const end = Buffer.alloc(22);
  end.writeUInt32LE(0x06054b50, 0);
  end.writeUInt16LE(listed.length, 8);
  end.writeUInt16LE(listed.length, 10);
  end.writeUInt32LE(central.length, 12);
  end.writeUInt32LE(body.length, 16);
  return Buffer.concat([body, central, end]);
}

describe('an archive', () => {
  const zeros = new Uint8Array(64 << 20);
  const small = entryOf('xl/workbook.xml', Buffer.from('<workbook/>'));

  it('of ordinary making is no workbook, and is refused as none', async () => {
    await expect(inspect(archiveOf([small, entryOf('letter.txt', Buffer.from('Dear laboratory'))]))).rejects.toMatchObject({ code: 'no-numbers' });
  });

  it.each<[string, () => Uint8Array, string]>([
    ['that says it swells a hundredfold', () => archiveOf([small, entryOf('xl/worksheets/sheet1.xml', zeros)]), 'archive-too-large'],
    ['that swells though its directory says it does not', () => archiveOf([small, entryOf('xl/worksheets/sheet1.xml', zeros, 1000)]), 'archive-too-large'],
    ['that hides an entry from its directory', () => {
      const hidden = entryOf('xl/worksheets/sheet1.xml', Buffer.concat([zeros, zeros]));
      return archiveOf([small, hidden], [small]);
    }, 'workbook-broken'],
    ['of 1001 entries', () => archiveOf(Array.from({ length: 1001 }, (_, i) => entryOf(`${i}`, Buffer.from('x')))), 'archive-too-large'],
    ['cut short', () => archiveOf([small]).subarray(0, 60), 'workbook-broken'],
  ])('%s is refused', async (_, make, code) => {
    await expect(inspect(make())).rejects.toMatchObject({ code });
  });
});
