import { BASIS_OF_RUN } from '@strainwright/common/contract/vocabulary';
import { alias } from 'drizzle-orm/pg-core';
import { and, asc, desc, eq, gt, inArray, notExists, sql, type SQL } from 'drizzle-orm';
import type { Queries } from '../database/database';
import { determinations, reviews } from '../database/schema/determinations';
import { orders, samples, specimens } from '../database/schema/orders';
import { laboratory } from '../database/schema/people';
import { adoptions, fits, runs } from '../database/schema/runs';
import { MOST, type WorkItem } from './work-item';

const one = { one: sql`1` };

/** The last fit of each run, ended, where none of the run is adopted yet. */
export async function fitsToLookAt(db: Queries): Promise<WorkItem[]> {
  const later = alias(fits, 'later');
  const rows = await db.select({ id: fits.id, number: fits.number, state: fits.state, runId: runs.id, run: runs.number, kind: runs.kind, mark: specimens.mark, order: orders.number, since: fits.finishedAt, dueOn: orders.dueOn })
    .from(fits).innerJoin(runs, eq(runs.id, fits.runId)).innerJoin(specimens, eq(specimens.id, runs.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId)).innerJoin(orders, eq(orders.id, samples.orderId))
    .where(and(
      inArray(fits.state, ['done', 'failed']), eq(runs.state, 'recorded'), inArray(orders.state, ['open', 'reported']),
      notExists(db.select(one).from(adoptions).where(eq(adoptions.runId, runs.id))),
      notExists(db.select(one).from(later).where(and(eq(later.runId, fits.runId), gt(later.number, fits.number)))),
    )).orderBy(desc(fits.finishedAt), desc(fits.id)).limit(MOST);
  return rows.map((row) => ({
    kind: 'fit to look at', id: row.id, label: `${row.mark} run ${row.run} fit ${row.number}`, detail: `Order ${row.order}, ${BASIS_OF_RUN[row.kind]}, ${row.state}`, path: `/runs/${row.runId}`,
    since: row.since?.toISOString() ?? null, dueOn: row.dueOn,
  }));
}

function latestDeterminations(db: Queries, since: SQL<string | null>, where: SQL | undefined) {
  const later = alias(determinations, 'later');
  return db.select({
    id: determinations.id, number: determinations.number, basis: determinations.basis, mark: specimens.mark, order: orders.number, dueOn: orders.dueOn, specimenId: specimens.id,
    since: sql<Date | null>`${since}`.mapWith(determinations.submittedAt),
    returned: sql<string | null>`(select ${reviews.reason} from ${reviews} where ${reviews.determinationId} = ${determinations.id} order by ${reviews.at} desc limit 1)`,
  }).from(determinations).innerJoin(specimens, eq(specimens.id, determinations.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId)).innerJoin(orders, eq(orders.id, samples.orderId))
    .where(and(where, notExists(db.select(one).from(later).where(and(eq(later.specimenId, determinations.specimenId), eq(later.basis, determinations.basis), gt(later.number, determinations.number))))))
    .orderBy(sql`${orders.dueOn} asc nulls last`, asc(determinations.composedAt), asc(determinations.id)).limit(MOST);
}

export async function determinationsReturned(db: Queries): Promise<WorkItem[]> {
  const at = sql<string | null>`(select max(${reviews.at}) from ${reviews} where ${reviews.determinationId} = ${determinations.id})`;
  const rows = await latestDeterminations(db, at, eq(determinations.state, 'returned'));
  return rows.map((row) => item('determination returned', row, row.returned ?? ''));
}

export async function determinationsToSubmit(db: Queries): Promise<WorkItem[]> {
  const rows = await latestDeterminations(db, sql`${determinations.composedAt}`, eq(determinations.state, 'draft'));
  return rows.map((row) => item('determination to submit', row, `Order ${row.order}`));
}

/** Submitted ones that the person may review: with duties separated, none that they worked on. */
export async function determinationsToReview(db: Queries, personId: string): Promise<WorkItem[]> {
  const worked = sql`(${determinations.submittedById} = ${personId} or ${determinations.composedById} = ${personId}
    or exists (select 1 from ${adoptions} where ${adoptions.fitId} = any(${determinations.fitIds}) and ${adoptions.personId} = ${personId}))`;
  const separated = sql`coalesce((select ${laboratory.separationOfDuties} from ${laboratory} limit 1), true)`;
  const rows = await latestDeterminations(db, sql`${determinations.submittedAt}`, and(eq(determinations.state, 'submitted'), sql`not (${separated} and ${worked})`));
  return rows.map((row) => item('determination to review', row, `Order ${row.order}`));
}

type Row = Awaited<ReturnType<typeof latestDeterminations>>[number];

function item(kind: WorkItem['kind'], row: Row, detail: string): WorkItem {
  const path = `/${kind === 'determination to review' ? 'reviews' : 'determinations'}/${row.id}`;
  return { kind, id: row.id, label: `${row.mark} ${row.basis} ${row.number}`, detail, path, since: row.since?.toISOString() ?? null, dueOn: row.dueOn };
}
