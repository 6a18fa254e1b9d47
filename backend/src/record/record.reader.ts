import { setImmediate } from 'node:timers/promises';
import { Injectable } from '@nestjs/common';
import type { RecordEntry, recordQuery, recordVerification } from '@strainwright/common/contract/record';
import { and, asc, count, desc, eq, gt, gte, ilike, lte, or, type SQL } from 'drizzle-orm';
import type { z } from 'zod';
import { Database } from '../database/database';
import { containing } from '../database/search';
import { recordEntries } from '../database/schema/record';
import { GENESIS, hashOf, type RecordRow } from './record.service';

/** Entries read at once: short statements, so that nothing else waits long. */
const STEP = 500;

type Verification = z.infer<typeof recordVerification>;

/** Lists the record and recomputes its chain. */
@Injectable()
export class RecordReader {
  constructor(private readonly database: Database) {}

  async list(query: z.infer<typeof recordQuery>): Promise<{ items: RecordEntry[]; total: number }> {
    const where = conditions(query);
    const order = query.sort === 'sequence' || query.sort === 'at' ? asc(recordEntries.sequence) : desc(recordEntries.sequence);
    const rows = await this.database.db.select().from(recordEntries).where(where).orderBy(order).limit(query.pageSize).offset(query.page * query.pageSize);
    const [total] = await this.database.db.select({ n: count() }).from(recordEntries).where(where);
    return { items: rows.map((row) => ({ ...row, at: row.at.toISOString() })), total: total?.n ?? 0 };
  }

  /** Recomputes every hash in steps, and names the first entry that does not follow from the one before it. */
  async verify(): Promise<Verification> {
    let before: Pick<RecordRow, 'sequence' | 'hash'> = { sequence: 0, hash: GENESIS };
    for (;;) {
      const rows = await this.database.db.select().from(recordEntries).where(gt(recordEntries.sequence, before.sequence)).orderBy(asc(recordEntries.sequence)).limit(STEP);
      for (const row of rows) {
        const reason = fault(row, before);
        if (reason !== undefined) return { entries: before.sequence, intact: false, firstBroken: row.sequence, reason };
        before = row;
      }
      if (rows.length < STEP) return { entries: before.sequence, intact: true, firstBroken: null, reason: null };
      await setImmediate();
    }
  }
}

function fault(row: RecordRow, before: Pick<RecordRow, 'sequence' | 'hash'>): string | undefined {
  if (row.sequence !== before.sequence + 1) return `Entry ${before.sequence + 1} is missing: entry ${row.sequence} follows ${before.sequence === 0 ? 'the beginning' : `entry ${before.sequence}`}.`;
  if (row.previousHash !== before.hash) return `Entry ${row.sequence} does not name the hash of the entry before it.`;
  if (hashOf(row) !== row.hash) return `The content of entry ${row.sequence} does not give its hash: it was changed after it was written.`;
  return undefined;
}

function conditions(query: z.infer<typeof recordQuery>): SQL | undefined {
  const { q, noun, nounId, action, personId, from, to } = query;
  return and(
    noun === undefined ? undefined : eq(recordEntries.noun, noun),
    nounId === undefined ? undefined : eq(recordEntries.nounId, nounId),
    action === undefined ? undefined : eq(recordEntries.action, action),
    personId === undefined ? undefined : eq(recordEntries.personId, personId),
    from === undefined ? undefined : gte(recordEntries.at, new Date(from)),
    to === undefined ? undefined : lte(recordEntries.at, new Date(to)),
    q === undefined || q === '' ? undefined : or(ilike(recordEntries.action, containing(q)), ilike(recordEntries.personName, containing(q)), ilike(recordEntries.nounId, containing(q))),
  );
}
