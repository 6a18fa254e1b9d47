import { Injectable } from '@nestjs/common';
import type { CertificateDocument, releaseCertificate, withdrawCertificate } from '@strainwright/common/contract/certificates';
import { CERTIFICATE_STEPS, mayStep, ORDER_STEPS } from '@strainwright/common/contract/states';
import { eq, inArray } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, type Queries, type Transaction } from '../database/database';
import { certificateDocuments, certificates } from '../database/schema/certificates';
import { determinations } from '../database/schema/determinations';
import { orders } from '../database/schema/orders';
import { EventsService } from '../events/events.service';
import { sha256 } from '../platform/canonical';
import { Clock } from '../platform/clock';
import { Config } from '../platform/config';
import { newId } from '../platform/ids';
import { invalidFields, Problem, refused, stale, wrongState } from '../platform/problem';
import { Secrets } from '../platform/secrets';
import { Storage, type StoredFile } from '../platform/storage/storage';
import { RecordService, type Deed } from '../record/record.service';
import type { Caller } from '../session/caller';
import { SessionService } from '../session/session.service';
import { contentErrors, loadContent, releaseSeparation } from './certificate-content';
import { findCertificate, summaryOf, type CertificateRow } from './certificate-rows';
import { composeSnapshot, type Release } from './composition/snapshot';
import { canonicalBytes, newVerificationCode, signSnapshot } from './rendering/signing';
import { CertificateRenderer } from './renderer';
import type { DocumentFormat } from './certificates.service';

type StoredDocuments = Record<DocumentFormat, StoredFile>;

/** Lets a certificate leave the house, and calls it back. */
@Injectable()
export class ReleaseService {
  constructor(
    private readonly database: Database, private readonly session: SessionService, private readonly renderer: CertificateRenderer,
    private readonly storage: Storage, private readonly secrets: Secrets, private readonly record: RecordService, private readonly events: EventsService,
    private readonly clock: Clock, private readonly config: Config,
  ) {}

  /** Composes, signs, renders and stores; then, in one transaction, makes it the certificate, if nothing has changed meanwhile. */
  async release(id: string, body: z.infer<typeof releaseCertificate>, caller: Caller): Promise<void> {
    const { db } = this.database;
    const row = await findCertificate(db, id, caller, 'certificates.release');
    await this.refuseRelease(db, row, body.version, caller);
    await this.session.confirmPassword(caller.id, body.password);
    const release: Release = { issuedAt: this.clock.now(), releasedBy: caller.name, url: `${this.config.publicUrl}/verify`, code: newVerificationCode() };
    const document = signSnapshot(await composeSnapshot(db, row, release), this.signingKey());
    const stored = await this.store(document);
    await this.database.transaction((tx) => this.makeReleased(tx, id, row.version, release, document, stored, caller));
  }

  async withdraw(id: string, body: z.infer<typeof withdrawCertificate>, caller: Caller): Promise<void> {
    await this.database.transaction(async (tx) => {
      const row = await findCertificate(tx, id, caller, 'certificates.withdraw', true);
      if (body.version !== undefined && body.version !== row.version) throw stale('certificate', summaryOf(row));
      if (!mayStep(CERTIFICATE_STEPS.withdraw, row.state)) throw wrongState('certificate', row.state, 'withdraw it');
      await tx.update(certificates).set({ state: 'withdrawn', withdrawnAt: this.clock.now(), withdrawalReason: body.reason, version: row.version + 1 }).where(eq(certificates.id, id));
      await this.record.append(tx, { action: 'certificate.withdrawn', noun: 'certificate', nounId: id, person: caller, details: { number: row.number, issue: row.issue, reason: body.reason } });
      await this.tell(row);
    });
  }

  private async refuseRelease(db: Queries, row: CertificateRow, seen: number | undefined, caller: Caller): Promise<void> {
    if (!mayStep(CERTIFICATE_STEPS.release, row.state)) throw wrongState('certificate', row.state, 'release it');
    if (seen !== undefined && seen !== row.version) throw stale('certificate', summaryOf(row));
    const errors = contentErrors(row.determinationIds, await loadContent(db, row.determinationIds), row.orderId);
    if (errors.length > 0) throw invalidFields(errors, 'certificate.content');
    const separation = await releaseSeparation(db, row.determinationIds, caller.id);
    if (separation !== null) throw new Problem(403, 'certificate.own-work', separation);
  }

  private signingKey() {
    return { keyId: this.secrets.signingKeyId, privateKey: this.secrets.signingKey, publicKey: this.secrets.verifyingKey };
  }

  /** The files are named by their content: those of a release that then fails harm nobody. */
  private async store(document: CertificateDocument): Promise<StoredDocuments> {
    const rendered = await this.renderer.documents(document);
    return { pdf: await this.storage.put(rendered.pdf), xlsx: await this.storage.put(rendered.xlsx), json: await this.storage.put(rendered.json) };
  }

  private async makeReleased(tx: Transaction, id: string, seen: number, release: Release, document: CertificateDocument, stored: StoredDocuments, caller: Caller): Promise<void> {
    const row = await findCertificate(tx, id, caller, 'certificates.release', true);
    if (row.version !== seen && row.state === 'draft') throw stale('certificate', summaryOf(row));
    // Held until the end, so that no review can supersede one of them meanwhile.
    await tx.select({ id: determinations.id }).from(determinations).where(inArray(determinations.id, row.determinationIds)).for('share');
    await this.refuseRelease(tx, row, undefined, caller);
    if (sha256(canonicalBytes(await composeSnapshot(tx, row, release))) !== document.sha256) throw refused('certificate.changed', 'Something that this certificate states was changed while it was made. Look at the preview again, then release.');
    const former = await this.supersede(tx, row);
    const reported = await this.reportOrder(tx, row);
    await tx.update(certificates).set({
      state: 'released', snapshot: document.snapshot, sha256: document.sha256, signature: document.signature.value, keyId: document.signature.keyId, code: release.code,
      releasedById: caller.id, releasedAt: release.issuedAt, version: row.version + 1,
    }).where(eq(certificates.id, id));
    const formats = ['pdf', 'xlsx', 'json'] as const;
    await tx.insert(certificateDocuments).values(formats.map((format) => ({ id: newId(), certificateId: id, format, ...stored[format] })));
    const details = {
      number: row.number, issue: row.issue, sha256: document.sha256, keyId: document.signature.keyId, determinationIds: row.determinationIds, replaces: former?.id ?? null, reason: row.reason,
      documents: Object.fromEntries(formats.map((format) => [format, stored[format].sha256])), separationOfDuties: document.snapshot.laboratory.separationOfDuties,
    };
    await this.record.append(tx, { action: 'certificate.released', noun: 'certificate', nounId: id, person: caller, details }, ...deedsOf(former, reported, row, caller));
    await this.tell(row);
  }

  /** The issue that this one replaces. @throws Problem 409 when it no longer is the current one */
  private async supersede(tx: Transaction, row: CertificateRow): Promise<{ id: string; number: string; issue: number } | null> {
    if (row.replacesId === null) return null;
    const [former] = await tx.select().from(certificates).where(eq(certificates.id, row.replacesId)).for('update');
    if (former === undefined || !mayStep(CERTIFICATE_STEPS.supersede, former.state)) throw refused('certificate.former', `Issue ${row.issue - 1} is ${former?.state ?? 'missing'}: only a released issue can be replaced.`);
    await tx.update(certificates).set({ state: 'superseded', version: former.version + 1 }).where(eq(certificates.id, former.id));
    return { id: former.id, number: former.number, issue: former.issue };
  }

  /** An amendment may follow on an order that is closed; it stays so. @returns whether the order became reported by this */
  private async reportOrder(tx: Transaction, row: CertificateRow): Promise<boolean> {
    const [order] = await tx.select({ state: orders.state, version: orders.version }).from(orders).where(eq(orders.id, row.orderId)).for('update');
    if (order === undefined) throw wrongState('order', 'gone', 'report it');
    if (order.state === 'reported' || (order.state === 'closed' && row.replacesId !== null)) return false;
    if (!mayStep(ORDER_STEPS.report, order.state)) throw wrongState('order', order.state, 'release its certificate');
    await tx.update(orders).set({ state: 'reported', version: order.version + 1 }).where(eq(orders.id, row.orderId));
    return true;
  }

  private async tell(row: CertificateRow): Promise<void> {
    await this.events.tell({ topic: 'certificate', id: row.id, orderId: row.orderId });
    await this.events.tell({ topic: 'order', id: row.orderId, orderId: row.orderId });
  }
}

function deedsOf(former: { id: string; number: string; issue: number } | null, reported: boolean, row: CertificateRow, caller: Caller): Deed[] {
  return [
    ...(former === null ? [] : [{ action: 'certificate.superseded', noun: 'certificate', nounId: former.id, person: caller, details: { number: former.number, issue: former.issue, by: row.id } }]),
    ...(reported ? [{ action: 'order.reported', noun: 'order', nounId: row.orderId, person: caller, details: { number: row.orderNumber, certificate: row.number } }] : []),
  ];
}
