import { Injectable } from '@nestjs/common';
import type { Certificate, certificateQuery, CertificateSummary } from '@strainwright/common/contract/certificates';
import { mayDo } from '@strainwright/common/contract/permissions';
import { CERTIFICATE_STATES } from '@strainwright/common/contract/states';
import { and, asc, count, eq } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, type Queries } from '../database/database';
import { matching, sortedBy, stateAsked } from '../database/listing';
import { certificateDocuments, certificates } from '../database/schema/certificates';
import { orders } from '../database/schema/orders';
import { customers } from '../database/schema/people';
import { Clock } from '../platform/clock';
import { Config } from '../platform/config';
import { notFound, refused } from '../platform/problem';
import { Storage } from '../platform/storage/storage';
import type { Caller } from '../session/caller';
import { releaseSeparation } from './certificate-content';
import { findCertificate, selectCertificates, summaryOf, visibleCertificates, type CertificateRow } from './certificate-rows';
import { composeSnapshot } from './composition/snapshot';
import { CertificateRenderer } from './renderer';

export type DocumentFormat = 'pdf' | 'xlsx' | 'json';
export interface DocumentDownload {
  readonly name: string;
  readonly bytes: Uint8Array;
}

const SORTS = { number: certificates.number, issue: certificates.issue, state: certificates.state, orderNumber: orders.number, customerName: customers.name, releasedAt: certificates.releasedAt };
const NOT_RELEASED = 'not released';

/** Reads certificates: lists, one with its content, its documents. */
@Injectable()
export class CertificatesService {
  constructor(
    private readonly database: Database, private readonly storage: Storage,
    private readonly renderer: CertificateRenderer, private readonly clock: Clock, private readonly config: Config,
  ) {}

  async list(query: z.infer<typeof certificateQuery>, caller: Caller): Promise<{ items: CertificateSummary[]; total: number }> {
    const state = stateAsked(query, CERTIFICATE_STATES);
    const where = and(
      visibleCertificates(caller, 'certificates.read'),
      matching(query.q, certificates.number, orders.number, customers.name),
      state === undefined ? undefined : eq(certificates.state, state),
      query.orderId === undefined ? undefined : eq(certificates.orderId, query.orderId),
    );
    const { db } = this.database;
    const rows = await selectCertificates(db, where).orderBy(...sortedBy(query, SORTS, certificates.id, '-number')).limit(query.pageSize).offset(query.page * query.pageSize);
    const [counted] = await db.select({ total: count() }).from(certificates).innerJoin(orders, eq(orders.id, certificates.orderId)).innerJoin(customers, eq(customers.id, orders.customerId)).where(where);
    return { items: rows.map(summaryOf), total: counted?.total ?? 0 };
  }

  /** A draft's content is composed afresh each time; a released one's is what was released. */
  async one(id: string, caller: Caller): Promise<Certificate> {
    const { db } = this.database;
    const row = await findCertificate(db, id, caller, 'certificates.read');
    const issues = await selectCertificates(db, and(eq(certificates.number, row.number), visibleCertificates(caller, 'certificates.read'))).orderBy(asc(certificates.issue));
    const snapshot = row.snapshot ?? (await this.preview(db, row));
    const { determinationIds, sha256, signature, code } = row;
    return { ...summaryOf(row), determinationIds, snapshot, sha256, signature, code, issues: issues.map(summaryOf), separation: await this.separationFor(db, row, caller) };
  }

  async document(id: string, format: DocumentFormat, caller: Caller): Promise<DocumentDownload> {
    const { db } = this.database;
    const row = await findCertificate(db, id, caller, 'certificates.read');
    const name = `${row.number}-issue-${row.issue}${row.state === 'draft' ? '-draft' : ''}.${format}`;
    if (row.state === 'draft') {
      if (format !== 'pdf') throw refused('certificate.not-released', 'Only a released certificate has this document; a draft has a preview as PDF.');
      return { name, bytes: await this.renderer.draft(await this.preview(db, row)) };
    }
    const [document] = await db.select().from(certificateDocuments).where(and(eq(certificateDocuments.certificateId, id), eq(certificateDocuments.format, format)));
    if (document === undefined) throw notFound('certificate');
    return { name, bytes: await this.storage.bytes(document.sha256) };
  }

  private preview(db: Queries, row: CertificateRow) {
    return composeSnapshot(db, row, { issuedAt: this.clock.now(), releasedBy: NOT_RELEASED, url: `${this.config.publicUrl}/verify`, code: NOT_RELEASED });
  }

  private async separationFor(db: Queries, row: CertificateRow, caller: Caller): Promise<string | null> {
    if (row.state !== 'draft' || !mayDo(caller.roles, 'certificates.release')) return null;
    return releaseSeparation(db, row.determinationIds, caller.id);
  }
}
