/** Runs Debian's own servers for tests: in a folder of their own, as an ordinary user also when the tests run as root. */
import { spawn, spawnSync, type ChildProcess } from 'node:child_process';
import { chmodSync, chownSync, mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

export interface Account {
  uid?: number;
  gid?: number;
}

const idOf = (flag: string): number => Number(spawnSync('id', [flag, 'nobody'], { encoding: 'utf8' }).stdout.trim());

/** Nobody, when the tests run as root; else whoever runs them. */
export function ordinaryAccount(): Account {
  return process.getuid?.() === 0 ? { uid: idOf('-u'), gid: idOf('-g') } : {};
}

/** A new folder that belongs to the account. */
export function folderOf({ uid, gid }: Account): string {
  const folder = mkdtempSync(join(tmpdir(), 'strainwright-service-'));
  chmodSync(folder, 0o700);
  if (uid !== undefined && gid !== undefined) chownSync(folder, uid, gid);
  return folder;
}

/** Runs a program to its end. @throws Error with what it printed when it fails */
export function runToEnd(command: string, args: string[], account: Account, cwd: string): void {
  const { status, stdout, stderr, error } = spawnSync(command, args, { ...account, cwd, encoding: 'utf8' });
  if (error !== undefined) throw error;
  if (status !== 0) throw new Error(`${command} ended with ${status}:\n${stdout}${stderr}`);
}

export async function stopped(child: ChildProcess, signal: NodeJS.Signals): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const gone = new Promise((resolve) => child.once('exit', resolve));
  child.kill(signal);
  await gone;
}

/** Starts a program, and resolves when it has printed a line that says it is ready. */
export async function startUntil(command: string, args: string[], account: Account, cwd: string, ready: RegExp): Promise<ChildProcess> {
  const child = spawn(command, args, { ...account, cwd, stdio: ['ignore', 'pipe', 'pipe'] });
  let printed = '';
  await new Promise<void>((resolve, reject) => {
    const read = (chunk: Buffer) => {
      printed += chunk.toString();
      if (ready.test(printed)) resolve();
    };
    child.stdout.on('data', read);
    child.stderr.on('data', read);
    child.once('error', reject);
    child.once('exit', (code) => reject(new Error(`${command} ended with ${code}:\n${printed}`)));
  });
  return child;
}
