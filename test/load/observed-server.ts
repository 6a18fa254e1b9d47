/** The built program with a probe in its event loop, and its memory as Linux counts it. */
import { spawn, type ChildProcess } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { startServer, type Server } from '../services/server';

export interface ObservedServer extends Server {
  /** Milliseconds from starting the process to its first healthy answer. */
  readonly startUp: number;
  /** Megabytes. */
  memory(): { resident: number; peak: number };
  /** The longest pause of the event loop since it was last asked, ms. */
  longestPause(): Promise<number>;
}

const PROBE = `--import ${pathToFileURL(join(__dirname, 'loop-probe.mjs')).href}`;

/** Asks the probe in a process; `output` is all that it printed so far. */
async function longestPauseOf(process: ChildProcess, output: () => string): Promise<number> {
  const told = () => [...output().matchAll(/^loop-probe (.*)$/gm)].map(([, json]) => (JSON.parse(json ?? '') as { longest: number }).longest);
  const before = told().length;
  const arrived = new Promise<void>((resolve) => process.stdout?.on('data', () => told().length > before && resolve()));
  process.kill('SIGUSR2');
  await arrived;
  return told()[before] ?? NaN;
}

export async function startObserved(data: string): Promise<ObservedServer> {
  const began = performance.now();
  const server = await startServer({ data, env: { NODE_OPTIONS: PROBE } });
  const startUp = performance.now() - began;
  return {
    ...server,
    startUp,
    memory: () => {
      const status = readFileSync(`/proc/${server.process.pid}/status`, 'utf8');
      const megabytes = (name: string) => Number(new RegExp(`^${name}:\\s+(\\d+) kB`, 'm').exec(status)?.[1]) / 1024;
      return { resident: megabytes('VmRSS'), peak: megabytes('VmHWM') };
    },
    longestPause: () => longestPauseOf(server.process, server.output),
  };
}

export interface IdleProcess {
  longestPause(): Promise<number>;
  stop(): void;
}

/** A process that does nothing: its pauses are what the machine itself adds to everybody's. */
export async function startIdle(): Promise<IdleProcess> {
  const child = spawn(process.execPath, ['-e', 'setInterval(() => {}, 1000); console.log("idle")'], { env: { ...process.env, NODE_OPTIONS: PROBE }, stdio: ['ignore', 'pipe', 'inherit'] });
  let printed = '';
  child.stdout.on('data', (chunk: Buffer) => (printed += chunk.toString()));
  await new Promise((resolve) => child.stdout.once('data', resolve));
  return { longestPause: () => longestPauseOf(child, () => printed), stop: () => child.kill() };
}
