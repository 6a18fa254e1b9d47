import { isSatisfactory } from '@strainwright/common/statistics/normalized-error';
import { asc, desc, eq, sql } from 'drizzle-orm';
import type { Queries } from '../database/database';
import { certificates } from '../database/schema/certificates';
import { determinations } from '../database/schema/determinations';
import { calibrations, instruments, referenceChecks, referencePieces } from '../database/schema/instruments';
import { orders, samples, specimens } from '../database/schema/orders';
import { daysAfter, DUE_SOON_DAYS } from '../instruments/calibration-state';
import { enOf } from '../reference-checks/reference-piece';
import { MOST, type WorkItem } from './work-item';

/** Orders with accepted determinations that stand on no certificate, drafts included. */
export async function certificatesToDraft(db: Queries): Promise<WorkItem[]> {
  const rows = await db.select({ id: orders.id, number: orders.number, title: orders.title, dueOn: orders.dueOn, waiting: sql<number>`count(*)::int` })
    .from(determinations).innerJoin(specimens, eq(specimens.id, determinations.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId)).innerJoin(orders, eq(orders.id, samples.orderId))
    .where(sql`${determinations.state} = 'accepted' and ${orders.state} in ('open', 'reported')
      and not exists (select 1 from ${certificates} where ${certificates.orderId} = ${orders.id} and ${determinations.id} = any(${certificates.determinationIds}))`)
    .groupBy(orders.id).orderBy(sql`${orders.dueOn} asc nulls last`, asc(orders.createdAt)).limit(MOST);
  return rows.map((row) => ({
    kind: 'certificate to draft', id: row.id, label: `${row.number} ${row.title}`, detail: `${row.waiting} accepted ${row.waiting === 1 ? 'determination' : 'determinations'} not certified`,
    path: `/orders/${row.id}`, since: null, dueOn: row.dueOn,
  }));
}

export async function certificatesToRelease(db: Queries): Promise<WorkItem[]> {
  const rows = await db.select({ id: certificates.id, number: certificates.number, issue: certificates.issue, order: orders.number, since: certificates.draftedAt, dueOn: orders.dueOn })
    .from(certificates).innerJoin(orders, eq(orders.id, certificates.orderId)).where(eq(certificates.state, 'draft')).orderBy(sql`${orders.dueOn} asc nulls last`, asc(certificates.draftedAt)).limit(MOST);
  return rows.map((row) => ({
    kind: 'certificate to release', id: row.id, label: `${row.number} issue ${row.issue}`, detail: `Order ${row.order}`, path: `/certificates/${row.id}`, since: row.since.toISOString(), dueOn: row.dueOn,
  }));
}

/** Instruments in service whose calibration in force lapses within the month, or has. */
export async function calibrationsAboutToLapse(db: Queries, today: string): Promise<WorkItem[]> {
  const inForce = db.selectDistinctOn([calibrations.instrumentId], { instrumentId: calibrations.instrumentId, dueOn: calibrations.dueOn }).from(calibrations)
    .where(sql`${calibrations.calibratedOn} <= ${today}`).orderBy(calibrations.instrumentId, desc(calibrations.calibratedOn), desc(calibrations.enteredAt)).as('in_force');
  const rows = await db.select({ id: instruments.id, name: instruments.name, dueOn: inForce.dueOn }).from(instruments).innerJoin(inForce, eq(inForce.instrumentId, instruments.id))
    .where(sql`${instruments.inService} and ${inForce.dueOn} <= ${daysAfter(today, DUE_SOON_DAYS)}`).orderBy(asc(inForce.dueOn), asc(instruments.name)).limit(MOST);
  return rows.map((row) => ({
    kind: 'calibration about to lapse', id: row.id, label: row.name, detail: row.dueOn < today ? `Lapsed: was due on ${row.dueOn}` : `Due on ${row.dueOn}`, path: `/instruments/${row.id}`, since: null, dueOn: row.dueOn,
  }));
}

/** Reference pieces whose last check was out of limits, the latest first. */
export async function checksOutOfLimits(db: Queries): Promise<WorkItem[]> {
  const last = await db.selectDistinctOn([referenceChecks.pieceId], { piece: referencePieces, check: referenceChecks, instrument: instruments.name }).from(referenceChecks)
    .innerJoin(referencePieces, eq(referencePieces.id, referenceChecks.pieceId)).innerJoin(instruments, eq(instruments.id, referencePieces.instrumentId))
    .orderBy(referenceChecks.pieceId, desc(referenceChecks.checkedAt), desc(referenceChecks.id));
  const out = last.map((row) => ({ ...row, en: enOf(row.piece, row.check) })).filter((row) => !isSatisfactory(row.en)).sort((a, b) => b.check.checkedAt.getTime() - a.check.checkedAt.getTime());
  return out.slice(0, MOST).map(({ piece, check, instrument, en }) => ({
    kind: 'check out of limits', id: piece.id, label: `${piece.name} on ${instrument}`, detail: `E_n = ${en.toFixed(2)}, limit 1`, path: '/reference-checks', since: check.checkedAt.toISOString(), dueOn: null,
  }));
}
