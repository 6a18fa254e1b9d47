import { index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { ElasticResult } from '@strainwright/common/contract/result';
import type { DeterminationState } from '@strainwright/common/contract/states';
import type { Basis } from '@strainwright/common/contract/vocabulary';
import { id, instant, version } from './columns';
import { specimens } from './orders';
import { people } from './people';

export const determinations = pgTable('determinations', {
  id: id(),
  specimenId: uuid('specimen_id').notNull().references(() => specimens.id),
  basis: text('basis').notNull().$type<Basis>(),
  /** 1, 2, … within the specimen and basis. */
  number: integer('number').notNull(),
  state: text('state').notNull().$type<DeterminationState>(),
  result: jsonb('result').notNull().$type<ElasticResult>(),
  fitIds: uuid('fit_ids').array().notNull(),
  acknowledgements: jsonb('acknowledgements').notNull().$type<{ code: string; subject: string; reason: string }[]>(),
  comment: text('comment').notNull().default(''),
  composedById: uuid('composed_by_id').notNull().references(() => people.id),
  composedAt: instant('composed_at').notNull(),
  submittedById: uuid('submitted_by_id').references(() => people.id),
  submittedAt: instant('submitted_at'),
  version: version(),
}, (t) => [uniqueIndex('determinations_number').on(t.specimenId, t.basis, t.number), index('determinations_state').on(t.state)]);

/** Insert-only. */
export const reviews = pgTable('reviews', {
  id: id(),
  determinationId: uuid('determination_id').notNull().references(() => determinations.id),
  decision: text('decision').notNull().$type<'accept' | 'return'>(),
  reason: text('reason').notNull(),
  personId: uuid('person_id').notNull().references(() => people.id),
  at: instant('at').notNull(),
}, (t) => [index('reviews_determination').on(t.determinationId)]);
