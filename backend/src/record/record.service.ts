import { Injectable } from '@nestjs/common';
import { desc, sql } from 'drizzle-orm';
import type { Transaction } from '../database/database';
import { recordEntries } from '../database/schema/record';
import { canonicalJson, sha256 } from '../platform/canonical';
import { Clock } from '../platform/clock';

export interface Deed {
  /** A verb of the product: `reading.entered`, `certificate.released`. */
  action: string;
  noun: string;
  nounId: string;
  /** Who did it; null for the program itself or somebody unknown. */
  person: { id: string; name: string } | null;
  details?: Record<string, unknown>;
}

export type RecordRow = typeof recordEntries.$inferSelect;

/** What the first entry names as the hash before it. */
export const GENESIS = '0'.repeat(64);

/** Of our own choosing: one writer of the chain at a time, on all machines. */
const LOCK_KEY = 7_311_453;

/** Appends to the chained record, in the transaction of the change it tells of. */
@Injectable()
export class RecordService {
  constructor(private readonly clock: Clock) {}

  /** Appends the deeds in order. Do it last in a transaction: other writers wait from here to its end. */
  async append(tx: Transaction, ...deeds: Deed[]): Promise<void> {
    if (deeds.length === 0) return;
    await tx.execute(sql`select pg_advisory_xact_lock(${LOCK_KEY})`);
    const [last] = await tx.select({ sequence: recordEntries.sequence, hash: recordEntries.hash }).from(recordEntries).orderBy(desc(recordEntries.sequence)).limit(1);
    let sequence = last?.sequence ?? 0;
    let previousHash = last?.hash ?? GENESIS;
    const at = this.clock.now();
    const rows = deeds.map((deed) => {
      sequence += 1;
      const entry = {
        sequence, at, personId: deed.person?.id ?? null, personName: deed.person?.name ?? null,
        action: deed.action, noun: deed.noun, nounId: deed.nounId, details: asStored(deed.details ?? {}), previousHash,
      };
      previousHash = hashOf(entry);
      return { ...entry, hash: previousHash };
    });
    for (let from = 0; from < rows.length; from += 500) await tx.insert(recordEntries).values(rows.slice(from, from + 500));
  }
}

/** SHA-256 of the entry's canonical JSON, which holds the hash of the entry before it. */
export function hashOf(entry: Omit<RecordRow, 'hash'>): string {
  const { sequence, at, personId, personName, action, noun, nounId, details, previousHash } = entry;
  return sha256(canonicalJson({ sequence, at: at.toISOString(), personId, personName, action, noun, nounId, details, previousHash }));
}

/** As the database will give it back: no dates, no undefined. */
const asStored = (details: Record<string, unknown>): Record<string, unknown> => JSON.parse(JSON.stringify(details)) as Record<string, unknown>;
