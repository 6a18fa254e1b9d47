import { Injectable } from '@nestjs/common';
import type { ReviewFile } from '@strainwright/common/contract/determinations';
import type { Run } from '@strainwright/common/contract/run-answers';
import { and, desc, eq, inArray } from 'drizzle-orm';
import { Database, type Queries } from '../database/database';
import { recordEntries } from '../database/schema/record';
import { people } from '../database/schema/people';
import { fits } from '../database/schema/runs';
import { fitAnswerOf } from '../fits/fits.service';
import { InstrumentsService } from '../instruments/instruments.service';
import { measurementOf } from '../readings/measurement';
import { readingsOf } from '../readings/reading-answer';
import { runAnswer, runOrFail } from '../runs/run-answer';
import type { Caller } from '../session/caller';
import { determinationAnswer, determinationOrFail, type DeterminationRow } from './determination-answer';

/** Gathers everything that a reviewer needs on one page. */
@Injectable()
export class ReviewFileService {
  constructor(private readonly database: Database, private readonly instruments: InstrumentsService) {}

  async of(id: string, caller: Caller): Promise<ReviewFile> {
    const db = this.database.db;
    const row = await determinationOrFail(db, id);
    const fitRows = await db.select({ fit: fits, requestedBy: people.name }).from(fits).innerJoin(people, eq(people.id, fits.requestedById)).where(inArray(fits.id, row.fitIds.length === 0 ? [id] : row.fitIds));
    const runs: Run[] = [];
    for (const { fit } of fitRows) runs.push(await runAnswer(db, await runOrFail(db, fit.runId)));
    const readings = await readingsOf(db, row.specimenId);
    const ids = new Set([...readings.map((r) => r.instrumentId), ...runs.flatMap((run) => run.instruments.map((i) => i.id))]);
    return {
      determination: await determinationAnswer(db, row, caller.id), runs, fits: fitRows.map(({ fit, requestedBy }) => fitAnswerOf({ ...fit, requestedBy }, true)),
      readings, measurement: await measurementOf(db, row, readings), instruments: await Promise.all([...ids].map((instrumentId) => this.instruments.one(instrumentId))),
      changedSinceReturn: await this.changes(db, row),
    };
  }

  /** What differs from the fits that were submitted before the last return. */
  private async changes(db: Queries, row: DeterminationRow): Promise<string[]> {
    const entries = await db.select().from(recordEntries).where(and(eq(recordEntries.noun, 'determination'), eq(recordEntries.nounId, row.id), inArray(recordEntries.action, ['determination.composed', 'determination.returned']))).orderBy(desc(recordEntries.sequence));
    const returned = entries.find((e) => e.action === 'determination.returned');
    if (returned === undefined) return [];
    const before = entries.find((e) => e.action === 'determination.composed' && e.sequence < returned.sequence);
    const formerIds = Array.isArray(before?.details.fitIds) ? before.details.fitIds.filter((x): x is string => typeof x === 'string') : [];
    const added = row.fitIds.filter((fitId) => !formerIds.includes(fitId));
    if (added.length === 0) return ['No fit was changed'];
    const rows = await db.select({ id: fits.id, runId: fits.runId, number: fits.number, settings: fits.settings }).from(fits).where(inArray(fits.id, [...formerIds, ...added]));
    return added.flatMap((fitId) => {
      const now = rows.find((f) => f.id === fitId);
      const then = rows.find((f) => f.runId === now?.runId && formerIds.includes(f.id));
      if (now === undefined) return [];
      return [then === undefined ? `Fit ${now.number} is new` : `Fit ${now.number} takes the place of fit ${then.number}: settings ${JSON.stringify(then.settings)} became ${JSON.stringify(now.settings)}`];
    });
  }
}
