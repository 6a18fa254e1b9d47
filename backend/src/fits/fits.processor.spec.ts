import { getQueueToken } from '@nestjs/bullmq';
import { Job, Queue } from 'bullmq';
import { eq, sql } from 'drizzle-orm';
import { sqlState, type Database } from '../database/database';
import { recordEntries } from '../database/schema/record';
import { fits, outbox as outboxTable } from '../database/schema/runs';
import { testDatabase } from '../database/testing';
import { Outbox } from '../platform/queue/outbox';
import { FITS_QUEUE } from '../platform/queue/queue.settings';
import { testApp, type TestApp } from '../testing/app';
import { FitsOutcome } from './fits.outcome';
import { FitsProcessor } from './fits.processor';
import { aRun, askForFit, testFitWorker, type Behaviour } from './testing';

describe('FitsProcessor', () => {
  let app: TestApp;
  let run: { runId: string; personId: string };
  let number = 0;
  const behaviours = new Map<string, Behaviour>();
  const calls: string[] = [];

  beforeAll(async () => {
    app = await testApp({ worker: testFitWorker((fitId) => {
      calls.push(fitId);
      return behaviours.get(fitId) ?? 'refuse';
    }) });
    run = await aRun(app.database);
  }, 60_000);
  afterAll(() => app.close());

  const ask = () => {
    number += 1;
    return askForFit(app.database, app.get(Outbox), run, number);
  };
  const fitOf = async (id: string) => {
    const [fit] = await app.database.db.select().from(fits).where(eq(fits.id, id));
    if (fit === undefined) throw new Error('the fit is gone');
    return fit;
  };
  const queue = () => app.nest.get<Queue>(getQueueToken(FITS_QUEUE), { strict: false });
  /** Resolves when the worker says so of this job: an event of the process, so nothing is polled. */
  const next = (event: 'completed' | 'failed' | 'progress' | 'active', id: string, when: (job: Job) => boolean = () => true): Promise<void> =>
    new Promise((resolve) => {
      const { worker } = app.get(FitsProcessor);
      const listen = (job: Job | undefined) => {
        if (job?.id !== id || !when(job)) return;
        worker.off(event, listen);
        resolve();
      };
      worker.on(event, listen);
    });
  const done = async (ids: string[]) => {
    const worker = app.get(FitsProcessor).worker;
    const missing = async () => (await Promise.all(ids.map(fitOf))).some((f) => f.finishedAt === null);
    while (await missing()) await new Promise<void>((resolve) => worker.once('completed', () => resolve()));
  };

  it('takes a fit from the outbox through the queue to its outcome, and writes the record', async () => {
    const id = await ask();
    await done([id]);
    expect(await fitOf(id)).toMatchObject({ state: 'failed', error: `refused ${id}`, inputsSha256: 'f'.repeat(64), progress: 1 });
    const entries = await app.database.db.select().from(recordEntries).where(eq(recordEntries.nounId, id));
    expect(entries.map((e) => e.action)).toEqual(['fit.failed']);
    expect(await app.database.db.select().from(outboxTable).where(eq(outboxTable.jobId, id))).toMatchObject([{ dispatchedAt: expect.any(Date) }]);
  }, 20_000);

  it('computes each of many fits once', async () => {
    calls.length = 0;
    const ids = await Promise.all(Array.from({ length: 20 }, ask));
    await done(ids);
    expect([...calls].sort()).toEqual([...ids].sort());
  }, 30_000);

  it('does nothing for a fit that was rolled back', async () => {
    const before = await app.database.db.select().from(outboxTable);
    await app.database.transaction(async (tx) => {
      await app.get(Outbox).add(tx, FITS_QUEUE, 'never', { fitId: 'never' });
      throw new Error('rolled back');
    }).catch(() => undefined);
    expect(await app.database.db.select().from(outboxTable)).toEqual(before);
    expect(await queue().getJob('never')).toBeUndefined();
  });

  it('hands a job over once though its hand-over is tried again, as after a crash in between', async () => {
    const id = await ask();
    await done([id]);
    await app.database.db.update(outboxTable).set({ dispatchedAt: null }).where(eq(outboxTable.jobId, id));
    calls.length = 0;
    expect(await app.get(Outbox).dispatch()).toBe(1);
    expect((await queue().getJobs(['waiting', 'active', 'delayed'])).map((j) => j.id)).toEqual([]);
    expect(calls).toEqual([]);
  }, 20_000);

  it('leaves one result of a job that is delivered twice', async () => {
    const id = await ask();
    await done([id]);
    const first = await fitOf(id);
    const twice = await queue().add(FITS_QUEUE, { fitId: id }, { jobId: `${id}-again` });
    await next('completed', twice.id ?? '');
    expect(await fitOf(id)).toEqual(first);
    expect(await app.get(FitsOutcome).finish(id, { state: 'failed', error: 'another', findings: [], inputsSha256: 'x' })).toBe(false);
  }, 20_000);

  it('is kept from overwriting an outcome by the database itself', async () => {
    const id = await ask();
    await done([id]);
    for (const statement of [sql`update fits set error = 'better' where id = ${id}`, sql`delete from fits where id = ${id}`]) {
      const error: unknown = await app.database.db.execute(statement).catch((e: unknown) => e);
      expect(sqlState(error)).toBe('23001');
    }
  }, 20_000);

  it('tries a fault of ours three times, then ends the fit failed with the reason', async () => {
    const id = await askWith('throw');
    await next('failed', id, (job) => job.attemptsMade === 3);
    expect(await fitOf(id)).toMatchObject({ state: 'failed', error: 'The computation did not come to an end: a fault of ours' });
    expect(calls.filter((c) => c === id)).toHaveLength(3);
  }, 30_000);

  it('outlives a worker thread that dies in the computation', async () => {
    const id = await askWith('die');
    await next('failed', id, (job) => job.attemptsMade === 3);
    expect((await fitOf(id)).state).toBe('failed');
    const after = await ask();
    await done([after]);
    expect((await fitOf(after)).error).toBe(`refused ${after}`);
  }, 30_000);

  it('gives up a fit whose job failed in the queue without coming to the processor', async () => {
    const poisoned = await askWith('throw', true);
    await app.get(FitsProcessor).reconcile();
    expect((await fitOf(poisoned)).state).toBe('failed');
  }, 20_000);

  /** A fit whose behaviour is known before its job is taken; its job may stand failed in the queue already. */
  async function askWith(behaviour: Behaviour, failedInQueue = false): Promise<string> {
    const worker = app.get(FitsProcessor).worker;
    await worker.pause();
    const id = await ask();
    behaviours.set(id, behaviour);
    if (failedInQueue) {
      await app.get(Outbox).dispatch();
      await app.database.pool.query(`update bullmq.job set state = 'failed' where id = $1`, [id]);
    }
    worker.resume();
    return id;
  }
});

describe('FitsProcessor, stopped and started', () => {
  let database: Database;
  let run: { runId: string; personId: string };
  beforeAll(async () => {
    database = await testDatabase();
    run = await aRun(database);
  }, 60_000);
  afterAll(() => database.close());

  /** Starts an application on the database; resolves `begun` with the fit that its worker begins first. */
  async function start(behaviour: Behaviour) {
    let begin: (fitId: string) => void = () => {};
    const begun = new Promise<string>((resolve) => {
      begin = resolve;
    });
    const app = await testApp({ database, worker: testFitWorker((fitId) => {
      begin(fitId);
      return behaviour;
    }) });
    const finished = new Promise<void>((resolve) => app.get(FitsProcessor).worker.once('completed', () => resolve()));
    return { app, begun, finished };
  }
  const stateOf = async (id: string) => (await database.db.select().from(fits).where(eq(fits.id, id)))[0];

  it('puts a running fit back when it is told to stop, and the next process computes it', async () => {
    const first = await start('wait');
    const id = await askForFit(database, first.app.get(Outbox), run, 1);
    expect(await first.begun).toBe(id);
    await first.app.nest.close();
    expect((await stateOf(id))?.finishedAt).toBeNull();

    const second = await start('refuse');
    await second.finished;
    expect(await stateOf(id)).toMatchObject({ error: `refused ${id}` });
    await second.app.nest.close();
  }, 30_000);

  // On a server other processes may hold jobs: there, a dead one's job is found when its lock has run out (test/data-layer).
  const onEmbedded = process.env.STRAINWRIGHT_TEST_DATABASE_URL === undefined;
  if (onEmbedded) it('takes up at once what a killed process left marked as running', async () => {
    const idle = await start('refuse');
    await idle.app.get(FitsProcessor).worker.pause();
    const id = await askForFit(database, idle.app.get(Outbox), run, 2);
    await idle.app.get(Outbox).dispatch();
    await idle.app.nest.close();
    // As SIGKILL leaves it: active, and locked for an hour to come.
    await database.pool.query(`update bullmq.job set state = 'active', locked_until_ms = (extract(epoch from now()) * 1000)::bigint + 3600000 where id = $1`, [id]);

    const next = await start('refuse');
    await next.finished;
    expect(await stateOf(id)).toMatchObject({ error: `refused ${id}` });
    await next.app.nest.close();
  }, 30_000);
});
