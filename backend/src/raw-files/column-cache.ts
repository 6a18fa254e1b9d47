/** Parsed columns kept as binary beside the raw files: they can be thrown away and made again. */
import { createHash, randomUUID } from 'node:crypto';
import { mkdir, readFile, rename, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { Layout } from '@strainwright/common/contract/runs';
import type { ReadColumns } from '@strainwright/common/tabular/read-columns';
import { readRawFile } from './raw-file';

export interface CachedFile {
  readonly path: string;
  readonly sha256: string;
  readonly layout: Layout;
}

const FORMAT = 2;
const nameOf = (file: CachedFile) => createHash('sha256').update(JSON.stringify([FORMAT, file.sha256, file.layout])).digest('hex');

function packed(columns: ReadColumns): Buffer {
  const { columns: values, ...rest } = columns;
  const head = Buffer.from(JSON.stringify({ ...rest, mappings: values.map((c) => c.mapping) }));
  const length = Buffer.alloc(4);
  length.writeUInt32LE(head.length);
  return Buffer.concat([length, head, ...values.map((c) => Buffer.from(c.values.buffer, c.values.byteOffset, c.values.byteLength))]);
}

function unpacked(bytes: Buffer): ReadColumns {
  const headLength = bytes.readUInt32LE(0);
  const { mappings, ...rest } = JSON.parse(bytes.toString('utf8', 4, 4 + headLength)) as Omit<ReadColumns, 'columns'> & { mappings: ReadColumns['columns'][number]['mapping'][] };
  const columns = mappings.map((mapping, i) => {
    const from = 4 + headLength + i * rest.rows * 8;
    const values = new Float64Array(rest.rows);
    Buffer.from(values.buffer).set(bytes.subarray(from, from + rest.rows * 8));
    return { mapping, values };
  });
  return { ...rest, columns };
}

/** The columns from the cache, or read from the raw file and kept. */
export async function columnsOf(folder: string, file: CachedFile, onProgress: (fraction: number) => void = () => undefined): Promise<ReadColumns> {
  const path = join(folder, nameOf(file));
  const kept = await readFile(path).then(unpacked, () => null);
  if (kept !== null) return kept;
  const read = await readRawFile(file.path, file.layout, onProgress);
  await mkdir(folder, { recursive: true });
  const partial = `${path}.${randomUUID()}`;
  await writeFile(partial, packed(read));
  await rename(partial, path);
  return read;
}
