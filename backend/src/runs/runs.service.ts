import { Injectable } from '@nestjs/common';
import type { NewRun, Run } from '@strainwright/common/contract/run-answers';
import type { Layout } from '@strainwright/common/contract/runs';
import { mayStep, RUN_STEPS } from '@strainwright/common/contract/states';
import { and, eq, inArray, max } from 'drizzle-orm';
import { Database, type Queries, type Transaction } from '../database/database';
import { instruments, methods } from '../database/schema/instruments';
import { samples, specimens } from '../database/schema/orders';
import { runFiles, runs } from '../database/schema/runs';
import { EventsService } from '../events/events.service';
import { lockedOrder, MAY_BE_WORKED_ON } from '../orders/open-order';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { invalid, invalidFields, notFound, stale, wrongState } from '../platform/problem';
import { answeredBefore } from '../readings/answered-requests';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';
import { RunFilesService, rememberingInstrument, type ReceivedFile, type Upload } from './run-files.service';
import { runAnswer, runOrFail } from './run-answer';

@Injectable()
export class RunsService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly events: EventsService, private readonly clock: Clock, private readonly files: RunFilesService) {}

  async one(id: string): Promise<Run> {
    return runAnswer(this.database.db, await runOrFail(this.database.db, id));
  }

  /** Records a run with its raw files; sent twice under one key it is recorded once. */
  async recordRun(specimenId: string, body: NewRun, uploads: readonly Upload[], key: string | undefined, by: Caller): Promise<Run> {
    await this.check(this.database.db, specimenId, body);
    const received = await this.files.receive(body, uploads, by);
    const id = await this.database.transaction(async (tx) => {
      const at = this.clock.now();
      const order = await this.orderOf(tx, specimenId);
      const before = await answeredBefore(tx, { personId: by.id, key, nounId: specimenId, body: { run: body, files: received.map((f) => f.row.sha256) }, at });
      if (before !== undefined) return this.recordedAt(tx, specimenId, before, by);
      return this.insert(tx, { specimenId, body, received, by, at, orderId: order.id });
    });
    return this.one(id);
  }

  async void(id: string, reason: string, version: number | undefined, by: Caller): Promise<Run> {
    await this.database.transaction(async (tx) => {
      const { run, order } = await runOrFail(tx, id);
      if (version !== undefined && version !== run.version) throw stale('run', { id, version: run.version, state: run.state });
      if (!mayStep(RUN_STEPS.void, run.state)) throw wrongState('run', run.state, 'void it');
      await tx.update(runs).set({ state: 'void', voidReason: reason, version: run.version + 1 }).where(eq(runs.id, id));
      await this.events.tell({ topic: 'run', id, orderId: order.id });
      await this.record.append(tx, { action: 'run.voided', noun: 'run', nounId: id, person: by, details: { reason } });
    });
    return this.one(id);
  }

  /** A person says how the file is read; the layout is remembered for the instrument that wrote it. */
  async confirmLayout(id: string, fileId: string, layout: Layout, by: Caller): Promise<Run> {
    const { file, rowCount, signature } = await this.files.checked(id, fileId, layout);
    await this.database.transaction(async (tx) => {
      const { run, order } = await runOrFail(tx, id);
      if (run.state === 'void') throw wrongState('run', run.state, 'confirm a layout');
      await tx.update(runFiles).set({ layout, layoutOrigin: 'confirmed', confidence: 1, rowCount, confirmedById: by.id }).where(eq(runFiles.id, fileId));
      await this.files.remember(tx, rememberingInstrument(run.instruments), signature, layout, by);
      await this.events.tell({ topic: 'run', id, orderId: order.id });
      await this.record.append(tx, { action: 'layout.confirmed', noun: 'run', nounId: id, person: by, details: { file: file.name, sha256: file.sha256, before: file.layout, after: layout } });
    });
    return this.one(id);
  }

  private async insert(tx: Transaction, { specimenId, body, received, by, at, orderId }: { specimenId: string; body: NewRun; received: readonly ReceivedFile[]; by: Caller; at: Date; orderId: string }): Promise<string> {
    const id = newId();
    const [last] = await tx.select({ number: max(runs.number) }).from(runs).where(eq(runs.specimenId, specimenId));
    const { methodId, performedAt, conditions, instruments: named, record } = body;
    const number = (last?.number ?? 0) + 1;
    await tx.insert(runs).values({ id, specimenId, number, kind: record.kind, state: 'recorded', methodId, performedById: by.id, performedAt: new Date(performedAt), conditions, instruments: named, record, createdAt: at });
    if (received.length > 0) await tx.insert(runFiles).values(received.map((f) => ({ ...f.row, runId: id })));
    for (const { row, signature } of received) if (row.layoutOrigin === 'confirmed') await this.files.remember(tx, rememberingInstrument(named), signature, row.layout, by);
    await this.events.tell({ topic: 'run', id, orderId });
    await this.record.append(
      tx,
      { action: 'run.recorded', noun: 'run', nounId: id, person: by, details: { specimenId, number, kind: record.kind, methodId, performedAt, instruments: named } },
      ...received.map(({ row }) => ({ action: 'file.attached', noun: 'run', nounId: id, person: by, details: { name: row.name, purpose: row.purpose, sha256: row.sha256, size: row.size } })),
    );
    return id;
  }

  /** The run that the key was given for: made at that instant, by that person. */
  private async recordedAt(tx: Transaction, specimenId: string, at: Date, by: Caller): Promise<string> {
    const [row] = await tx.select({ id: runs.id }).from(runs).where(and(eq(runs.specimenId, specimenId), eq(runs.createdAt, at), eq(runs.performedById, by.id)));
    if (row === undefined) throw notFound('run');
    return row.id;
  }

  /** What can be known before any file is looked at. */
  private async check(db: Queries, specimenId: string, body: NewRun): Promise<void> {
    const [specimen] = await db.select({ id: specimens.id }).from(specimens).where(eq(specimens.id, specimenId));
    if (specimen === undefined) throw notFound('specimen');
    const [method] = await db.select({ kind: methods.kind }).from(methods).where(eq(methods.id, body.methodId));
    if (method === undefined) throw invalid('methodId', 'There is no such method');
    if (method.kind !== body.record.kind) throw invalid('methodId', `This method is for ${method.kind} runs`);
    if (Date.parse(body.performedAt) > this.clock.now().getTime() + 3_600_000) throw invalid('performedAt', 'Lies in the future');
    const named = Object.entries(body.instruments);
    const known = named.length === 0 ? [] : await db.select({ id: instruments.id }).from(instruments).where(inArray(instruments.id, named.map(([, id]) => id)));
    const missing = named.filter(([, id]) => !known.some((k) => k.id === id));
    if (missing.length > 0) throw invalidFields(missing.map(([role]) => ({ path: `instruments.${role}`, message: 'There is no such instrument' })));
    const purposes = body.record.kind === 'pulse' ? ['waveform P', 'waveform S', 'zero P', 'zero S'] : ['record'];
    const wrong = body.files.findIndex((f) => !purposes.includes(f.purpose));
    if (wrong >= 0) throw invalid(`files.${wrong}.purpose`, `A ${body.record.kind} run takes ${purposes.join(', ')}`);
    if (body.record.kind === 'stress-strain' && body.files.length !== 1) throw invalid('files', 'Attach the one record of the test');
  }

  private async orderOf(tx: Transaction, specimenId: string): Promise<{ id: string }> {
    const [row] = await tx.select({ orderId: samples.orderId }).from(specimens).innerJoin(samples, eq(samples.id, specimens.sampleId)).where(eq(specimens.id, specimenId));
    if (row === undefined) throw notFound('specimen');
    return lockedOrder(tx, row.orderId, MAY_BE_WORKED_ON);
  }
}

