import { Injectable } from '@nestjs/common';
import { and, eq, inArray } from 'drizzle-orm';
import { Database, type Transaction } from '../database/database';
import { samples, specimens } from '../database/schema/orders';
import { fits, runs } from '../database/schema/runs';
import { EventsService } from '../events/events.service';
import { Clock } from '../platform/clock';
import { RecordService } from '../record/record.service';
import type { FitOutcome } from './fit.job';

const OPEN = ['queued', 'running'] as const;

/** Writes what becomes of a fit: each once, however often its job is delivered. */
@Injectable()
export class FitsOutcome {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly events: EventsService, private readonly clock: Clock) {}

  /** @returns false when the fit has its outcome already (or does not exist): there is nothing to do then */
  async begin(fitId: string): Promise<boolean> {
    const begun = await this.database.db.update(fits).set({ state: 'running', startedAt: this.clock.now(), progress: 0 }).where(and(eq(fits.id, fitId), inArray(fits.state, [...OPEN]))).returning({ id: fits.id });
    if (begun.length > 0) await this.tell(fitId);
    return begun.length > 0;
  }

  async progress(fitId: string, fraction: number): Promise<void> {
    await this.database.db.update(fits).set({ progress: fraction }).where(and(eq(fits.id, fitId), eq(fits.state, 'running')));
    await this.tell(fitId);
  }

  /** @returns whether this call was the one that wrote the outcome */
  async finish(fitId: string, outcome: FitOutcome): Promise<boolean> {
    return this.write(fitId, {
      state: outcome.state, inputsSha256: outcome.inputsSha256, progress: 1,
      ...(outcome.state === 'done' ? { result: outcome.result } : { error: outcome.error, findingsWhenRefused: outcome.findings }),
    });
  }

  /** Gives a fit up that could not be computed for a fault of ours, after all its attempts. */
  giveUp(fitId: string, reason: string): Promise<boolean> {
    return this.write(fitId, { state: 'failed', error: `The computation did not come to an end: ${reason}` });
  }

  private async write(fitId: string, change: Partial<typeof fits.$inferInsert>): Promise<boolean> {
    const written = await this.database.transaction(async (tx) => {
      const [fit] = await tx.update(fits).set({ ...change, finishedAt: this.clock.now() }).where(and(eq(fits.id, fitId), inArray(fits.state, [...OPEN]))).returning();
      if (fit === undefined) return false;
      await this.record.append(tx, { action: `fit.${fit.state}`, noun: 'fit', nounId: fitId, person: null, details: { runId: fit.runId, number: fit.number, inputsSha256: fit.inputsSha256, error: fit.error } });
      return true;
    });
    if (written) await this.tell(fitId);
    return written;
  }

  private async tell(fitId: string): Promise<void> {
    await this.events.tell({ topic: 'fit', id: fitId, orderId: await orderOfFit(this.database.db, fitId) });
  }
}

async function orderOfFit(db: Transaction | Database['db'], fitId: string): Promise<string | null> {
  const [row] = await db.select({ orderId: samples.orderId }).from(fits).innerJoin(runs, eq(runs.id, fits.runId)).innerJoin(specimens, eq(specimens.id, runs.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId)).where(eq(fits.id, fitId));
  return row?.orderId ?? null;
}
