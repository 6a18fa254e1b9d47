/** Reads the mapped columns of a raw file as it streams: values as in the file, rows that cannot be read named. */
import type { ColumnMapping, Layout } from '../contract/runs';
import { cellNumber, cellValue, clockSeconds } from './numbers';
import { splitLine } from './split-line';
import { TabularRefused } from './tabular-refused';

export interface ColumnValues {
  readonly mapping: ColumnMapping;
  readonly values: Float64Array;
}

export interface ReadColumns {
  readonly columns: readonly ColumnValues[];
  readonly rows: number;
  /** The first 20 rows that could not be read; `row` counts from 1 as an editor shows it. */
  readonly problems: readonly { row: number; message: string }[];
  readonly problemCount: number;
  /** Blank lines, repeated headings and footers. */
  readonly skippedRows: number;
}

const NAMED_PROBLEMS = 20;
const LONGEST_LINE = 100_000;
const DAY = 86_400;
/** What loggers write for a reading that they do not have. */
const NO_VALUE = /^(nan|[+-]?inf(inity)?|n\/?a|null|none|over(flow|range|load)?|ovf|ol|err(or)?|-{1,3}|[*?]+|#\S+)$/i;
const WORD = /\p{L}{2}/u;

class Growing {
  private values = new Float64Array(1024);
  private length = 0;

  push(value: number): void {
    if (this.length === this.values.length) {
      const larger = new Float64Array(this.values.length * 2);
      larger.set(this.values);
      this.values = larger;
    }
    this.values[this.length] = value;
    this.length += 1;
  }

  finish(): Float64Array {
    return this.values.slice(0, this.length);
  }
}

/** Takes rows of cells one by one. */
export class ColumnReader {
  private readonly mappings: readonly ColumnMapping[];
  private readonly grown: Growing[];
  private readonly row: Float64Array;
  private readonly problems: { row: number; message: string }[] = [];
  private problemCount = 0;
  private skipped = 0;
  private count = 0;
  private index = 0;
  private clock: boolean[] | null = null;

  constructor(private readonly layout: Layout) {
    this.mappings = layout.columns.filter((c) => c.channel !== 'ignore');
    if (this.mappings.length === 0) throw new TabularRefused('column-missing', 'No column is mapped to a channel.');
    this.grown = this.mappings.map(() => new Growing());
    this.row = new Float64Array(this.mappings.length);
  }

  pushLine(line: string): void {
    if (line.length > LONGEST_LINE) throw new TabularRefused('line-too-long');
    if (this.index < this.layout.firstDataRow) this.index += 1;
    else this.pushCells(splitLine(line, this.layout.delimiter));
  }

  pushCells(cells: readonly string[]): void {
    this.index += 1;
    if (this.index <= this.layout.firstDataRow) return;
    let numbers = 0;
    let bad = -1;
    for (let i = 0; i < this.mappings.length; i += 1) {
      const cell = cells[this.mappings[i]?.column ?? -1] ?? '';
      const value = this.clock === null ? cellValue(cell, this.layout.decimal) : this.clock[i] === true ? clockSeconds(cell) : cellNumber(cell, this.layout.decimal);
      this.row[i] = value;
      if (Number.isNaN(value)) bad = i;
      else numbers += 1;
    }
    if (numbers === 0 && !this.isSpoiltData(cells)) this.skipped += 1;
    else if (bad >= 0) this.name(bad, cells);
    else this.keep(cells);
  }

  /** A row of data in which no number can be read, told from headings, footers and blank rows by having no words. */
  private isSpoiltData(cells: readonly string[]): boolean {
    const mapped = this.mappings.map(({ column }) => (cells[column] ?? '').trim()).filter((cell) => cell !== '');
    return mapped.length > 0 && mapped.every((cell) => NO_VALUE.test(cell) || (/\d/.test(cell) && !WORD.test(cell)));
  }

  private keep(cells: readonly string[]): void {
    this.clock ??= this.mappings.map((m) => Number.isNaN(cellNumber(cells[m.column] ?? '', this.layout.decimal)));
    for (let i = 0; i < this.grown.length; i += 1) this.grown[i]?.push(this.row[i] ?? Number.NaN);
    this.count += 1;
  }

  private name(bad: number, cells: readonly string[]): void {
    this.problemCount += 1;
    if (this.problems.length >= NAMED_PROBLEMS) return;
    const mapping = this.mappings[bad];
    const cell = (cells[mapping?.column ?? -1] ?? '').trim().slice(0, 40);
    this.problems.push({ row: this.index, message: cell === '' ? `${mapping?.heading || 'A cell'} is empty` : `${mapping?.heading || 'A cell'} holds “${cell}”, not a number` });
  }

  /** @throws TabularRefused when no row could be read */
  finish(): ReadColumns {
    if (this.count === 0) throw new TabularRefused('no-numbers', this.problems[0] === undefined ? '' : `Row ${this.problems[0].row}: ${this.problems[0].message}.`);
    const columns = this.mappings.map((mapping, i) => {
      const values = this.grown[i]?.finish() ?? new Float64Array(0);
      return { mapping, values: this.clock?.[i] === true ? sinceFirst(values) : values };
    });
    return { columns, rows: this.count, problems: this.problems, problemCount: this.problemCount, skippedRows: this.skipped };
  }
}

/** Seconds of the day to seconds from the first, midnight passed over. */
function sinceFirst(clock: Float64Array): Float64Array {
  const first = clock[0] ?? 0;
  let days = 0;
  return clock.map((value, i) => {
    if (i > 0 && value < (clock[i - 1] ?? 0) - DAY / 2) days += 1;
    return value + days * DAY - first;
  });
}

/** Cuts decoded text into lines across chunks. */
export class LineCutter {
  private rest = '';

  constructor(private readonly take: (line: string) => void) {}

  push(text: string): void {
    const parts = (this.rest + text).split(/\r\n|\n|\r(?!$)/);
    this.rest = parts.pop() ?? '';
    if (this.rest.length > LONGEST_LINE) throw new TabularRefused('line-too-long');
    for (const part of parts) this.take(part);
  }

  finish(): void {
    if (this.rest.replace(/\r$/, '') !== '') this.take(this.rest.replace(/\r$/, ''));
    this.rest = '';
  }
}

/** Streams the bytes of a delimited file into columns. @throws TabularRefused */
export async function readDelimited(chunks: AsyncIterable<Uint8Array>, layout: Layout, onProgress: (bytes: number) => void = () => undefined): Promise<ReadColumns> {
  const reader = new ColumnReader(layout);
  const cutter = new LineCutter((line) => reader.pushLine(line));
  const decoder = new TextDecoder(layout.encoding);
  let bytes = 0;
  for await (const chunk of chunks) {
    cutter.push(decoder.decode(chunk, { stream: true }));
    bytes += chunk.byteLength;
    onProgress(bytes);
  }
  cutter.push(decoder.decode());
  cutter.finish();
  return reader.finish();
}
