import type { orderCertificate } from '@strainwright/common/contract/orders';
import { and, asc, eq, ne } from 'drizzle-orm';
import type { z } from 'zod';
import type { Queries } from '../database/database';
import { certificates } from '../database/schema/certificates';

/** Certificates of an order in the order of issue; drafts are seen by the laboratory only. */
export async function certificatesOfOrder(db: Queries, orderId: string, forCustomer: boolean): Promise<z.infer<typeof orderCertificate>[]> {
  const { id, number, issue, state, releasedAt, reason, withdrawalReason } = certificates;
  const rows = await db.select({ id, number, issue, state, releasedAt, reason, withdrawalReason }).from(certificates)
    .where(and(eq(certificates.orderId, orderId), forCustomer ? ne(certificates.state, 'draft') : undefined)).orderBy(asc(number), asc(issue));
  return rows.map((row) => ({
    id: row.id, number: row.number, issue: row.issue, state: row.state, releasedAt: row.releasedAt?.toISOString() ?? null, reason: row.withdrawalReason ?? row.reason,
  }));
}
