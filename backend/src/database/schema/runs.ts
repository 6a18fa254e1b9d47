import { bigint, doublePrecision, index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { Finding, FitResult } from '@strainwright/common/contract/result';
import type { FilePurpose, FitSettings, Layout, RunInstruments, RunRecord } from '@strainwright/common/contract/runs';
import type { FitState, RunState } from '@strainwright/common/contract/states';
import type { RunKind } from '@strainwright/common/contract/vocabulary';
import { id, instant, version } from './columns';
import { instruments, methods } from './instruments';
import { specimens } from './orders';
import { people } from './people';

export const runs = pgTable('runs', {
  id: id(),
  specimenId: uuid('specimen_id').notNull().references(() => specimens.id),
  /** 1, 2, … within the specimen. */
  number: integer('number').notNull(),
  kind: text('kind').notNull().$type<RunKind>(),
  state: text('state').notNull().$type<RunState>(),
  voidReason: text('void_reason'),
  methodId: uuid('method_id').notNull().references(() => methods.id),
  performedById: uuid('performed_by_id').notNull().references(() => people.id),
  performedAt: instant('performed_at').notNull(),
  conditions: jsonb('conditions').notNull().$type<{ temperature: number | null; humidity: number | null; notes: string }>(),
  instruments: jsonb('instruments').notNull().$type<RunInstruments>(),
  record: jsonb('record').notNull().$type<RunRecord>(),
  createdAt: instant('created_at').notNull(),
  version: version(),
}, (t) => [uniqueIndex('runs_number').on(t.specimenId, t.number), index('runs_created').on(t.createdAt)]);

/** A raw file as it came; the bytes lie in storage under their SHA-256. */
export const runFiles = pgTable('run_files', {
  id: id(),
  runId: uuid('run_id').notNull().references(() => runs.id),
  position: integer('position').notNull(),
  name: text('name').notNull(),
  purpose: text('purpose').notNull().$type<FilePurpose>(),
  sha256: text('sha256').notNull(),
  size: bigint('size', { mode: 'number' }).notNull(),
  mediaType: text('media_type').notNull(),
  layout: jsonb('layout').notNull().$type<Layout>(),
  layoutOrigin: text('layout_origin').notNull().$type<'remembered' | 'proposed' | 'confirmed'>(),
  confidence: doublePrecision('confidence').notNull(),
  remarks: jsonb('remarks').notNull().$type<string[]>(),
  rowCount: integer('row_count').notNull(),
  confirmedById: uuid('confirmed_by_id').references(() => people.id),
}, (t) => [uniqueIndex('run_files_position').on(t.runId, t.position), index('run_files_sha256').on(t.sha256)]);

/** Layouts that people confirmed, by instrument and the file's own headings. */
export const rememberedLayouts = pgTable('remembered_layouts', {
  id: id(),
  instrumentId: uuid('instrument_id').notNull().references(() => instruments.id),
  signature: text('signature').notNull(),
  layout: jsonb('layout').notNull().$type<Layout>(),
  confirmedById: uuid('confirmed_by_id').notNull().references(() => people.id),
  confirmedAt: instant('confirmed_at').notNull(),
}, (t) => [uniqueIndex('remembered_layouts_signature').on(t.instrumentId, t.signature)]);

/** Written once: after `done` or `failed` a trigger refuses any change. */
export const fits = pgTable('fits', {
  id: id(),
  runId: uuid('run_id').notNull().references(() => runs.id),
  number: integer('number').notNull(),
  state: text('state').notNull().$type<FitState>(),
  progress: doublePrecision('progress').notNull().default(0),
  settings: jsonb('settings').notNull().$type<FitSettings>(),
  requestedById: uuid('requested_by_id').notNull().references(() => people.id),
  createdAt: instant('created_at').notNull(),
  startedAt: instant('started_at'),
  finishedAt: instant('finished_at'),
  softwareVersion: text('software_version').notNull(),
  inputsSha256: text('inputs_sha256'),
  result: jsonb('result').$type<FitResult>(),
  error: text('error'),
  /** Why no result could be given. */
  findingsWhenRefused: jsonb('findings_when_refused').notNull().$type<Finding[]>().default([]),
}, (t) => [uniqueIndex('fits_number').on(t.runId, t.number), index('fits_state').on(t.state)]);

/** Insert-only; the latest of a run counts. */
export const adoptions = pgTable('adoptions', {
  id: id(),
  runId: uuid('run_id').notNull().references(() => runs.id),
  fitId: uuid('fit_id').notNull().references(() => fits.id),
  personId: uuid('person_id').notNull().references(() => people.id),
  at: instant('at').notNull(),
}, (t) => [index('adoptions_run').on(t.runId, t.at), index('adoptions_fit').on(t.fitId)]);

/** Jobs written with the row they are for; a dispatcher hands them to the queue. */
export const outbox = pgTable('outbox', {
  id: id(),
  queue: text('queue').notNull(),
  jobId: text('job_id').notNull(),
  payload: jsonb('payload').notNull().$type<Record<string, unknown>>(),
  createdAt: instant('created_at').notNull(),
  dispatchedAt: instant('dispatched_at'),
}, (t) => [uniqueIndex('outbox_job').on(t.queue, t.jobId), index('outbox_waiting').on(t.dispatchedAt, t.createdAt)]);
