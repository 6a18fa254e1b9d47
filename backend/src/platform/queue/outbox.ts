import { Injectable, Logger, OnApplicationBootstrap, OnApplicationShutdown } from '@nestjs/common';
import { ModuleRef } from '@nestjs/core';
import { getQueueToken } from '@nestjs/bullmq';
import type { Queue } from 'bullmq';
import { and, asc, eq, isNull, lt } from 'drizzle-orm';
import { Database, type Transaction } from '../../database/database';
import { outbox } from '../../database/schema/runs';
import { Clock } from '../clock';
import { newId } from '../ids';
import { JOB_OPTIONS } from './queue.settings';
import { errorText } from '../error-text';

const SWEEP_MS = 3_000;
const BATCH = 100;
/** Dispatched rows older than this are cleared away. */
const KEPT_DAYS = 7;

/**
 * Jobs are written in the transaction of the row they are for, and handed to the queue after it. A process that dies in between
 * leaves them here, and any process hands them on. The queue knows a job by its id: one handed over twice is there once.
 */
@Injectable()
export class Outbox implements OnApplicationBootstrap, OnApplicationShutdown {
  private readonly logger = new Logger('Outbox');
  private timer: NodeJS.Timeout | undefined;
  private running: Promise<number> | undefined;

  constructor(private readonly database: Database, private readonly clock: Clock, private readonly modules: ModuleRef) {}

  onApplicationBootstrap(): void {
    this.timer = setInterval(() => void this.sweep(), SWEEP_MS);
    this.timer.unref();
    void this.sweep();
  }

  async onApplicationShutdown(): Promise<void> {
    clearInterval(this.timer);
    await this.running?.catch(() => 0);
  }

  /** Writes a job; `jobId` names it within its queue for good. */
  async add(tx: Transaction, queue: string, jobId: string, payload: Record<string, unknown>): Promise<void> {
    await tx.insert(outbox).values({ id: newId(), queue, jobId, payload, createdAt: this.clock.now() });
    await this.database.afterCommit(() => void this.sweep());
  }

  /** Hands everything that waits to the queues. @returns how many jobs were handed over */
  async dispatch(): Promise<number> {
    while (this.running !== undefined) await this.running.catch(() => 0);
    this.running = this.dispatchAll();
    try {
      return await this.running;
    } finally {
      this.running = undefined;
    }
  }

  private async sweep(): Promise<void> {
    try {
      await this.dispatch();
    } catch (error) {
      this.logger.warn(`Jobs wait: the queue cannot be reached (${errorText(error)})`);
    }
  }

  private async dispatchAll(): Promise<number> {
    let handed = 0;
    for (;;) {
      const waiting = await this.database.db.select().from(outbox).where(isNull(outbox.dispatchedAt)).orderBy(asc(outbox.createdAt), asc(outbox.id)).limit(BATCH);
      for (const row of waiting) {
        const queue = this.modules.get<Queue>(getQueueToken(row.queue), { strict: false });
        await queue.add(row.queue, row.payload, { ...JOB_OPTIONS, jobId: row.jobId });
        await this.database.db.update(outbox).set({ dispatchedAt: this.clock.now() }).where(and(eq(outbox.id, row.id), isNull(outbox.dispatchedAt)));
        handed += 1;
      }
      if (waiting.length < BATCH) break;
    }
    const old = new Date(this.clock.now().getTime() - KEPT_DAYS * 86_400_000);
    await this.database.db.delete(outbox).where(lt(outbox.dispatchedAt, old));
    return handed;
  }
}
