import { Injectable } from '@nestjs/common';
import type { amendCertificate, draftCertificate } from '@strainwright/common/contract/certificates';
import { and, desc, eq } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, type Transaction } from '../database/database';
import { nextNumber } from '../database/number-series';
import { certificates } from '../database/schema/certificates';
import { orders } from '../database/schema/orders';
import { EventsService } from '../events/events.service';
import { laboratoryToday } from '../laboratory/laboratory-day';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { invalidFields, notFound, wrongState } from '../platform/problem';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';
import { certificatesHolding, contentErrors, loadContent, takeUpLater } from './certificate-content';
import { findCertificate } from './certificate-rows';

interface Draft {
  readonly number: string;
  readonly issue: number;
  readonly orderId: string;
  readonly replacesId: string | null;
  readonly reason: string | null;
  readonly determinationIds: string[];
  readonly deviations: string;
}

/** Drafts certificates: the first issue from an order, a later one as an amendment. Drafting again what is a draft already changes that draft. */
@Injectable()
export class DraftingService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly events: EventsService, private readonly clock: Clock) {}

  /** @returns id of the draft */
  draft(orderId: string, body: z.infer<typeof draftCertificate>, caller: Caller): Promise<string> {
    return this.database.transaction(async (tx) => {
      const [order] = await tx.select({ state: orders.state }).from(orders).where(eq(orders.id, orderId)).for('update');
      if (order === undefined) throw notFound('order');
      if (order.state !== 'open' && order.state !== 'reported') throw wrongState('order', order.state, 'draft a certificate');
      await this.refuseUnfit(tx, body.determinationIds, orderId, null);
      const draftInHand = await this.draftHolding(tx, body.determinationIds);
      const number = draftInHand?.number ?? (await this.newNumber(tx));
      return this.keep(tx, { number, issue: 1, orderId, replacesId: null, reason: null, ...body }, caller);
    });
  }

  /** Without determinations of its own, an amendment takes up those that superseded the former issue's. @returns id of the draft */
  amend(id: string, body: z.infer<typeof amendCertificate>, caller: Caller): Promise<string> {
    return this.database.transaction(async (tx) => {
      const former = await findCertificate(tx, id, caller, 'certificates.amend', true);
      if (former.state !== 'released') throw wrongState('certificate', former.state, 'amend it');
      const determinationIds = body.determinationIds ?? (await takeUpLater(tx, former.determinationIds));
      await this.refuseUnfit(tx, determinationIds, former.orderId, former.number);
      const { number, issue, orderId } = former;
      return this.keep(tx, { number, issue: issue + 1, orderId, replacesId: former.id, reason: body.reason, determinationIds, deviations: body.deviations ?? former.deviations }, caller);
    });
  }

  private async refuseUnfit(tx: Transaction, ids: readonly string[], orderId: string, ownNumber: string | null): Promise<void> {
    const errors = contentErrors(ids, await loadContent(tx, ids), orderId);
    const elsewhere = (await certificatesHolding(tx, ids, ownNumber)).filter((c) => c.state === 'released' || c.issue > 1);
    for (const c of elsewhere) {
      ids.forEach((id, i) => {
        if (c.determinationIds.includes(id)) errors.push({ path: `determinationIds.${i}`, message: `Stands on certificate ${c.number} issue ${c.issue} already; amend that` });
      });
    }
    if (errors.length > 0) throw invalidFields(errors, 'certificate.content');
  }

  /** A first-issue draft that holds one of these determinations: it is drafted anew, instead of a second one beside it. */
  private async draftHolding(tx: Transaction, ids: readonly string[]) {
    const drafts = await certificatesHolding(tx, ids, null);
    const [first, second] = drafts;
    if (first === undefined || second === undefined) return first;
    const path = (held: readonly string[]) => `determinationIds.${ids.findIndex((id) => held.includes(id))}`;
    throw invalidFields(drafts.map((d) => ({ path: path(d.determinationIds), message: `Stands in the draft ${d.number} already` })), 'certificate.content');
  }

  private async newNumber(tx: Transaction): Promise<string> {
    const year = (await laboratoryToday(tx, this.clock)).slice(0, 4);
    return `C-${year}-${String(await nextNumber(tx, `certificates-${year}`)).padStart(4, '0')}`;
  }

  private async keep(tx: Transaction, draft: Draft, caller: Caller): Promise<string> {
    const [inHand] = await tx.select({ id: certificates.id, version: certificates.version, state: certificates.state }).from(certificates)
      .where(and(eq(certificates.number, draft.number), eq(certificates.issue, draft.issue))).orderBy(desc(certificates.issue)).for('update');
    if (inHand !== undefined && inHand.state !== 'draft') throw wrongState('certificate', inHand.state, 'draft it');
    const id = inHand?.id ?? newId();
    const written = { ...draft, draftedById: caller.id, draftedAt: this.clock.now() };
    if (inHand === undefined) await tx.insert(certificates).values({ id, ...written, state: 'draft' });
    else await tx.update(certificates).set({ ...written, version: inHand.version + 1 }).where(eq(certificates.id, id));
    const { orderId, ...details } = draft;
    await this.record.append(tx, { action: draft.replacesId === null ? 'certificate.drafted' : 'certificate.amendment-drafted', noun: 'certificate', nounId: id, person: caller, details: { ...details, orderId } });
    await this.events.tell({ topic: 'certificate', id, orderId });
    return id;
  }
}
