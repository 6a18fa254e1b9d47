import { boolean, date, doublePrecision, index, integer, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { InstrumentKind, RunKind } from '@strainwright/common/contract/vocabulary';
import { id, instant, version } from './columns';
import { people } from './people';

/** Resolution and range in SI; `unit` is how people type and see them. */
export const instruments = pgTable('instruments', {
  id: id(),
  name: text('name').notNull().unique(),
  kind: text('kind').notNull().$type<InstrumentKind>(),
  maker: text('maker').notNull(),
  model: text('model').notNull(),
  serial: text('serial').notNull(),
  location: text('location').notNull(),
  unit: text('unit').notNull(),
  resolution: doublePrecision('resolution').notNull(),
  rangeLow: doublePrecision('range_low'),
  rangeHigh: doublePrecision('range_high'),
  inService: boolean('in_service').notNull().default(true),
  createdAt: instant('created_at').notNull(),
  version: version(),
}, (t) => [index('instruments_kind').on(t.kind)]);

/** Insert-only. Uncertainty and correction in SI, or fractions of the reading when relative. */
export const calibrations = pgTable('calibrations', {
  id: id(),
  instrumentId: uuid('instrument_id').notNull().references(() => instruments.id),
  calibratedOn: date('calibrated_on', { mode: 'string' }).notNull(),
  dueOn: date('due_on', { mode: 'string' }).notNull(),
  certificate: text('certificate').notNull(),
  laboratory: text('laboratory').notNull(),
  relative: boolean('relative').notNull(),
  expandedUncertainty: doublePrecision('expanded_uncertainty').notNull(),
  coverageFactor: doublePrecision('coverage_factor').notNull(),
  correction: doublePrecision('correction').notNull(),
  enteredById: uuid('entered_by_id').notNull().references(() => people.id),
  enteredAt: instant('entered_at').notNull(),
}, (t) => [index('calibrations_instrument').on(t.instrumentId, t.calibratedOn)]);

/** Each row is one version of a written procedure; insert-only. */
export const methods = pgTable('methods', {
  id: id(),
  code: text('code').notNull(),
  versionNumber: integer('version_number').notNull(),
  name: text('name').notNull(),
  kind: text('kind').notNull().$type<RunKind>(),
  standard: text('standard').notNull(),
  description: text('description').notNull(),
  cautions: text('cautions').notNull(),
  createdById: uuid('created_by_id').notNull().references(() => people.id),
  createdAt: instant('created_at').notNull(),
}, (t) => [uniqueIndex('methods_version').on(t.code, t.versionNumber)]);

export const referencePieces = pgTable('reference_pieces', {
  id: id(),
  name: text('name').notNull().unique(),
  quantity: text('quantity').notNull().$type<'transit time P' | 'transit time S' | 'E'>(),
  knownValue: doublePrecision('known_value').notNull(),
  knownExpandedUncertainty: doublePrecision('known_expanded_uncertainty').notNull(),
  unit: text('unit').notNull(),
  instrumentId: uuid('instrument_id').notNull().references(() => instruments.id),
  createdAt: instant('created_at').notNull(),
});

/** Insert-only. */
export const referenceChecks = pgTable('reference_checks', {
  id: id(),
  pieceId: uuid('piece_id').notNull().references(() => referencePieces.id),
  value: doublePrecision('value').notNull(),
  expandedUncertainty: doublePrecision('expanded_uncertainty').notNull(),
  checkedAt: instant('checked_at').notNull(),
  personId: uuid('person_id').notNull().references(() => people.id),
}, (t) => [index('reference_checks_piece').on(t.pieceId, t.checkedAt)]);
