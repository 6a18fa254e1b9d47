import { mkdtempSync, rmSync, readFileSync } from 'node:fs';
import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { buffer } from 'node:stream/consumers';
import { Config } from '../config';
import { Storage } from './storage';

/** The few requests of the S3 protocol that are used, as its reference describes them: bucket and object in the path. */
function objectStore(objects: Map<string, Buffer>): Server {
  return createServer((request, response) => {
    void (async () => {
      const path = new URL(request.url ?? '/', 'http://store').pathname;
      const body = await buffer(request);
      const object = objects.get(path);
      if (request.method === 'PUT') {
        if (path !== '/strainwright' && path !== '/strainwright/') objects.set(path, body);
        response.setHeader('ETag', '"x"').end();
      } else if (object === undefined) response.writeHead(404).end();
      else response.setHeader('Content-Length', object.length).end(request.method === 'HEAD' ? undefined : object);
    })();
  });
}

describe('Storage in a bucket', () => {
  const objects = new Map<string, Buffer>();
  const server = objectStore(objects);
  const folder = mkdtempSync(join(tmpdir(), 'strainwright-bucket-'));
  let storage: Storage;

  beforeAll(async () => {
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    const { port } = server.address() as AddressInfo;
    storage = new Storage(new Config({ STRAINWRIGHT_DATA: folder, S3_ENDPOINT: `http://127.0.0.1:${port}`, S3_ACCESS_KEY_ID: 'test', S3_SECRET_ACCESS_KEY: 'test-secret' }));
  });
  afterAll(() => {
    server.closeAllConnections();
    server.close();
    rmSync(folder, { recursive: true });
  });

  // FIPS 180-2, appendix B.1: SHA-256 of "abc".
  const ABC = 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad';

  it('keeps, finds and gives back the very bytes', async () => {
    expect(await storage.has(ABC)).toBe(false);
    expect(await storage.put(Buffer.from('abc'))).toEqual({ sha256: ABC, size: 3 });
    expect(objects.get(`/strainwright/ba/${ABC}`)?.toString()).toBe('abc');
    expect(await storage.has(ABC)).toBe(true);
    expect((await storage.bytes(ABC)).toString()).toBe('abc');
  });

  it('brings a file to this machine for the worker’s threads', async () => {
    await storage.put(Buffer.from('abc'));
    expect(readFileSync(await storage.localPath(ABC), 'utf8')).toBe('abc');
  });

  it('fails when the file is not there', async () => {
    await expect(storage.bytes('0'.repeat(64))).rejects.toThrow();
  });
});
