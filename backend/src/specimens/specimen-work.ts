import type { specimenDetermination, specimenRun } from '@strainwright/common/contract/specimens';
import { asc, desc, eq, inArray } from 'drizzle-orm';
import type { z } from 'zod';
import type { Queries } from '../database/database';
import { determinations } from '../database/schema/determinations';
import { methods } from '../database/schema/instruments';
import { people } from '../database/schema/people';
import { adoptions, fits, runs } from '../database/schema/runs';

/** Runs of a specimen with their fits, in three statements. */
export async function runsOf(db: Queries, specimenId: string): Promise<z.infer<typeof specimenRun>[]> {
  const rows = await db.select({ id: runs.id, number: runs.number, kind: runs.kind, state: runs.state, methodName: methods.name, performedAt: runs.performedAt, performedBy: people.name })
    .from(runs).innerJoin(methods, eq(methods.id, runs.methodId)).innerJoin(people, eq(people.id, runs.performedById)).where(eq(runs.specimenId, specimenId)).orderBy(asc(runs.number));
  if (rows.length === 0) return [];
  const ids = rows.map((row) => row.id);
  const fitRows = await db.select({ id: fits.id, runId: fits.runId, number: fits.number, state: fits.state }).from(fits).where(inArray(fits.runId, ids)).orderBy(asc(fits.number));
  const adopted = await db.selectDistinctOn([adoptions.runId], { runId: adoptions.runId, fitId: adoptions.fitId }).from(adoptions)
    .where(inArray(adoptions.runId, ids)).orderBy(adoptions.runId, desc(adoptions.at), desc(adoptions.id));
  const adoptedFits = new Set(adopted.map((row) => row.fitId));
  return rows.map((row) => ({
    ...row, performedAt: row.performedAt.toISOString(),
    fits: fitRows.filter((fit) => fit.runId === row.id).map(({ id, number, state }) => ({ id, number, state, adopted: adoptedFits.has(id) })),
  }));
}

export async function determinationsOf(db: Queries, specimenId: string): Promise<z.infer<typeof specimenDetermination>[]> {
  return db.select({ id: determinations.id, basis: determinations.basis, number: determinations.number, state: determinations.state, result: determinations.result })
    .from(determinations).where(eq(determinations.specimenId, specimenId)).orderBy(asc(determinations.basis), desc(determinations.number));
}
