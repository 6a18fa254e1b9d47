import type { Determination, DeterminationSummary } from '@strainwright/common/contract/determinations';
import { agreements } from '@strainwright/common/determinations/compose';
import { and, asc, desc, eq, getTableColumns, inArray, ne, type SQL } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { Queries } from '../database/database';
import { determinations, reviews } from '../database/schema/determinations';
import { orders, samples, specimens } from '../database/schema/orders';
import { people } from '../database/schema/people';
import { fits } from '../database/schema/runs';
import { notFound } from '../platform/problem';
import { separationOf } from './adopted-work';

const submitter = alias(people, 'submitter');
export type DeterminationRow = Awaited<ReturnType<typeof determinationOrFail>>;

export function selectDeterminations(db: Queries, where: SQL | undefined) {
  return db.select({
    ...getTableColumns(determinations), specimenMark: specimens.mark, shape: specimens.shape, materialClass: samples.materialClass, material: samples.material,
    orderId: orders.id, orderNumber: orders.number, composedBy: people.name, submittedBy: submitter.name,
  }).from(determinations).innerJoin(specimens, eq(specimens.id, determinations.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId)).innerJoin(orders, eq(orders.id, samples.orderId))
    .innerJoin(people, eq(people.id, determinations.composedById)).leftJoin(submitter, eq(submitter.id, determinations.submittedById)).where(where).$dynamic();
}

export async function determinationOrFail(db: Queries, id: string) {
  const [row] = await selectDeterminations(db, eq(determinations.id, id));
  if (row === undefined) throw notFound('determination');
  return row;
}

export function summaryOf(row: DeterminationRow): DeterminationSummary {
  const { id, number, specimenId, specimenMark, orderId, orderNumber, material, basis, state, composedBy, submittedBy, submittedAt, version } = row;
  return { id, number, specimenId, specimenMark, orderId, orderNumber, material, basis, state, composedBy, submittedBy, submittedAt: submittedAt?.toISOString() ?? null, version };
}

async function otherBasis(db: Queries, row: DeterminationRow): Promise<Determination['otherBasis']> {
  const [other] = await db.select().from(determinations).where(and(eq(determinations.specimenId, row.specimenId), ne(determinations.basis, row.basis))).orderBy(desc(determinations.number)).limit(1);
  return other === undefined ? null : { id: other.id, basis: other.basis, state: other.state, result: other.result };
}

export async function reviewsOf(db: Queries, ids: readonly string[]): Promise<Determination['reviews']> {
  const rows = await db.select({ id: reviews.id, decision: reviews.decision, reason: reviews.reason, personName: people.name, at: reviews.at })
    .from(reviews).innerJoin(people, eq(people.id, reviews.personId)).where(inArray(reviews.determinationId, [...ids])).orderBy(asc(reviews.at));
  return rows.map((row) => ({ ...row, at: row.at.toISOString() }));
}

export async function determinationAnswer(db: Queries, row: DeterminationRow, personId: string): Promise<Determination> {
  const rows = row.fitIds.length < 2 ? [] : await db.select({ id: fits.id, result: fits.result }).from(fits).where(inArray(fits.id, row.fitIds));
  const known = rows.flatMap(({ id, result }) => (result === null ? [] : [{ id, result }]));
  return {
    ...summaryOf(row), shape: row.shape, materialClass: row.materialClass, result: row.result, fitIds: row.fitIds, acknowledgements: row.acknowledgements, comment: row.comment,
    reviews: await reviewsOf(db, [row.id]), agreements: agreements(known, row.basis), otherBasis: await otherBasis(db, row), separation: await separationOf(db, row, personId, 'review'),
  };
}
