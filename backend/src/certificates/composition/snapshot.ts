/** The one content of a certificate, composed from what the laboratory has stored. */
import type { CertificateSnapshot } from '@strainwright/common/contract/certificates';
import { eq } from 'drizzle-orm';
import type { Queries } from '../../database/database';
import { certificates } from '../../database/schema/certificates';
import { orders } from '../../database/schema/orders';
import { customers, laboratory } from '../../database/schema/people';
import { notFound } from '../../platform/problem';
import { conformityStatements } from './conformity';
import { certifiedInstruments } from './instruments';
import { certifiedResults } from './results';
import { measuredSpecimens } from './specimens';
import { STATEMENTS } from './statements';
import { loadWork, type Work } from './work';

/** What the moment of release adds. */
export interface Release {
  readonly issuedAt: Date;
  readonly releasedBy: string;
  readonly url: string;
  readonly code: string;
}

type CertificateRow = Pick<typeof certificates.$inferSelect, 'number' | 'issue' | 'orderId' | 'replacesId' | 'reason' | 'determinationIds' | 'deviations'>;

export async function composeSnapshot(db: Queries, row: CertificateRow, release: Release): Promise<CertificateSnapshot> {
  const work = await loadWork(db, row.determinationIds);
  const [lab] = await db.select().from(laboratory);
  if (lab === undefined) throw notFound('laboratory');
  const { order, customer } = await orderOf(db, row.orderId);
  const specimens = await measuredSpecimens(db, work);
  const results = certifiedResults(work);
  return {
    schema: 'strainwright-certificate-1', number: row.number, issue: row.issue, replaces: await replacedBy(db, row), title: 'Certificate of elastic constants',
    laboratory: { name: lab.name, address: lab.address, timeZone: lab.timeZone, separationOfDuties: lab.separationOfDuties },
    customer: { name: customer.name, address: customer.address },
    order: { number: order.number, customerReference: order.customerReference, materialDescription: order.materialDescription },
    issuedAt: release.issuedAt.toISOString(), releasedBy: release.releasedBy,
    specimens: specimens.map((s) => s.certified), results, methods: methodsOf(work),
    instruments: await certifiedInstruments(db, work, specimens, lab.timeZone),
    conformity: conformityStatements(order.limits, results),
    deviations: row.deviations, statements: [...STATEMENTS], verification: { url: release.url, code: release.code },
  };
}

async function orderOf(db: Queries, orderId: string) {
  const [found] = await db.select({ order: orders, customer: customers }).from(orders).innerJoin(customers, eq(customers.id, orders.customerId)).where(eq(orders.id, orderId));
  if (found === undefined) throw notFound('order');
  return found;
}

async function replacedBy(db: Queries, row: CertificateRow): Promise<CertificateSnapshot['replaces']> {
  if (row.replacesId === null) return null;
  const [replaced] = await db.select({ number: certificates.number, issue: certificates.issue, releasedAt: certificates.releasedAt }).from(certificates).where(eq(certificates.id, row.replacesId));
  if (replaced === undefined || replaced.releasedAt === null) throw notFound('certificate');
  return { number: replaced.number, issue: replaced.issue, releasedAt: replaced.releasedAt.toISOString(), reason: row.reason ?? '' };
}

function methodsOf(work: Work): CertificateSnapshot['methods'] {
  const used = work.determinations.flatMap((d) => work.runsOf(d).map((run) => run.method));
  return [...new Map(used.map((method) => [`${method.code} ${method.versionNumber}`, method])).values()];
}
