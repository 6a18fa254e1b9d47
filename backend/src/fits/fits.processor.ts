import { InjectQueue, Processor, WorkerHost } from '@nestjs/bullmq';
import { BeforeApplicationShutdown, Inject, Logger, OnApplicationBootstrap, OnApplicationShutdown } from '@nestjs/common';
import { Job, Queue, WaitingError } from 'bullmq';
import { inArray } from 'drizzle-orm';
import { Database } from '../database/database';
import { fits } from '../database/schema/runs';
import { Compute, ComputeStopped } from '../platform/compute';
import { Config } from '../platform/config';
import { errorText } from '../platform/error-text';
import { FITS_QUEUE, JOB_OPTIONS, WORKER_TIMING } from '../platform/queue/queue.settings';
import type { FitOutcome } from './fit.job';
import { FitsOutcome } from './fits.outcome';

/** Where a fit's inputs come from, and the module that computes it: both of this folder, others in tests of the queue. */
export const FIT_SOURCE = Symbol('fit source');
export interface FitSource {
  /** What the task is handed; must survive a structured clone. */
  load(fitId: string): Promise<object>;
  /** Path of the compiled module with the task. */
  readonly taskFile: string;
}

const LONGEST_FIT_MS = 10 * 60_000;
const PROGRESS_EVERY_MS = 250;
const SWEEP_MS = 5_000;
const GRACE_MS = 3_000;

/** Takes fits from the queue. A job may be delivered twice, or its process be killed: the fit row decides, and gets one outcome. */
@Processor(FITS_QUEUE, { ...WORKER_TIMING, concurrency: 1 })
export class FitsProcessor extends WorkerHost implements OnApplicationBootstrap, BeforeApplicationShutdown, OnApplicationShutdown {
  private readonly logger = new Logger('Fits');
  private sweeper: NodeJS.Timeout | undefined;
  private sweeping: Promise<void> = Promise.resolve();

  constructor(
    private readonly config: Config,
    private readonly database: Database,
    private readonly compute: Compute,
    private readonly outcome: FitsOutcome,
    @Inject(FIT_SOURCE) private readonly source: FitSource,
    @InjectQueue(FITS_QUEUE) private readonly queue: Queue,
  ) {
    super();
  }

  onApplicationBootstrap(): void {
    this.worker.concurrency = this.config.fitsAtOnce;
    this.worker.on('error', (error) => this.logger.warn(`The queue: ${error.message}`));
    this.sweeper = setInterval(() => {
      this.sweeping = this.reconcile().catch((error: unknown) => this.logger.warn(errorText(error)));
    }, SWEEP_MS);
    this.sweeper.unref();
  }

  /** Takes nothing more; what still runs after a moment is put back. */
  async beforeApplicationShutdown(): Promise<void> {
    clearInterval(this.sweeper);
    const grace = setTimeout(() => this.compute.stop(), GRACE_MS);
    await this.worker.close();
    clearTimeout(grace);
  }

  async onApplicationShutdown(): Promise<void> {
    await this.sweeping;
  }

  async process(job: Job<{ fitId: string }>, token?: string): Promise<void> {
    const { fitId } = job.data;
    if (!(await this.outcome.begin(fitId))) return;
    try {
      const fitJob = await this.source.load(fitId);
      const result = await this.compute.run<FitOutcome>(this.source.taskFile, fitJob, this.progressOf(fitId), LONGEST_FIT_MS);
      await this.outcome.finish(fitId, result);
    } catch (error) {
      if (error instanceof ComputeStopped) {
        await job.moveToWait(token);
        throw new WaitingError();
      }
      this.logger.warn(`Fit ${fitId}, attempt ${job.attemptsMade + 1}: ${errorText(error)}`);
      const last = job.attemptsMade + 1 >= (job.opts.attempts ?? 1);
      if (last) await this.outcome.giveUp(fitId, errorText(error));
      throw error;
    }
  }

  /**
   * Compares open fits with the queue. A job whose processes were killed again and again fails there without coming here: its fit
   * is given up. A job that the queue has lost (a store that was emptied) is handed over again; the queue knows it by its id.
   */
  async reconcile(): Promise<void> {
    const open = await this.database.db.select({ id: fits.id }).from(fits).where(inArray(fits.state, ['queued', 'running'])).limit(200);
    for (const { id } of open) {
      const job = await this.queue.getJob(id);
      if (job === undefined) await this.queue.add(FITS_QUEUE, { fitId: id }, { ...JOB_OPTIONS, jobId: id });
      else if (await job.isFailed()) await this.outcome.giveUp(id, job.failedReason ?? 'unknown');
    }
  }

  private progressOf(fitId: string): (fraction: number) => void {
    let writing = false;
    let last = 0;
    return (fraction) => {
      const now = performance.now();
      if (writing || now - last < PROGRESS_EVERY_MS) return;
      writing = true;
      last = now;
      this.outcome.progress(fitId, fraction).catch((error: unknown) => this.logger.warn(errorText(error))).finally(() => {
        writing = false;
      });
    };
  }
}
