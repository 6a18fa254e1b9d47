/** Everything that a certificate's determinations rest on, read in a few statements. */
import { and, asc, desc, eq, getTableColumns, inArray } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { Queries } from '../../database/database';
import { determinations, reviews } from '../../database/schema/determinations';
import { methods } from '../../database/schema/instruments';
import { samples, specimens } from '../../database/schema/orders';
import { people } from '../../database/schema/people';
import { fits, runFiles, runs } from '../../database/schema/runs';

const submitters = alias(people, 'submitters');
const composers = alias(people, 'composers');

/** One determination with its specimen and the people behind it. */
export type WorkDetermination = Awaited<ReturnType<typeof selectDeterminations>>[number];
/** One adopted fit with its run, method and raw files. */
export type WorkRun = Awaited<ReturnType<typeof selectRuns>>[number];
export type WorkFile = typeof runFiles.$inferSelect;

export interface Work {
  /** By sample, specimen and basis. */
  readonly determinations: readonly WorkDetermination[];
  readonly runsOf: (determination: WorkDetermination) => WorkRun[];
  readonly filesOf: (run: WorkRun) => WorkFile[];
  /** The acceptance of a determination; undefined while it has none. */
  readonly reviewOf: (determination: WorkDetermination) => { reviewedBy: string; at: Date } | undefined;
}

export async function loadWork(db: Queries, determinationIds: readonly string[]): Promise<Work> {
  const rows = await selectDeterminations(db, determinationIds);
  const runRows = await selectRuns(db, rows.flatMap((row) => row.fitIds));
  const files = await selectFiles(db, runRows.map((row) => row.runId));
  const accepted = await selectAcceptances(db, determinationIds);
  return {
    determinations: rows,
    runsOf: (determination) => runRows.filter((row) => determination.fitIds.includes(row.fitId)),
    filesOf: (run) => files.filter((file) => file.runId === run.runId),
    reviewOf: (determination) => accepted.find((review) => review.determinationId === determination.id),
  };
}

function selectDeterminations(db: Queries, ids: readonly string[]) {
  return db.select({
    ...getTableColumns(determinations), submittedBy: submitters.name, composedBy: composers.name, orderId: samples.orderId,
    specimen: getTableColumns(specimens), sample: getTableColumns(samples),
  }).from(determinations)
    .innerJoin(specimens, eq(specimens.id, determinations.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId))
    .innerJoin(composers, eq(composers.id, determinations.composedById)).leftJoin(submitters, eq(submitters.id, determinations.submittedById))
    .where(inArray(determinations.id, [...ids])).orderBy(asc(samples.mark), asc(specimens.mark), asc(determinations.basis), asc(determinations.id));
}

function selectRuns(db: Queries, fitIds: readonly string[]) {
  return db.select({
    fitId: fits.id, settings: fits.settings, softwareVersion: fits.softwareVersion, fitStartedAt: fits.startedAt,
    runId: runs.id, specimenId: runs.specimenId, number: runs.number, kind: runs.kind, performedAt: runs.performedAt, performedBy: people.name, conditions: runs.conditions, instruments: runs.instruments,
    method: { code: methods.code, versionNumber: methods.versionNumber, name: methods.name, standard: methods.standard, kind: methods.kind },
  }).from(fits).innerJoin(runs, eq(runs.id, fits.runId)).innerJoin(methods, eq(methods.id, runs.methodId)).innerJoin(people, eq(people.id, runs.performedById))
    .where(inArray(fits.id, [...fitIds])).orderBy(asc(runs.number), asc(fits.number));
}

function selectFiles(db: Queries, runIds: readonly string[]) {
  return db.select().from(runFiles).where(inArray(runFiles.runId, [...runIds])).orderBy(asc(runFiles.runId), asc(runFiles.position));
}

function selectAcceptances(db: Queries, determinationIds: readonly string[]) {
  return db.select({ determinationId: reviews.determinationId, reviewedBy: people.name, at: reviews.at }).from(reviews).innerJoin(people, eq(people.id, reviews.personId))
    .where(and(inArray(reviews.determinationId, [...determinationIds]), eq(reviews.decision, 'accept'))).orderBy(desc(reviews.at));
}
