import type { Reading } from '@strainwright/common/contract/specimens';
import { asc, inArray } from 'drizzle-orm';
import type { Queries } from '../database/database';
import { instruments } from '../database/schema/instruments';
import { people } from '../database/schema/people';
import { readings } from '../database/schema/readings';

/**
 * Readings of specimens in the order in which they were read, superseded ones among them. There may be thousands: names are looked
 * up once each instead of joined to every row, and what supersedes what follows from the rows themselves.
 */
export async function readingsOf(db: Queries, specimenIds: string | readonly string[]): Promise<Reading[]> {
  const rows = await db.select().from(readings).where(inArray(readings.specimenId, [specimenIds].flat())).orderBy(asc(readings.readAt), asc(readings.id));
  const instrumentNames = await names(db, instruments, rows.map((row) => row.instrumentId));
  const personNames = await names(db, people, rows.map((row) => row.personId));
  const supersededBy = new Map(rows.flatMap((row) => (row.supersedesId === null ? [] : [[row.supersedesId, row.id]])));
  return rows.map(({ personId, supersedesId, readAt, ...reading }) => ({
    ...reading, readAt: readAt.toISOString(), instrumentName: instrumentNames.get(reading.instrumentId) ?? '', personName: personNames.get(personId) ?? '',
    supersedes: supersedesId, supersededBy: supersededBy.get(reading.id) ?? null,
  }));
}

async function names(db: Queries, table: typeof instruments | typeof people, wanted: readonly string[]): Promise<Map<string, string>> {
  const ids = [...new Set(wanted)];
  if (ids.length === 0) return new Map();
  const rows = await db.select({ id: table.id, name: table.name }).from(table).where(inArray(table.id, ids));
  return new Map(rows.map((row) => [row.id, row.name]));
}
