import type { z } from 'zod';
import type { Finding } from '@strainwright/common/contract/result';
import type { fitSummary, Run, RunFile } from '@strainwright/common/contract/run-answers';
import { calibrationFindings } from '@strainwright/common/specimens/instrument-state';
import { asc, desc, eq, inArray } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { Queries } from '../database/database';
import { calibrations, instruments, methods } from '../database/schema/instruments';
import { orders, samples, specimens } from '../database/schema/orders';
import { people } from '../database/schema/people';
import { adoptions, fits, runFiles, runs } from '../database/schema/runs';
import { layoutFindings } from '../fits/fit.inputs';
import { calibrationState, inForce } from '../instruments/calibration-state';
import { instrumentStates } from '../instruments/instrument-state';
import { dayIn, timeZoneOf } from '../laboratory/laboratory-day';
import { notFound } from '../platform/problem';

export type RunRow = Awaited<ReturnType<typeof runOrFail>>;
const confirmer = alias(people, 'confirmer');

/** A run with its specimen, sample, order and method. @throws Problem 404 */
export async function runOrFail(db: Queries, id: string) {
  const [row] = await db.select({ run: runs, specimen: specimens, sample: samples, order: { id: orders.id, number: orders.number, state: orders.state }, method: methods, performedBy: people.name })
    .from(runs).innerJoin(specimens, eq(specimens.id, runs.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId)).innerJoin(orders, eq(orders.id, samples.orderId))
    .innerJoin(methods, eq(methods.id, runs.methodId)).innerJoin(people, eq(people.id, runs.performedById)).where(eq(runs.id, id));
  if (row === undefined) throw notFound('run');
  return row;
}

export async function filesOfRun(db: Queries, runId: string): Promise<(typeof runFiles.$inferSelect & { confirmedBy: string | null })[]> {
  const rows = await db.select({ file: runFiles, confirmedBy: confirmer.name }).from(runFiles).leftJoin(confirmer, eq(confirmer.id, runFiles.confirmedById)).where(eq(runFiles.runId, runId)).orderBy(asc(runFiles.position));
  return rows.map(({ file, confirmedBy }) => ({ ...file, confirmedBy }));
}

/** The adopted fit of each run: the latest adoption counts. */
export async function adoptedFits(db: Queries, runIds: readonly string[]): Promise<Map<string, { fitId: string; personId: string }>> {
  if (runIds.length === 0) return new Map();
  const rows = await db.selectDistinctOn([adoptions.runId], { runId: adoptions.runId, fitId: adoptions.fitId, personId: adoptions.personId }).from(adoptions)
    .where(inArray(adoptions.runId, [...runIds])).orderBy(adoptions.runId, desc(adoptions.at), desc(adoptions.id));
  return new Map(rows.map(({ runId, fitId, personId }) => [runId, { fitId, personId }]));
}

export async function fitSummaries(db: Queries, runId: string): Promise<z.infer<typeof fitSummary>[]> {
  const rows = await db.select({
    id: fits.id, runId: fits.runId, number: fits.number, state: fits.state, progress: fits.progress, settings: fits.settings, requestedBy: people.name,
    createdAt: fits.createdAt, finishedAt: fits.finishedAt, error: fits.error, findingsWhenRefused: fits.findingsWhenRefused,
  }).from(fits).innerJoin(people, eq(people.id, fits.requestedById)).where(eq(fits.runId, runId)).orderBy(asc(fits.number));
  const adopted = (await adoptedFits(db, [runId])).get(runId)?.fitId;
  return rows.map((row) => ({ ...row, createdAt: row.createdAt.toISOString(), finishedAt: row.finishedAt?.toISOString() ?? null, adopted: row.id === adopted }));
}

/** Instruments of a run with how their calibration stood on its day, and what that day's calibration gives to notice. */
async function instrumentsOfRun(db: Queries, row: RunRow): Promise<{ answer: Run['instruments']; findings: Finding[] }> {
  const roles = (['time', 'force', 'axial', 'transverse', 'frame'] as const).flatMap((role) => {
    const id = row.run.instruments[role];
    return id === undefined ? [] : [{ role, id }];
  });
  if (roles.length === 0) return { answer: [], findings: [] };
  const ids = roles.map((r) => r.id);
  const on = dayIn(await timeZoneOf(db))(row.run.performedAt);
  const named = await db.select({ id: instruments.id, name: instruments.name }).from(instruments).where(inArray(instruments.id, ids));
  const history = await db.select().from(calibrations).where(inArray(calibrations.instrumentId, ids));
  const answer = roles.map(({ role, id }) => ({
    role, id, name: named.find((i) => i.id === id)?.name ?? '', calibrationState: calibrationState(inForce(history.filter((c) => c.instrumentId === id), on), on),
  }));
  const measuring = roles.filter((r) => r.role !== 'frame').map((r) => r.id);
  const findings = [...(await instrumentStates(db, measuring, on)).values()].flatMap((state) => calibrationFindings(state, on));
  return { answer, findings };
}

export function fileAnswer(file: typeof runFiles.$inferSelect & { confirmedBy: string | null }): RunFile {
  const { id, name, purpose, sha256, size, mediaType, layout, layoutOrigin, confidence, remarks, confirmedBy, rowCount } = file;
  return { id, name, purpose, sha256, size, mediaType, layout, layoutOrigin, confidence, remarks, confirmedBy, rowCount };
}

export async function runAnswer(db: Queries, row: RunRow): Promise<Run> {
  const { run, specimen, sample, order, method } = row;
  const files = await filesOfRun(db, run.id);
  const { answer, findings } = await instrumentsOfRun(db, row);
  return {
    id: run.id, specimenId: specimen.id, specimenMark: specimen.mark, sampleMark: sample.mark, orderId: order.id, orderNumber: order.number, shape: specimen.shape, materialClass: sample.materialClass,
    number: run.number, kind: run.kind, state: run.state, voidReason: run.voidReason,
    method: { id: method.id, code: method.code, versionNumber: method.versionNumber, name: method.name, standard: method.standard, cautions: method.cautions },
    performedAt: run.performedAt.toISOString(), performedBy: row.performedBy, conditions: run.conditions, record: run.record,
    instruments: answer, files: files.map(fileAnswer), fits: await fitSummaries(db, run.id), findings: [...layoutFindings(files), ...findings], version: run.version,
  };
}
