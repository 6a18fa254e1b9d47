import { MessageChannel } from 'node:worker_threads';
import { Injectable, OnApplicationShutdown } from '@nestjs/common';
import type { Piscina } from 'piscina';
import { Config } from './config';

/** Memory that one computation may take before it is stopped, MB. */
const LARGEST_HEAP = 2048;

export class ComputeStopped extends Error {
  constructor() {
    super('The computation was stopped with the process');
    this.name = 'ComputeStopped';
  }
}

/** Runs computations in worker threads, so that the event loop never waits for one. */
@Injectable()
export class Compute implements OnApplicationShutdown {
  private pool: Promise<Piscina> | undefined;
  private readonly stopping = new AbortController();

  constructor(private readonly config: Config) {}

  /**
   * Runs the default export of `file` (a compiled module) with `{ job, progress }`.
   * @param onProgress is told 0 to 1 as the task posts it
   * @throws whatever the task threw; ComputeStopped when the process is going down; an error when it took longer than `timeout` ms
   */
  async run<Result>(file: string, job: unknown, onProgress: (fraction: number) => void, timeout: number): Promise<Result> {
    if (this.stopping.signal.aborted) throw new ComputeStopped();
    this.pool ??= this.open();
    const pool = await this.pool;
    const { port1, port2 } = new MessageChannel();
    port1.on('message', (fraction: unknown) => {
      if (typeof fraction === 'number') onProgress(Math.min(1, Math.max(0, fraction)));
    });
    port1.unref();
    const late = AbortSignal.timeout(timeout);
    try {
      return (await pool.run({ job, progress: port2 }, { filename: file, transferList: [port2], signal: AbortSignal.any([this.stopping.signal, late]) })) as Result;
    } catch (error) {
      if (this.stopping.signal.aborted) throw new ComputeStopped();
      if (late.aborted) throw new Error(`The computation took longer than ${Math.round(timeout / 1000)} s and was stopped`, { cause: error });
      throw error;
    } finally {
      port1.close();
    }
  }

  /** Stops what runs; its jobs are there again after the next start. */
  stop(): void {
    this.stopping.abort();
  }

  async onApplicationShutdown(): Promise<void> {
    this.stop();
    await (await this.pool)?.destroy();
  }

  private async open(): Promise<Piscina> {
    const { Piscina: Pool } = await import('piscina');
    return new Pool({
      minThreads: 0, maxThreads: this.config.fitsAtOnce, idleTimeout: 30_000, concurrentTasksPerWorker: 1,
      execArgv: [...this.config.taskArguments], resourceLimits: { maxOldGenerationSizeMb: LARGEST_HEAP },
    });
  }
}
