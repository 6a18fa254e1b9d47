import { ChildProcess, spawn } from 'node:child_process';
import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { hostname, tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { DataFolderInUse, DataLock } from './data-lock';

const HOOK = pathToFileURL(join(__dirname, '..', '..', 'typescript-hook.mjs')).href;
const PROGRAM = `
  const { DataLock } = require(${JSON.stringify(join(__dirname, 'data-lock.ts'))});
  try { DataLock.acquire(process.argv[1]); process.send('held'); setInterval(() => {}, 1000); }
  catch (error) { process.send(error.name); process.exit(0); }`;

describe('DataLock', () => {
  let folder: string;
  const children: ChildProcess[] = [];
  beforeEach(() => {
    folder = mkdtempSync(join(tmpdir(), 'strainwright-lock-'));
  });
  afterEach(async () => {
    await Promise.all(children.splice(0).map(kill));
    rmSync(folder, { recursive: true });
  });

  /** A process of its own that takes the lock, and what came of it. */
  const contender = async (): Promise<{ child: ChildProcess; said: unknown }> => {
    const child = spawn(process.execPath, ['--import', HOOK, '-e', PROGRAM, folder], { stdio: ['ignore', 'inherit', 'inherit', 'ipc'] });
    children.push(child);
    const said = await new Promise((resolve) => child.once('message', resolve));
    return { child, said };
  };
  const kill = (child: ChildProcess): Promise<unknown> => {
    if (child.exitCode !== null || child.signalCode !== null) return Promise.resolve();
    const gone = new Promise((resolve) => child.once('exit', resolve));
    child.kill('SIGKILL');
    return gone;
  };

  it('refuses a second process and names the first', async () => {
    const { child, said } = await contender();
    expect(said).toBe('held');
    expect(() => DataLock.acquire(folder)).toThrow(DataFolderInUse);
    expect(() => DataLock.acquire(folder)).toThrow(`process ${child.pid}`);
  }, 20_000);

  it('takes over from a process that was killed with SIGKILL', async () => {
    const { child } = await contender();
    await kill(child);
    const lock = DataLock.acquire(folder);
    expect((await contender()).said).toBe('DataFolderInUse');
    lock.release();
    expect((await contender()).said).toBe('held');
  }, 20_000);

  it('lets exactly one of many through when they race for a dead holder’s folder', async () => {
    await kill((await contender()).child);
    const outcomes = await Promise.all(Array.from({ length: 8 }, contender));
    expect(outcomes.filter((o) => o.said === 'held')).toHaveLength(1);
    expect(outcomes.filter((o) => o.said === 'DataFolderInUse')).toHaveLength(7);
  }, 60_000);

  it('does not take a process that got the dead holder’s id for the holder', () => {
    writeFileSync(join(folder, 'lock.4'), JSON.stringify({ pid: process.pid, started: 'another boot 1', host: hostname(), since: '2026-01-01T00:00:00.000Z', released: false }));
    DataLock.acquire(folder).release();
    expect(readdirSync(folder)).toEqual(['lock.5']);
  });

  it('believes a holder on another machine, and says what to delete', () => {
    writeFileSync(join(folder, 'lock.1'), JSON.stringify({ pid: 1, started: 'x', host: 'another-machine', since: '2026-01-01T00:00:00.000Z', released: false }));
    expect(() => DataLock.acquire(folder)).toThrow(`delete ${join(folder, 'lock.1')}`);
  });
});
