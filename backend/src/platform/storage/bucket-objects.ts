import { randomUUID } from 'node:crypto';
import { createReadStream, createWriteStream } from 'node:fs';
import { access, mkdir, rename, rm } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import type { S3Client } from '@aws-sdk/client-s3';
import type { Config } from '../config';
import type { Objects } from './storage';

/** Objects in an S3 bucket; the SDK is loaded when the first one is asked for. */
export class BucketObjects implements Objects {
  private client: Promise<S3Client> | undefined;

  constructor(private readonly settings: NonNullable<Config['s3']>, private readonly cache: string) {}

  async has(key: string): Promise<boolean> {
    const { HeadObjectCommand } = await import('@aws-sdk/client-s3');
    const client = await this.connect();
    try {
      await client.send(new HeadObjectCommand({ Bucket: this.settings.bucket, Key: key }));
      return true;
    } catch (error) {
      if ((error as Error).name === 'NotFound') return false;
      throw error;
    }
  }

  async putFile(key: string, path: string): Promise<void> {
    const { Upload } = await import('@aws-sdk/lib-storage');
    const client = await this.connect();
    await new Upload({ client, params: { Bucket: this.settings.bucket, Key: key, Body: createReadStream(path) } }).done();
    await rm(path, { force: true });
  }

  async get(key: string): Promise<Readable> {
    const { GetObjectCommand } = await import('@aws-sdk/client-s3');
    const client = await this.connect();
    const { Body } = await client.send(new GetObjectCommand({ Bucket: this.settings.bucket, Key: key }));
    if (!(Body instanceof Readable)) throw new Error(`The object ${key} has no content`);
    return Body;
  }

  async localPath(key: string): Promise<string> {
    const path = join(this.cache, key);
    const there = await access(path).then(() => true, () => false);
    if (there) return path;
    await mkdir(dirname(path), { recursive: true, mode: 0o700 });
    const draft = `${path}.${randomUUID()}`;
    await pipeline(await this.get(key), createWriteStream(draft, { flags: 'wx', mode: 0o600 }));
    await rename(draft, path);
    return path;
  }

  private connect(): Promise<S3Client> {
    this.client ??= this.open();
    return this.client;
  }

  private async open(): Promise<S3Client> {
    const { S3Client, CreateBucketCommand } = await import('@aws-sdk/client-s3');
    const { endpoint, region, bucket, accessKeyId, secretAccessKey } = this.settings;
    const credentials = accessKeyId !== undefined && secretAccessKey !== undefined ? { accessKeyId, secretAccessKey } : undefined;
    // Stores that only imitate S3 do not all know its newer checksums; files are known by their SHA-256 anyway.
    const plain = { requestChecksumCalculation: 'WHEN_REQUIRED', responseChecksumValidation: 'WHEN_REQUIRED' } as const;
    const client = new S3Client({ endpoint, region, forcePathStyle: true, ...plain, ...(credentials === undefined ? {} : { credentials }) });
    try {
      await client.send(new CreateBucketCommand({ Bucket: bucket }));
    } catch (error) {
      if (!['BucketAlreadyOwnedByYou', 'BucketAlreadyExists', 'AccessDenied'].includes((error as Error).name)) throw error;
    }
    return client;
  }
}
