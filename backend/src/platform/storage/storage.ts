import { createHash, randomUUID } from 'node:crypto';
import { createReadStream, createWriteStream } from 'node:fs';
import { mkdir, open, readdir, rm, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { Readable, Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { Injectable } from '@nestjs/common';
import { Config } from '../config';
import { Problem } from '../problem';
import { FolderObjects } from './folder-objects';
import { BucketObjects } from './bucket-objects';

/** What a place for objects must do; the folder and the bucket both do it. */
export interface Objects {
  has(key: string): Promise<boolean>;
  /** Takes the file at `path`, which may be gone afterwards. */
  putFile(key: string, path: string): Promise<void>;
  get(key: string): Promise<Readable>;
  /** A path to read the object from on this machine. */
  localPath(key: string): Promise<string>;
}

export interface StoredFile {
  sha256: string;
  size: number;
}

export const LARGEST_FILE = 200 * 1024 * 1024;

/** Raw files and documents, each kept once, as it came, under its SHA-256. Derived files can be made again and thrown away. */
@Injectable()
export class Storage {
  /** Where uploads wait until they are stored. */
  readonly incoming: string;
  private readonly objects: Objects;

  constructor(config: Config) {
    this.incoming = join(config.dataFolder, 'incoming');
    this.objects = config.s3 === undefined ? new FolderObjects(join(config.dataFolder, 'files')) : new BucketObjects(config.s3, join(config.dataFolder, 'cache'));
  }

  /** Makes the folder for uploads, and clears it of those that a stopped process left behind an hour or more ago. */
  async prepare(now: Date): Promise<void> {
    await mkdir(this.incoming, { recursive: true, mode: 0o700 });
    for (const name of await readdir(this.incoming)) {
      const path = join(this.incoming, name);
      const { mtimeMs } = await stat(path);
      if (mtimeMs < now.getTime() - 3_600_000) await rm(path, { force: true });
    }
  }

  /** Stores a stream or bytes. @throws Problem 413 when it is larger than 200 MB; nothing is kept then */
  async put(content: Readable | Uint8Array): Promise<StoredFile> {
    const path = join(this.incoming, randomUUID());
    await mkdir(this.incoming, { recursive: true });
    let size = 0;
    const limit = new Transform({
      transform(chunk: Buffer, _encoding, done) {
        size += chunk.length;
        done(size > LARGEST_FILE ? new Problem(413, 'file.too-large', 'A file is larger than 200 MB.') : null, chunk);
      },
    });
    const source = content instanceof Readable ? content : Readable.from([Buffer.from(content)]);
    try {
      await pipeline(source, limit, createWriteStream(path, { flags: 'wx', mode: 0o600 }));
      return await this.adopt(path);
    } finally {
      await rm(path, { force: true });
    }
  }

  /** Stores a file that lies in `incoming` already (an upload); the file is moved away. */
  async adopt(path: string): Promise<StoredFile> {
    const stored = await describeFile(path);
    const key = rawKey(stored.sha256);
    if (!(await this.objects.has(key))) await this.objects.putFile(key, path);
    await rm(path, { force: true });
    return stored;
  }

  has(sha256: string): Promise<boolean> {
    return this.objects.has(rawKey(sha256));
  }

  get(sha256: string): Promise<Readable> {
    return this.objects.get(rawKey(sha256));
  }

  async bytes(sha256: string): Promise<Buffer> {
    const chunks: Buffer[] = [];
    for await (const chunk of await this.get(sha256)) chunks.push(chunk as Buffer);
    return Buffer.concat(chunks);
  }

  /** A path on this machine to read the file from, for the worker's threads. */
  localPath(sha256: string): Promise<string> {
    return this.objects.localPath(rawKey(sha256));
  }
}

const rawKey = (sha256: string): string => {
  if (!/^[0-9a-f]{64}$/.test(sha256)) throw new Error('Not a SHA-256');
  return `${sha256.slice(0, 2)}/${sha256}`;
};

/** SHA-256 and size of a file, which is flushed to the disk on the way. */
async function describeFile(path: string): Promise<StoredFile> {
  const hash = createHash('sha256');
  let size = 0;
  for await (const chunk of createReadStream(path)) {
    hash.update(chunk as Buffer);
    size += (chunk as Buffer).length;
  }
  const file = await open(path, 'r+');
  await file.sync();
  await file.close();
  return { sha256: hash.digest('hex'), size };
}
