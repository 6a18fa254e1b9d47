/** Looks into a text file without reading all of it: its head, and lines from further on. */
import { createReadStream } from 'node:fs';
import { open, stat } from 'node:fs/promises';
import { detectEncoding, type Encoding } from '@strainwright/common/tabular/decode-text';
import { LineCutter } from '@strainwright/common/tabular/read-columns';

const HEAD = 512 * 1024;
const HEAD_LINES = 2000;
/** Further on, at these shares of the file. */
const PLACES = [0.2, 0.4, 0.6, 0.8, 1];
const WINDOW = 16 * 1024;

export interface TextSample {
  readonly size: number;
  readonly head: Uint8Array;
  readonly encoding: Encoding;
  readonly isArchive: boolean;
  /** The first whole lines. @throws TabularRefused when a line is too long */
  lines(): string[];
  /** Whole lines from further on; none where the head is the whole file. */
  later(): string[];
}

function cut(text: string, isEnd: boolean): string[] {
  const lines: string[] = [];
  const cutter = new LineCutter((line) => lines.push(line));
  cutter.push(text);
  if (isEnd) cutter.finish();
  return lines;
}

export async function sampleText(path: string): Promise<TextSample> {
  const { size } = await stat(path);
  const file = await open(path, 'r');
  try {
    const read = async (from: number, length: number) => {
      const bytes = Buffer.alloc(length);
      const { bytesRead } = await file.read(bytes, 0, length, from);
      return bytes.subarray(0, bytesRead);
    };
    const head = await read(0, Math.min(size, HEAD));
    const places = size <= HEAD ? [] : PLACES.map((share) => Math.max(HEAD, Math.floor((share * (size - WINDOW)) / 4) * 4));
    const windows = await Promise.all(places.map((from) => read(from, WINDOW)));
    const encoding = detectEncoding(head);
    return {
      size, head, encoding, isArchive: head.length >= 4 && head.readUInt32LE(0) === 0x04034b50,
      lines: () => cut(new TextDecoder(encoding).decode(head, { stream: true }), size <= head.length).slice(0, HEAD_LINES),
      // A window begins and ends within a line.
      later: () => windows.flatMap((window) => cut(new TextDecoder(encoding).decode(window, { stream: true }), false).slice(1)),
    };
  } finally {
    await file.close();
  }
}

export async function countLines(path: string, encoding: Encoding): Promise<number> {
  const decoder = new TextDecoder(encoding);
  let count = 0;
  const cutter = new LineCutter((line) => {
    if (line.trim() !== '') count += 1;
  });
  for await (const chunk of createReadStream(path)) cutter.push(decoder.decode(chunk as Uint8Array, { stream: true }));
  cutter.finish();
  return count;
}
