import { createReadStream } from 'node:fs';
import { access, chmod, mkdir, open, rename } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import { Readable } from 'node:stream';
import type { Objects } from './storage';

/** Objects as files of a local folder: moved into place whole, so that a half-written one is never seen. */
export class FolderObjects implements Objects {
  constructor(private readonly folder: string) {}

  async has(key: string): Promise<boolean> {
    try {
      await access(join(this.folder, key));
      return true;
    } catch {
      return false;
    }
  }

  async putFile(key: string, path: string): Promise<void> {
    const target = join(this.folder, key);
    await mkdir(dirname(target), { recursive: true, mode: 0o700 });
    await chmod(path, 0o400);
    await rename(path, target);
    await syncFolder(dirname(target));
  }

  async get(key: string): Promise<Readable> {
    const file = await open(join(this.folder, key), 'r');
    return createReadStream('', { fd: file });
  }

  async localPath(key: string): Promise<string> {
    const path = join(this.folder, key);
    await access(path);
    return path;
  }
}

/** Without this the new name itself could be lost with the power. Windows has no such call. */
async function syncFolder(path: string): Promise<void> {
  if (process.platform === 'win32') return;
  const folder = await open(path, 'r');
  await folder.sync();
  await folder.close();
}
