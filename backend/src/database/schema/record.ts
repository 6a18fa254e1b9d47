import { bigint, index, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { instant } from './columns';

/** Insert-only, chained: `hash` covers the canonical entry and the hash before it. */
export const recordEntries = pgTable('record_entries', {
  sequence: bigint('sequence', { mode: 'number' }).primaryKey(),
  at: instant('at').notNull(),
  personId: uuid('person_id'),
  personName: text('person_name'),
  action: text('action').notNull(),
  noun: text('noun').notNull(),
  nounId: text('noun_id').notNull(),
  details: jsonb('details').notNull().$type<Record<string, unknown>>(),
  hash: text('hash').notNull(),
  previousHash: text('previous_hash').notNull(),
}, (t) => [index('record_noun').on(t.noun, t.nounId), index('record_action').on(t.action), index('record_person').on(t.personId), index('record_at').on(t.at)]);
