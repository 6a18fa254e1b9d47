import { join } from 'node:path';
import type { DynamicModule } from '@nestjs/common';
import { customers, people } from '../database/schema/people';
import { methods } from '../database/schema/instruments';
import { orders, samples, specimens } from '../database/schema/orders';
import { fits, runs } from '../database/schema/runs';
import type { Database } from '../database/database';
import { newId } from '../platform/ids';
import { FITS_QUEUE } from '../platform/queue/queue.settings';
import { Outbox } from '../platform/queue/outbox';
import { FitWorkerModule } from './fit-worker.module';

/** What the test task is to do. */
export type Behaviour = 'refuse' | 'throw' | 'die' | 'wait';

const AT = new Date('2026-03-02T09:00:00Z');

/** A run that fits can be asked for. @returns its id */
export async function aRun(database: Database): Promise<{ runId: string; personId: string }> {
  const [customerId, personId, orderId, sampleId, specimenId, methodId, runId] = [newId(), newId(), newId(), newId(), newId(), newId(), newId()];
  const { db } = database;
  await db.insert(customers).values({ id: customerId, name: customerId, address: 'x', contactEmail: 'x@customer.example', createdAt: AT });
  await db.insert(people).values({ id: personId, name: 'Analyst', email: `${personId}@lab.example`, passwordHash: 'none', roles: ['analyst'], createdAt: AT });
  await db.insert(orders).values({ id: orderId, number: orderId, customerId, title: 'x', state: 'open', customerReference: '', materialDescription: 'x', constantsWanted: ['E'], kindsOfRun: ['pulse'], limits: [], notes: '', requestedById: personId, createdAt: AT });
  await db.insert(samples).values({ id: sampleId, orderId, mark: 'S1', material: 'granite', materialClass: 'rock', description: '', receivedOn: '2026-03-01', condition: '', sampledBy: '', createdAt: AT });
  await db.insert(specimens).values({ id: specimenId, sampleId, mark: 'S1-01', shape: 'cylinder', orientation: '', moisture: 'not applicable', notes: '', createdAt: AT });
  await db.insert(methods).values({ id: methodId, code: methodId, versionNumber: 1, name: 'Pulse', kind: 'pulse', standard: '', description: '', cautions: '', createdById: personId, createdAt: AT });
  await db.insert(runs).values({
    id: runId, specimenId, number: 1, kind: 'pulse', state: 'recorded', methodId, performedById: personId, performedAt: AT, conditions: { temperature: null, humidity: null, notes: '' }, instruments: {},
    record: { kind: 'pulse', frequency: null, timeResolution: 0, zeroDeterminedAt: null, P: { readings: [], zero: null }, S: { readings: [], zero: null } }, createdAt: AT,
  });
  return { runId, personId };
}

/** Asks for a fit as the API does: its row and its job in one transaction. */
export async function askForFit(database: Database, outbox: Outbox, run: { runId: string; personId: string }, number: number): Promise<string> {
  const id = newId();
  await database.transaction(async (tx) => {
    await tx.insert(fits).values({ id, runId: run.runId, number, state: 'queued', settings: { kind: 'pulse', arrivals: [], picker: 'AIC' }, requestedById: run.personId, createdAt: AT, softwareVersion: 'test' });
    await outbox.add(tx, FITS_QUEUE, id, { fitId: id });
  });
  return id;
}

/** The worker side with a task whose behaviour a test chooses, in place of the computation. */
export function testFitWorker(behaviourOf: (fitId: string) => Behaviour): DynamicModule {
  return FitWorkerModule.with({
    useFactory: () => ({
      taskFile: join(__dirname, 'testing.task.ts'),
      load: async (fitId) => ({ behaviour: behaviourOf(fitId), fitId }),
    }),
  });
}
