import { execFileSync } from 'node:child_process';
import { linkSync, mkdirSync, readFileSync, readdirSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { hostname } from 'node:os';
import { join } from 'node:path';

/** One process may open an embedded database. The holder is told by process id and start time, so that a reused id does not pass for it. */
interface Holder {
  pid: number;
  started: string;
  host: string;
  since: string;
  released: boolean;
}

export class DataFolderInUse extends Error {
  constructor(folder: string, holder: Holder, path: string) {
    const where = holder.host === hostname() ? `process ${holder.pid}` : `process ${holder.pid} on the machine ${holder.host}`;
    const advice = holder.host === hostname() ? 'Stop it first, or give this one another folder with STRAINWRIGHT_DATA.' : `Stop it first. If that machine is gone for good, delete ${path}.`;
    super(`The data folder ${folder} is in use by ${where}, since ${holder.since}. ${advice}`);
    this.name = 'DataFolderInUse';
  }
}

/**
 * An exclusive lock on a folder, safe when many processes race for it and when its holder was killed.
 *
 * Each holder links a file `lock.N` with N one above the highest there; linking is atomic and fails when N is taken. A lock is
 * never removed by its holder, only marked as released, so numbers only rise: whoever linked N while an N + 1 exists lost the race.
 */
export class DataLock {
  private constructor(private readonly path: string, private readonly holder: Holder) {}

  /** @throws DataFolderInUse naming the process that holds the folder */
  static acquire(folder: string): DataLock {
    mkdirSync(folder, { recursive: true });
    for (;;) {
      const highest = highestNumber(folder);
      const present = highest === 0 ? undefined : readHolder(lockPath(folder, highest));
      if (present !== undefined && isHeld(present)) throw new DataFolderInUse(folder, present, lockPath(folder, highest));
      const lock = DataLock.link(folder, highest + 1);
      if (lock !== undefined) return lock;
    }
  }

  private static link(folder: string, number: number): DataLock | undefined {
    const path = lockPath(folder, number);
    const holder: Holder = { pid: process.pid, started: startOf(process.pid) ?? '', host: hostname(), since: new Date().toISOString(), released: false };
    const draft = `${path}.draft-${process.pid}`;
    writeFileSync(draft, JSON.stringify(holder));
    try {
      linkSync(draft, path);
    } catch (error) {
      if ((error as NodeJS.ErrnoException).code === 'EEXIST') return undefined;
      throw error;
    } finally {
      rmSync(draft);
    }
    if (highestNumber(folder) > number) {
      rmSync(path);
      return undefined;
    }
    for (const older of numbers(folder)) if (older < number) rmSync(lockPath(folder, older), { force: true });
    return new DataLock(path, holder);
  }

  release(): void {
    const draft = `${this.path}.draft-${process.pid}`;
    writeFileSync(draft, JSON.stringify({ ...this.holder, released: true }));
    renameSync(draft, this.path);
  }
}

const lockPath = (folder: string, number: number): string => join(folder, `lock.${number}`);

function numbers(folder: string): number[] {
  return readdirSync(folder).flatMap((name) => {
    const match = /^lock\.(\d+)$/.exec(name);
    return match === null ? [] : [Number(match[1])];
  });
}

const highestNumber = (folder: string): number => Math.max(0, ...numbers(folder));

function readHolder(path: string): Holder | undefined {
  try {
    return JSON.parse(readFileSync(path, 'utf8')) as Holder;
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return undefined;
    throw error;
  }
}

function isHeld(holder: Holder): boolean {
  if (holder.released) return false;
  if (holder.host !== hostname()) return true;
  const started = startOf(holder.pid);
  return started !== undefined && started === holder.started;
}

/** When a process started, in a form that no other process of this machine shares; undefined when there is none of that id. */
function startOf(pid: number): string | undefined {
  if (process.platform === 'linux') {
    try {
      // Field 22 counts from after the command's closing bracket, which may itself hold spaces and brackets.
      const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
      const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
      if (fields[0] === 'Z') return undefined;
      const boot = readFileSync('/proc/sys/kernel/random/boot_id', 'utf8').trim();
      return `${boot} ${fields[19]}`;
    } catch {
      return undefined;
    }
  }
  try {
    process.kill(pid, 0);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ESRCH') return undefined;
  }
  if (process.platform === 'win32') return 'running';
  try {
    return execFileSync('ps', ['-o', 'lstart=', '-p', String(pid)], { encoding: 'utf8' }).trim() || undefined;
  } catch {
    return undefined;
  }
}
