import { Injectable } from '@nestjs/common';
import type { Fit } from '@strainwright/common/contract/run-answers';
import type { FitSettings } from '@strainwright/common/contract/runs';
import { eq, max } from 'drizzle-orm';
import { Database, type Queries } from '../database/database';
import { people } from '../database/schema/people';
import { adoptions, fits, runs } from '../database/schema/runs';
import { EventsService } from '../events/events.service';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { invalid, notFound, wrongState } from '../platform/problem';
import { Outbox } from '../platform/queue/outbox';
import { FITS_QUEUE } from '../platform/queue/queue.settings';
import { VERSION } from '../platform/version';
import { RecordService } from '../record/record.service';
import { adoptedFits, runOrFail } from '../runs/run-answer';
import type { Caller } from '../session/caller';

type FitRow = typeof fits.$inferSelect & { requestedBy: string };

export function fitAnswerOf(row: FitRow, adopted: boolean): Fit {
  const { id, runId, number, state, progress, settings, requestedBy, createdAt, finishedAt, error, findingsWhenRefused, result, softwareVersion, inputsSha256 } = row;
  return { id, runId, number, state, progress, settings, requestedBy, createdAt: createdAt.toISOString(), finishedAt: finishedAt?.toISOString() ?? null, error, findingsWhenRefused, result, softwareVersion, inputsSha256, adopted };
}

@Injectable()
export class FitsService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly events: EventsService, private readonly clock: Clock, private readonly outbox: Outbox) {}

  async one(id: string): Promise<Fit> {
    const row = await this.findOrFail(this.database.db, id);
    const adopted = (await adoptedFits(this.database.db, [row.runId])).get(row.runId)?.fitId === id;
    return fitAnswerOf(row, adopted);
  }

  /** Writes the fit and its job in one transaction; the worker does the rest. */
  async ask(runId: string, settings: FitSettings, by: Caller): Promise<Fit> {
    const id = newId();
    await this.database.transaction(async (tx) => {
      const { run, order } = await runOrFail(tx, runId);
      if (run.state === 'void') throw wrongState('run', run.state, 'fit it');
      if (settings.kind !== run.kind) throw invalid('settings.kind', `This is a ${run.kind} run`);
      await tx.select({ id: runs.id }).from(runs).where(eq(runs.id, runId)).for('update');
      const [last] = await tx.select({ number: max(fits.number) }).from(fits).where(eq(fits.runId, runId));
      const number = (last?.number ?? 0) + 1;
      await tx.insert(fits).values({ id, runId, number, state: 'queued', settings, requestedById: by.id, createdAt: this.clock.now(), softwareVersion: VERSION });
      await this.outbox.add(tx, FITS_QUEUE, id, { fitId: id });
      await this.events.tell({ topic: 'run', id: runId, orderId: order.id });
      await this.record.append(tx, { action: 'fit.asked', noun: 'fit', nounId: id, person: by, details: { runId, number, settings } });
    });
    return this.one(id);
  }

  /** The fit that stands for its run from now on. */
  async adopt(id: string, by: Caller): Promise<Fit> {
    await this.database.transaction(async (tx) => {
      const fit = await this.findOrFail(tx, id);
      const { run, order } = await runOrFail(tx, fit.runId);
      if (run.state === 'void') throw wrongState('run', run.state, 'adopt a fit of it');
      if (fit.state !== 'done') throw wrongState('fit', fit.state, 'adopt it');
      await tx.insert(adoptions).values({ id: newId(), runId: fit.runId, fitId: id, personId: by.id, at: this.clock.now() });
      await this.events.tell({ topic: 'run', id: fit.runId, orderId: order.id });
      await this.record.append(tx, { action: 'fit.adopted', noun: 'fit', nounId: id, person: by, details: { runId: fit.runId, number: fit.number } });
    });
    return this.one(id);
  }

  private async findOrFail(db: Queries, id: string): Promise<FitRow> {
    const [row] = await db.select({ fit: fits, requestedBy: people.name }).from(fits).innerJoin(people, eq(people.id, fits.requestedById)).where(eq(fits.id, id));
    if (row === undefined) throw notFound('fit');
    return { ...row.fit, requestedBy: row.requestedBy };
  }
}
