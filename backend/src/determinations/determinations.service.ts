import { Injectable } from '@nestjs/common';
import type { determinationQuery, Determination, DeterminationSummary, submitDetermination } from '@strainwright/common/contract/determinations';
import type { ElasticResult } from '@strainwright/common/contract/result';
import { DETERMINATION_STATES, DETERMINATION_STEPS, mayStep, type DeterminationState } from '@strainwright/common/contract/states';
import type { Basis } from '@strainwright/common/contract/vocabulary';
import { and, count, eq, max, ne } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, type Transaction } from '../database/database';
import { matching, sortedBy, stateAsked } from '../database/listing';
import { determinations, reviews } from '../database/schema/determinations';
import { orders, samples, specimens } from '../database/schema/orders';
import { EventsService } from '../events/events.service';
import { Clock } from '../platform/clock';
import { Compute } from '../platform/compute';
import { newId } from '../platform/ids';
import { invalidFields, notFound, refused, stale, wrongState } from '../platform/problem';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';
import { adoptedWork, separationOf, type AdoptedWork } from './adopted-work';
import type { ComposeJob } from './compose.task';
import { determinationAnswer, determinationOrFail, selectDeterminations, summaryOf, type DeterminationRow } from './determination-answer';

const SORTS = { number: determinations.number, specimenMark: specimens.mark, orderNumber: orders.number, basis: determinations.basis, state: determinations.state, submittedAt: determinations.submittedAt, composedAt: determinations.composedAt };
const LONGEST_MS = 60_000;
type Step = { from: readonly DeterminationState[]; verb: string };

@Injectable()
export class DeterminationsService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly events: EventsService, private readonly clock: Clock, private readonly compute: Compute) {}

  async list(query: z.infer<typeof determinationQuery>): Promise<{ items: DeterminationSummary[]; total: number }> {
    const state = stateAsked(query, DETERMINATION_STATES);
    const where = and(
      matching(query.q, specimens.mark, orders.number, samples.material), state === undefined ? undefined : eq(determinations.state, state),
      query.orderId === undefined ? undefined : eq(orders.id, query.orderId), query.specimenId === undefined ? undefined : eq(specimens.id, query.specimenId),
      query.basis === undefined ? undefined : eq(determinations.basis, query.basis),
    );
    const db = this.database.db;
    const rows = await selectDeterminations(db, where).orderBy(...sortedBy(query, SORTS, determinations.id, '-composedAt')).limit(query.pageSize).offset(query.page * query.pageSize);
    const [counted] = await db.select({ total: count() }).from(determinations).innerJoin(specimens, eq(specimens.id, determinations.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId)).innerJoin(orders, eq(orders.id, samples.orderId)).where(where);
    return { items: rows.map(summaryOf), total: counted?.total ?? 0 };
  }

  async one(id: string, caller: Caller): Promise<Determination> {
    return determinationAnswer(this.database.db, await determinationOrFail(this.database.db, id), caller.id);
  }

  /** Makes a draft from the adopted fits; a draft or a returned determination is composed anew. */
  async compose(specimenId: string, basis: Basis, by: Caller): Promise<Determination> {
    const [specimen] = await this.database.db.select({ id: specimens.id }).from(specimens).where(eq(specimens.id, specimenId));
    if (specimen === undefined) throw notFound('specimen');
    const work = await adoptedWork(this.database.db, specimenId, basis);
    if (work.length === 0) throw refused('determination.no-adopted-fit', `No adopted fit gives ${basis} constants of this specimen. Adopt one first.`);
    const result = await this.composed(work, basis);
    const id = await this.database.transaction((tx) => this.writeDraft(tx, { specimenId, basis, result, fitIds: work.map((w) => w.fitId), by }));
    return this.one(id, by);
  }

  async submit(id: string, body: z.infer<typeof submitDetermination>, by: Caller): Promise<Determination> {
    await this.step(id, { from: DETERMINATION_STEPS.submit.from, verb: 'submit it' }, body.version, by, async (tx, row) => {
      const current = await adoptedWork(tx, row.specimenId, row.basis);
      if (JSON.stringify(current.map((w) => w.fitId)) !== JSON.stringify(row.fitIds)) throw refused('determination.outdated', 'Other fits have been adopted since it was composed. Compose it again.');
      const stops = row.result.findings.filter((f) => f.severity === 'stop');
      if (stops.length > 0) throw refused('determination.stopped', `${stops.length} finding${stops.length === 1 ? '' : 's'} must be put right first: ${stops.map((f) => f.seen).join('; ')}`, { findings: stops });
      const unanswered = row.result.findings.filter((f) => f.severity === 'warn' && !body.acknowledgements.some((a) => a.code === f.code && a.subject === f.subject));
      if (unanswered.length > 0) throw invalidFields(unanswered.map((f) => ({ path: `acknowledgements.${f.code}.${f.subject}`, message: `Give a reason: ${f.seen}` })), 'determination.warnings-unanswered');
      await tx.update(determinations).set({ state: 'submitted', acknowledgements: body.acknowledgements, comment: body.comment, submittedById: by.id, submittedAt: this.clock.now(), version: row.version + 1 }).where(eq(determinations.id, id));
      return { action: 'determination.submitted', details: { acknowledgements: body.acknowledgements, comment: body.comment } };
    });
    return this.one(id, by);
  }

  async accept(id: string, comment: string, version: number | undefined, by: Caller): Promise<Determination> {
    await this.step(id, { from: DETERMINATION_STEPS.accept.from, verb: 'accept it' }, version, by, async (tx, row) => {
      await this.mustBeAnother(tx, row, by);
      const former = await tx.update(determinations).set({ state: 'superseded' }).where(and(eq(determinations.specimenId, row.specimenId), eq(determinations.basis, row.basis), eq(determinations.state, 'accepted'), ne(determinations.id, id))).returning({ id: determinations.id });
      await this.review(tx, row, 'accept', comment, by);
      return { action: 'determination.accepted', details: { comment, supersedes: former.map((f) => f.id) } };
    });
    return this.one(id, by);
  }

  async return(id: string, reason: string, version: number | undefined, by: Caller): Promise<Determination> {
    await this.step(id, { from: DETERMINATION_STEPS.return.from, verb: 'return it' }, version, by, async (tx, row) => {
      await this.mustBeAnother(tx, row, by);
      await this.review(tx, row, 'return', reason, by);
      return { action: 'determination.returned', details: { reason } };
    });
    return this.one(id, by);
  }

  /** One step of the state machine: load and lock, check version and state, act, put it in the record. */
  private async step(id: string, { from, verb }: Step, version: number | undefined, by: Caller, act: (tx: Transaction, row: DeterminationRow) => Promise<{ action: string; details: Record<string, unknown> }>): Promise<void> {
    await this.database.transaction(async (tx) => {
      await tx.select({ id: determinations.id }).from(determinations).where(eq(determinations.id, id)).for('update');
      const row = await determinationOrFail(tx, id);
      if (version !== undefined && version !== row.version) throw stale('determination', { ...summaryOf(row) });
      if (!mayStep({ action: 'determinations.submit', from, to: 'draft' }, row.state)) throw wrongState('determination', row.state, verb);
      const { action, details } = await act(tx, row);
      await this.events.tell({ topic: 'determination', id, orderId: row.orderId });
      await this.record.append(tx, { action, noun: 'determination', nounId: id, person: by, details: { specimen: row.specimenMark, basis: row.basis, number: row.number, ...details } });
    });
  }

  private async review(tx: Transaction, row: DeterminationRow, decision: 'accept' | 'return', reason: string, by: Caller): Promise<void> {
    await tx.insert(reviews).values({ id: newId(), determinationId: row.id, decision, reason, personId: by.id, at: this.clock.now() });
    await tx.update(determinations).set({ state: decision === 'accept' ? 'accepted' : 'returned', version: row.version + 1 }).where(eq(determinations.id, row.id));
  }

  private async mustBeAnother(tx: Transaction, row: DeterminationRow, by: Caller): Promise<void> {
    const problem = await separationOf(tx, row, by.id, 'review');
    if (problem !== null) throw refused('review.own-work', `${problem}.`);
  }

  private async composed(work: readonly AdoptedWork[], basis: Basis): Promise<ElasticResult> {
    const job: ComposeJob = { fits: work.map((w) => ({ id: w.fitId, result: w.result })), basis, seed: work[0]?.result.monteCarlo.seed ?? 0 };
    return this.compute.run<ElasticResult>(require.resolve('./compose.task'), job, () => undefined, LONGEST_MS);
  }

  private async writeDraft(tx: Transaction, { specimenId, basis, result, fitIds, by }: { specimenId: string; basis: Basis; result: ElasticResult; fitIds: string[]; by: Caller }): Promise<string> {
    await tx.select({ id: specimens.id }).from(specimens).where(eq(specimens.id, specimenId)).for('update');
    const ofBasis = and(eq(determinations.specimenId, specimenId), eq(determinations.basis, basis));
    const existing = await tx.select().from(determinations).where(ofBasis);
    const waiting = existing.find((d) => d.state === 'submitted');
    if (waiting !== undefined) throw wrongState('determination', 'submitted', 'compose another');
    const draft = existing.find((d) => d.state === 'draft' || d.state === 'returned');
    const now = { result, fitIds, composedById: by.id, composedAt: this.clock.now(), state: 'draft' as const, submittedById: null, submittedAt: null };
    const id = draft?.id ?? newId();
    if (draft !== undefined) await tx.update(determinations).set({ ...now, version: draft.version + 1 }).where(eq(determinations.id, id));
    else {
      const [last] = await tx.select({ number: max(determinations.number) }).from(determinations).where(ofBasis);
      await tx.insert(determinations).values({ id, specimenId, basis, number: (last?.number ?? 0) + 1, acknowledgements: [], ...now });
    }
    const row = await determinationOrFail(tx, id);
    await this.events.tell({ topic: 'determination', id, orderId: row.orderId });
    await this.record.append(tx, { action: 'determination.composed', noun: 'determination', nounId: id, person: by, details: { specimen: row.specimenMark, basis, number: row.number, fitIds } });
    return id;
  }
}
