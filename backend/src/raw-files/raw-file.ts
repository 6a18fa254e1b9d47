/** A raw file on this machine: what it is, how it may be read, and its columns. Runs in worker threads; knows no database. */
import { createReadStream } from 'node:fs';
import { open, stat } from 'node:fs/promises';
import type { Layout, LayoutProposal } from '@strainwright/common/contract/runs';
import { detectEncoding, looksBinary } from '@strainwright/common/tabular/decode-text';
import { proposeDelimitedLayout, proposeWorkbookLayout, type ProposalContext } from '@strainwright/common/tabular/propose-layout';
import { ColumnReader, LineCutter, readDelimited, type ReadColumns } from '@strainwright/common/tabular/read-columns';
import { TabularRefused } from '@strainwright/common/tabular/tabular-refused';
import { scanArchive, workbookRows } from './workbook';

const HEAD = 512 * 1024;
const HEAD_ROWS = 2000;
const XLSX = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet';

async function headOf(path: string): Promise<{ head: Buffer; size: number }> {
  const { size } = await stat(path);
  const file = await open(path, 'r');
  try {
    const head = Buffer.alloc(Math.min(size, HEAD));
    await file.read(head, 0, head.length, 0);
    return { head, size };
  } finally {
    await file.close();
  }
}

const isArchive = (head: Buffer) => head.length >= 4 && head.readUInt32LE(0) === 0x04034b50;

export interface Inspection {
  mediaType: string;
  proposal: LayoutProposal;
}

/** Typed by content, never by name. @throws TabularRefused when it is no table */
export async function inspectRawFile(path: string, context: ProposalContext): Promise<Inspection> {
  const { head, size } = await headOf(path);
  if (size === 0) throw new TabularRefused('file-empty');
  if (isArchive(head)) return { mediaType: XLSX, proposal: await inspectWorkbook(path, size, context) };
  if (looksBinary(head)) throw new TabularRefused('file-binary');
  return { mediaType: 'text/plain', proposal: await inspectText(path, head, size, context) };
}

async function inspectText(path: string, head: Buffer, size: number, context: ProposalContext): Promise<LayoutProposal> {
  const encoding = detectEncoding(head);
  const lines: string[] = [];
  const cutter = new LineCutter((line) => lines.push(line));
  cutter.push(new TextDecoder(encoding).decode(head, { stream: true }));
  if (size <= head.length) cutter.finish();
  const proposal = proposeDelimitedLayout(lines.slice(0, HEAD_ROWS), encoding, lines.length, context);
  const read = await readDelimited(createReadStream(path), proposal.layout);
  return { ...proposal, rowCount: read.rows };
}

async function inspectWorkbook(path: string, size: number, context: ProposalContext): Promise<LayoutProposal> {
  await scanArchive(path, size);
  const rows: string[][] = [];
  let sheet = '';
  let count = 0;
  for await (const row of workbookRows(path, '')) {
    sheet = row.sheet;
    count += 1;
    if (rows.length < HEAD_ROWS) rows.push(row.cells);
  }
  const proposal = proposeWorkbookLayout(rows, sheet, count, context);
  return { ...proposal, rowCount: count - proposal.layout.firstDataRow };
}

/** Every mapped column of the file. @throws TabularRefused */
export async function readRawFile(path: string, layout: Layout, onProgress: (fraction: number) => void = () => undefined): Promise<ReadColumns> {
  const { size } = await stat(path);
  if (layout.format === 'delimited') return readDelimited(createReadStream(path, { highWaterMark: 1 << 20 }), layout, (bytes) => onProgress(bytes / size));
  await scanArchive(path, size);
  const reader = new ColumnReader(layout);
  for await (const { cells } of workbookRows(path, layout.sheet)) reader.pushCells(cells);
  return reader.finish();
}
