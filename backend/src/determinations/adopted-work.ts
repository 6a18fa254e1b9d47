import type { FitResult } from '@strainwright/common/contract/result';
import { BASIS_OF_RUN, type Basis } from '@strainwright/common/contract/vocabulary';
import { and, asc, eq, inArray } from 'drizzle-orm';
import type { Queries } from '../database/database';
import type { determinations } from '../database/schema/determinations';
import { laboratory } from '../database/schema/people';
import { adoptions, fits, runs } from '../database/schema/runs';
import { adoptedFits } from '../runs/run-answer';
import { separationProblem } from './separation';

export interface AdoptedWork {
  readonly fitId: string;
  readonly runId: string;
  readonly result: FitResult;
}

/** The adopted fits of a specimen's standing runs that give a basis, in the order of the runs. */
export async function adoptedWork(db: Queries, specimenId: string, basis: Basis): Promise<AdoptedWork[]> {
  const rows = await db.select({ id: runs.id, kind: runs.kind }).from(runs).where(and(eq(runs.specimenId, specimenId), eq(runs.state, 'recorded'))).orderBy(asc(runs.number));
  const wanted = rows.filter((run) => BASIS_OF_RUN[run.kind] === basis).map((run) => run.id);
  const adopted = await adoptedFits(db, wanted);
  const ids = wanted.flatMap((runId) => adopted.get(runId)?.fitId ?? []);
  if (ids.length === 0) return [];
  const results = await db.select({ id: fits.id, runId: fits.runId, result: fits.result }).from(fits).where(inArray(fits.id, ids));
  return ids.flatMap((fitId) => {
    const row = results.find((r) => r.id === fitId);
    return row?.result === null || row === undefined ? [] : [{ fitId, runId: row.runId, result: row.result }];
  });
}

/** Why this person may not review the determination, or release a certificate with it; null when they may. */
export async function separationOf(db: Queries, row: Pick<typeof determinations.$inferSelect, 'fitIds' | 'composedById' | 'submittedById'>, personId: string, to: 'review' | 'release'): Promise<string | null> {
  const [settings] = await db.select({ separation: laboratory.separationOfDuties }).from(laboratory).limit(1);
  const adopters = row.fitIds.length === 0 ? [] : await db.selectDistinct({ personId: adoptions.personId }).from(adoptions).where(inArray(adoptions.fitId, row.fitIds));
  return separationProblem({ adoptedByIds: adopters.map((a) => a.personId), composedById: row.composedById, submittedById: row.submittedById }, personId, to, settings?.separation ?? true);
}
