import { createHash } from 'node:crypto';
import { mkdtempSync, readdirSync, rmSync, statSync, utimesSync, writeFileSync, mkdirSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { Config } from '../config';
import { LARGEST_FILE, Storage } from './storage';

describe('Storage', () => {
  let folder: string;
  let storage: Storage;
  beforeEach(() => {
    folder = mkdtempSync(join(tmpdir(), 'strainwright-storage-'));
    storage = new Storage(new Config({ STRAINWRIGHT_DATA: folder }));
  });
  afterEach(() => rmSync(folder, { recursive: true }));

  // FIPS 180-2, appendix B.1: SHA-256 of "abc".
  const ABC = 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad';

  it('keeps bytes under their SHA-256, once', async () => {
    expect(await storage.put(Buffer.from('abc'))).toEqual({ sha256: ABC, size: 3 });
    expect(await storage.put(Readable.from([Buffer.from('a'), Buffer.from('bc')]))).toEqual({ sha256: ABC, size: 3 });
    expect((await storage.bytes(ABC)).toString()).toBe('abc');
    expect(readdirSync(join(folder, 'files'))).toEqual(['ba']);
    expect(readdirSync(join(folder, 'incoming'))).toEqual([]);
  });

  it('keeps them readable by nobody else, and changed by nobody', async () => {
    await storage.put(Buffer.from('abc'));
    expect(statSync(await storage.localPath(ABC)).mode & 0o777).toBe(0o400);
  });

  it('says what it has', async () => {
    expect(await storage.has(ABC)).toBe(false);
    await storage.put(Buffer.from('abc'));
    expect(await storage.has(ABC)).toBe(true);
    await expect(storage.bytes('0'.repeat(64))).rejects.toMatchObject({ code: 'ENOENT' });
  });

  it('takes no name that is not a hash', () => {
    expect(() => storage.get('../../etc/passwd')).toThrow('Not a SHA-256');
  });

  it('refuses a stream larger than the limit, and keeps nothing of it', async () => {
    const chunk = Buffer.alloc(8 * 1024 * 1024);
    const chunks = function* () {
      for (let sent = 0; sent <= LARGEST_FILE; sent += chunk.length) yield chunk;
    };
    await expect(storage.put(Readable.from(chunks()))).rejects.toMatchObject({ status: 413, code: 'file.too-large' });
    expect(readdirSync(join(folder, 'incoming'))).toEqual([]);
  }, 30_000);

  it('keeps nothing of a stream that broke off', async () => {
    const broken = Readable.from((async function* () {
      yield Buffer.from('half');
      throw new Error('connection lost');
    })());
    await expect(storage.put(broken)).rejects.toThrow('connection lost');
    expect(readdirSync(join(folder, 'incoming'))).toEqual([]);
  });

  it('clears what a stopped process left behind, not what has just come', async () => {
    mkdirSync(storage.incoming);
    for (const name of ['old', 'new']) writeFileSync(join(storage.incoming, name), name);
    utimesSync(join(storage.incoming, 'old'), 1_000, 1_000);
    await storage.prepare(new Date());
    expect(readdirSync(storage.incoming)).toEqual(['new']);
  });

  it('moves an upload into its place', async () => {
    await storage.prepare(new Date());
    const path = join(storage.incoming, 'upload');
    const content = Buffer.from('time;force\n0;0\n');
    writeFileSync(path, content);
    const stored = await storage.adopt(path);
    expect(stored.sha256).toBe(createHash('sha256').update(content).digest('hex'));
    expect(readdirSync(storage.incoming)).toEqual([]);
  });
});
