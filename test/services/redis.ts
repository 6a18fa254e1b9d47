/** Debian's Redis server on a port of this machine that the test chooses; it keeps nothing. */
import { existsSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { folderOf, ordinaryAccount, startUntil, stopped } from './debian';

const PROGRAM = '/usr/bin/redis-server';

export const redisIsInstalled = (): boolean => existsSync(PROGRAM);

export interface RedisServer {
  readonly url: string;
  stop(): Promise<void>;
}

function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      probe.close(() => (typeof address === 'object' && address !== null ? resolve(address.port) : reject(new Error('no port'))));
    });
  });
}

export async function startRedis(): Promise<RedisServer> {
  const account = ordinaryAccount();
  const folder = folderOf(account);
  const port = await freePort();
  const args = ['--port', String(port), '--bind', '127.0.0.1', '--save', '', '--appendonly', 'no', '--dir', folder, '--maxmemory-policy', 'noeviction'];
  const server = await startUntil(PROGRAM, args, account, folder, /Ready to accept connections/);
  return {
    url: `redis://127.0.0.1:${port}`,
    stop: async () => {
      await stopped(server, 'SIGTERM');
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
