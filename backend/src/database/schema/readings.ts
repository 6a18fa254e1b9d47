import { doublePrecision, index, integer, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { ReadingQuantity } from '@strainwright/common/contract/vocabulary';
import { id, instant } from './columns';
import { instruments } from './instruments';
import { specimens } from './orders';
import { people } from './people';

/** Insert-only. A correction is a new reading that names the one it supersedes; each is superseded at most once. */
export const readings = pgTable('readings', {
  id: id(),
  specimenId: uuid('specimen_id').notNull().references(() => specimens.id),
  quantity: text('quantity').notNull().$type<ReadingQuantity>(),
  station: integer('station').notNull(),
  /** SI. */
  value: doublePrecision('value').notNull(),
  typedValue: doublePrecision('typed_value').notNull(),
  unit: text('unit').notNull(),
  instrumentId: uuid('instrument_id').notNull().references(() => instruments.id),
  personId: uuid('person_id').notNull().references(() => people.id),
  readAt: instant('read_at').notNull(),
  supersedesId: uuid('supersedes_id'),
  reason: text('reason'),
}, (t) => [index('readings_specimen').on(t.specimenId), uniqueIndex('readings_supersedes').on(t.supersedesId)]);

/** Requests already answered, by the caller's idempotency key, so that a double click or a retry stores nothing twice. */
export const answeredRequests = pgTable('answered_requests', {
  key: text('key').primaryKey(),
  personId: uuid('person_id').notNull(),
  bodySha256: text('body_sha256').notNull(),
  nounId: uuid('noun_id').notNull(),
  at: instant('at').notNull(),
});
