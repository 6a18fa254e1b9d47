/** Starts the built program as its own process on a folder of its own, as `npm start` does, and stops or kills it. */
import { execFileSync, spawn, type ChildProcess } from 'node:child_process';
import { mkdirSync, mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { templateImage } from '../../backend/src/database/testing';

export const ADMINISTRATOR = { email: 'first.administrator@example.org', password: 'a granite paperweight' };
const root = join(__dirname, '..', '..');

export interface Server {
  readonly url: string;
  readonly data: string;
  readonly process: ChildProcess;
  /** Everything it printed so far. */
  output(): string;
  stop(): Promise<void>;
  /** SIGKILL, as a power cut would. */
  kill(): Promise<void>;
}

async function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      probe.close(() => (typeof address === 'object' && address !== null ? resolve(address.port) : reject(new Error('no port'))));
    });
  });
}

const ended = (child: ChildProcess) => new Promise<void>((resolve) => (child.exitCode !== null || child.signalCode !== null ? resolve() : child.once('exit', () => resolve())));

export function temporaryFolder(): string {
  return mkdtempSync(join(tmpdir(), 'strainwright-'));
}

/** A data folder with an empty database in it, unpacked from an image: making one anew takes many seconds. */
export async function preparedFolder(): Promise<string> {
  const data = temporaryFolder();
  const database = join(data, 'database');
  mkdirSync(database, { mode: 0o700 });
  execFileSync('tar', ['-xf', await templateImage(), '-C', database], { stdio: ['ignore', 'ignore', 'ignore'] });
  return data;
}

async function waitForHealth(url: string, child: ChildProcess, output: () => string): Promise<void> {
  const deadline = Date.now() + 150_000;
  while (Date.now() < deadline) {
    if (child.exitCode !== null) throw new Error(`The server ended with ${child.exitCode}:\n${output()}`);
    const answer = await fetch(`${url}/api/health`).catch(() => null);
    if (answer?.ok === true) return;
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
  throw new Error(`The server did not answer within 150 s:\n${output()}`);
}

export async function startServer(options: { data?: string; env?: Record<string, string>; entry?: 'main' | 'worker' } = {}): Promise<Server> {
  const data = options.data ?? (await preparedFolder());
  const port = await freePort();
  const url = `http://127.0.0.1:${port}`;
  const child = spawn(process.execPath, [join(root, 'backend', 'dist', `${options.entry ?? 'main'}.js`)], {
    cwd: root,
    env: {
      ...process.env, NODE_OPTIONS: '', NODE_ENV: 'production', PORT: String(port), STRAINWRIGHT_DATA: data, STRAINWRIGHT_DEMO: 'off', LOG_LEVEL: 'warn',
      STRAINWRIGHT_ADMIN_EMAIL: ADMINISTRATOR.email, STRAINWRIGHT_ADMIN_PASSWORD: ADMINISTRATOR.password, ...options.env,
    },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let printed = '';
  child.stdout.on('data', (chunk: Buffer) => (printed += chunk.toString()));
  child.stderr.on('data', (chunk: Buffer) => (printed += chunk.toString()));
  const output = () => printed;
  const end = async (signal: NodeJS.Signals) => {
    child.kill(signal);
    await ended(child);
  };
  try {
    if ((options.entry ?? 'main') === 'main') await waitForHealth(url, child, output);
  } catch (error) {
    await end('SIGKILL');
    throw error;
  }
  return { url, data, process: child, output, stop: () => end('SIGTERM'), kill: () => end('SIGKILL') };
}

export function removeFolder(folder: string): void {
  rmSync(folder, { recursive: true, force: true });
}
