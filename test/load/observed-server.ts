/** The built program with a probe in it, and its memory as Linux counts it. */
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

export async function startObserved(data: string): Promise<ObservedServer> {
  const began = performance.now();
  const server = await startServer({ data, env: { NODE_OPTIONS: `--import ${pathToFileURL(join(__dirname, 'loop-probe.mjs')).href}` } });
  const startUp = performance.now() - began;
  const told = () => [...server.output().matchAll(/^loop-probe (.*)$/gm)].map(([, json]) => (JSON.parse(json ?? '') as { longest: number }).longest);
  return {
    ...server,
    startUp,
    memory: () => {
      const status = readFileSync(`/proc/${server.process.pid}/status`, 'utf8');
      const megabytes = (name: string) => Number(new RegExp(`^${name}:\\s+(\\d+) kB`, 'm').exec(status)?.[1]) / 1024;
      return { resident: megabytes('VmRSS'), peak: megabytes('VmHWM') };
    },
    longestPause: async () => {
      const before = told().length;
      const arrived = new Promise<void>((resolve) => server.process.stdout?.on('data', () => told().length > before && resolve()));
      server.process.kill('SIGUSR2');
      await arrived;
      return told()[before] ?? NaN;
    },
  };
}
