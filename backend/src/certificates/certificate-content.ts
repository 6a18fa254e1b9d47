/** Which determinations a certificate may hold, and who may release it. */
import { hasStop } from '@strainwright/common/findings/findings';
import { and, eq, inArray, ne, sql } from 'drizzle-orm';
import type { Queries } from '../database/database';
import { certificates } from '../database/schema/certificates';
import { determinations } from '../database/schema/determinations';
import { samples, specimens } from '../database/schema/orders';
import { separationOf } from '../determinations/adopted-work';
import type { FieldError } from '../platform/problem';

type ContentRow = Awaited<ReturnType<typeof loadContent>>[number];

/** The determinations asked for, those that exist, in no order. */
export function loadContent(db: Queries, ids: readonly string[]) {
  return db.select({
    id: determinations.id, specimenId: determinations.specimenId, basis: determinations.basis, number: determinations.number, state: determinations.state,
    result: determinations.result, fitIds: determinations.fitIds, composedById: determinations.composedById, submittedById: determinations.submittedById,
    mark: specimens.mark, orderId: samples.orderId,
  }).from(determinations).innerJoin(specimens, eq(specimens.id, determinations.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId)).where(inArray(determinations.id, [...ids]));
}

/** What keeps determinations from a certificate of the order, each at its field. */
export function contentErrors(ids: readonly string[], rows: readonly ContentRow[], orderId: string): FieldError[] {
  return ids.flatMap((id, i) => {
    const path = `determinationIds.${i}`;
    const row = rows.find((r) => r.id === id);
    if (row === undefined || row.orderId !== orderId) return [{ path, message: 'This order has no such determination' }];
    const name = `Determination ${row.number} (${row.basis}) of ${row.mark}`;
    if (ids.indexOf(id) !== i) return [{ path, message: `${name} is named twice` }];
    if (row.state === 'superseded') return [{ path, message: `${name} is superseded by a later one; choose that` }];
    if (row.state !== 'accepted') return [{ path, message: `${name} is ${row.state}; only accepted ones can be certified` }];
    if (hasStop(row.result.findings)) return [{ path, message: `${name} has a finding that stops release: ${row.result.findings.filter((f) => f.severity === 'stop').map((f) => f.seen).join('; ')}` }];
    return [];
  });
}

/** Other certificates, drafts or released, that hold one of the determinations. */
export async function certificatesHolding(db: Queries, ids: readonly string[], except: string | null) {
  return db.select({ id: certificates.id, number: certificates.number, issue: certificates.issue, state: certificates.state, determinationIds: certificates.determinationIds }).from(certificates)
    .where(and(inArray(certificates.state, ['draft', 'released']), sql`${certificates.determinationIds} && ${sql.param([...ids], certificates.determinationIds)}`, except === null ? undefined : ne(certificates.number, except)));
}

/** The determinations that took the place of superseded ones: same specimen, same basis, accepted. */
export async function takeUpLater(db: Queries, ids: readonly string[]): Promise<string[]> {
  const rows = await loadContent(db, ids);
  const later = await db.select({ id: determinations.id, specimenId: determinations.specimenId, basis: determinations.basis }).from(determinations)
    .where(and(inArray(determinations.specimenId, rows.map((r) => r.specimenId)), eq(determinations.state, 'accepted')));
  return ids.map((id) => {
    const row = rows.find((r) => r.id === id);
    return later.find((l) => l.specimenId === row?.specimenId && l.basis === row.basis)?.id ?? id;
  });
}

/** Why a person may not release a certificate with these determinations; null when they may. */
export async function releaseSeparation(db: Queries, ids: readonly string[], personId: string): Promise<string | null> {
  for (const row of await loadContent(db, ids)) {
    const problem = await separationOf(db, row, personId, 'release');
    if (problem !== null) return `${row.mark}, ${row.basis}: ${problem}`;
  }
  return null;
}
