/** A raw file on this machine: what it is, how it may be read, and its columns. Runs in worker threads; knows no database. */
import { createReadStream } from 'node:fs';
import { stat } from 'node:fs/promises';
import type { Layout, LayoutProposal } from '@strainwright/common/contract/runs';
import { looksBinary } from '@strainwright/common/tabular/decode-text';
import { proposeDelimitedLayout, type ProposalContext } from '@strainwright/common/tabular/propose-layout';
import { ColumnReader, readDelimited, type ReadColumns } from '@strainwright/common/tabular/read-columns';
import { TabularRefused } from '@strainwright/common/tabular/tabular-refused';
import { scanArchive } from './archive';
import { countLines, sampleText } from './text-sample';
import { workbookRows } from './workbook';
import { proposeOfWorkbook } from './workbook-proposal';

const XLSX = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet';

export interface Inspection {
  mediaType: string;
  proposal: LayoutProposal;
}

/** Typed by content, never by name. @throws TabularRefused when it is no table */
export async function inspectRawFile(path: string, context: ProposalContext): Promise<Inspection> {
  const sample = await sampleText(path);
  if (sample.size === 0) throw new TabularRefused('file-empty');
  if (sample.isArchive) {
    const names = await scanArchive(path, sample.size);
    return { mediaType: XLSX, proposal: await proposeOfWorkbook(path, names, context) };
  }
  if (looksBinary(sample.head)) throw new TabularRefused('file-binary');
  const proposal = proposeDelimitedLayout(sample.lines(), sample.later(), sample.encoding, 0, context);
  return { mediaType: 'text/plain', proposal: await counted(path, proposal) };
}

/** The proposal of a text with the rows that it reads counted, and those that it cannot read said. */
async function counted(path: string, proposal: LayoutProposal): Promise<LayoutProposal> {
  const { layout } = proposal;
  if (layout.columns.every((c) => c.channel === 'ignore')) return { ...proposal, rowCount: Math.max(0, (await countLines(path, layout.encoding)) - layout.firstDataRow) };
  const read = await readRawFile(path, layout);
  const [first] = read.problems;
  if (first === undefined) return { ...proposal, rowCount: read.rows };
  const remark = `${read.problemCount} ${read.problemCount === 1 ? 'row' : 'rows'} could not be read; row ${first.row}: ${first.message}.`;
  const few = read.problemCount * 100 <= read.rows;
  return { ...proposal, rowCount: read.rows, confidence: Math.min(proposal.confidence, few ? 1 : 0.5), remarks: [...proposal.remarks, remark] };
}

/** Every mapped column of the file. @throws TabularRefused */
export async function readRawFile(path: string, layout: Layout, onProgress: (fraction: number) => void = () => undefined): Promise<ReadColumns> {
  const { size } = await stat(path);
  if (layout.format === 'delimited') return readDelimited(createReadStream(path, { highWaterMark: 1 << 20 }), layout, (bytes) => onProgress(bytes / size));
  const names = await scanArchive(path, size);
  const reader = new ColumnReader(layout);
  let read: string | null = null;
  // A layout without a sheet's name reads the first.
  const wanted = (sheet: string) => (layout.sheet === '' ? read === null : sheet === layout.sheet);
  for await (const { sheet, cells } of workbookRows(path, names, wanted)) {
    read = sheet;
    reader.pushCells(cells);
  }
  return reader.finish();
}
