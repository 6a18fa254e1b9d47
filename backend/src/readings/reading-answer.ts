import type { Reading } from '@strainwright/common/contract/specimens';
import { and, asc, eq, inArray } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { Queries } from '../database/database';
import { instruments } from '../database/schema/instruments';
import { people } from '../database/schema/people';
import { readings } from '../database/schema/readings';

const later = alias(readings, 'later');

/** Readings of specimens in the order in which they were read, superseded ones among them; only those of `ids` when given. */
export async function readingsOf(db: Queries, specimenIds: string | readonly string[], ids?: readonly string[]): Promise<Reading[]> {
  const where = and(inArray(readings.specimenId, [specimenIds].flat()), ids === undefined ? undefined : inArray(readings.id, [...ids]));
  const rows = await db.select({ reading: readings, instrumentName: instruments.name, personName: people.name, supersededBy: later.id })
    .from(readings).innerJoin(instruments, eq(instruments.id, readings.instrumentId)).innerJoin(people, eq(people.id, readings.personId))
    .leftJoin(later, eq(later.supersedesId, readings.id)).where(where).orderBy(asc(readings.readAt), asc(readings.id));
  return rows.map(({ reading: { personId: _, supersedesId, readAt, ...reading }, ...named }) => ({ ...reading, ...named, supersedes: supersedesId, readAt: readAt.toISOString() }));
}
