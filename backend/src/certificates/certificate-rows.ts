/** Certificates as rows: finding them, and what of them a caller may see. */
import type { CertificateSummary } from '@strainwright/common/contract/certificates';
import { onlyOwn, type Action } from '@strainwright/common/contract/permissions';
import { and, eq, getTableColumns, ne, type SQL } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { Queries } from '../database/database';
import { certificates } from '../database/schema/certificates';
import { orders } from '../database/schema/orders';
import { customers, people } from '../database/schema/people';
import { visibleOrders } from '../orders/visible-orders';
import { notFound } from '../platform/problem';
import type { Caller } from '../session/caller';

export type CertificateRow = typeof certificates.$inferSelect & { orderNumber: string; customerName: string; draftedBy: string; releasedBy: string | null };

const drafters = alias(people, 'drafters');
const releasers = alias(people, 'releasers');

/** Customers see their own certificates, and no draft: the laboratory sees all. */
export function visibleCertificates(caller: Caller, action: Action): SQL | undefined {
  return onlyOwn(caller.roles, action) ? and(visibleOrders(caller, action), ne(certificates.state, 'draft')) : undefined;
}

export function selectCertificates(db: Queries, where: SQL | undefined) {
  return db.select({ ...getTableColumns(certificates), orderNumber: orders.number, customerName: customers.name, draftedBy: drafters.name, releasedBy: releasers.name })
    .from(certificates).innerJoin(orders, eq(orders.id, certificates.orderId)).innerJoin(customers, eq(customers.id, orders.customerId))
    .innerJoin(drafters, eq(drafters.id, certificates.draftedById)).leftJoin(releasers, eq(releasers.id, certificates.releasedById)).where(where).$dynamic();
}

/** @param lock keeps the row from others until the transaction ends */
export async function findCertificate(db: Queries, id: string, caller: Caller, action: Action, lock = false): Promise<CertificateRow> {
  const query = selectCertificates(db, and(eq(certificates.id, id), visibleCertificates(caller, action)));
  const [row] = await (lock ? query.for('update', { of: certificates }) : query);
  if (row === undefined) throw notFound('certificate');
  return row;
}

export function summaryOf(row: CertificateRow): CertificateSummary {
  const { id, number, issue, state, orderId, orderNumber, customerName, draftedBy, releasedBy, releasedAt, version } = row;
  return { id, number, issue, state, orderId, orderNumber, customerName, draftedBy, releasedBy, releasedAt: releasedAt?.toISOString() ?? null, reason: row.withdrawalReason ?? row.reason, version };
}
