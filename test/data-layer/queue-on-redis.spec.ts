/** Outbox and queue on Debian's Redis server: a fit is handed over, computed once, and outlives a queue that is away or was emptied. */
import { getQueueToken } from '@nestjs/bullmq';
import { Queue } from 'bullmq';
import { eq, inArray } from 'drizzle-orm';
import { Redis } from 'ioredis';
import { recordEntries } from '../../backend/src/database/schema/record';
import { fits, outbox as outboxTable } from '../../backend/src/database/schema/runs';
import { FitsProcessor } from '../../backend/src/fits/fits.processor';
import { aRun, askForFit, testFitWorker } from '../../backend/src/fits/testing';
import { Outbox } from '../../backend/src/platform/queue/outbox';
import { FITS_QUEUE } from '../../backend/src/platform/queue/queue.settings';
import { testApp, type TestApp } from '../../backend/src/testing/app';
import { redisIsInstalled, startRedis, type RedisServer } from '../services/redis';

jest.setTimeout(60_000);

/** Debian's server is looked for, not asked for: `npm test` says loudly when it is missing, and counts these as skipped. */
const available = redisIsInstalled();

(available ? describe : describe.skip)('the queue on Redis', () => {
  let redis: RedisServer;
  let app: TestApp;
  let run: { runId: string; personId: string };
  let number = 0;
  const calls: string[] = [];
  beforeAll(async () => {
    redis = await startRedis();
    app = await testApp({ env: { REDIS_URL: redis.url }, worker: testFitWorker((fitId) => {
      calls.push(fitId);
      return 'refuse';
    }) });
    run = await aRun(app.database);
  }, 120_000);
  afterAll(async () => {
    await app.close();
    await redis.stop();
  });

  const ask = () => askForFit(app.database, app.get(Outbox), run, (number += 1));
  const queue = () => app.nest.get<Queue>(getQueueToken(FITS_QUEUE), { strict: false });
  const ended = async (ids: string[]) => {
    const { worker } = app.get(FitsProcessor);
    const open = async () => (await app.database.db.select().from(fits).where(inArray(fits.id, ids))).some((fit) => fit.finishedAt === null);
    for (;;) {
      // Listens before it looks, so that no end falls between the two.
      const next = new Promise<void>((resolve) => worker.once('completed', () => resolve()));
      if (!(await open())) return;
      await next;
    }
  };

  it('is where the jobs really are', async () => {
    await app.get(FitsProcessor).worker.pause();
    const id = await ask();
    await app.get(Outbox).dispatch();
    const client = new Redis(redis.url);
    expect(await client.exists(`bull:${FITS_QUEUE}:${id}`)).toBe(1);
    client.disconnect();
    app.get(FitsProcessor).worker.resume();
    await ended([id]);
  });

  it('computes each of many fits once, and writes one outcome of each', async () => {
    calls.length = 0;
    const ids = await Promise.all(Array.from({ length: 20 }, ask));
    await ended(ids);
    expect([...calls].sort()).toEqual([...ids].sort());
    const entries = await app.database.db.select().from(recordEntries).where(inArray(recordEntries.nounId, ids));
    expect(entries.map((e) => e.action)).toEqual(ids.map(() => 'fit.failed'));
  });

  it('knows a job that is handed over a second time', async () => {
    const id = await ask();
    await ended([id]);
    await app.database.db.update(outboxTable).set({ dispatchedAt: null }).where(eq(outboxTable.jobId, id));
    calls.length = 0;
    expect(await app.get(Outbox).dispatch()).toBe(1);
    expect(await queue().getJobCountByTypes('waiting', 'active', 'delayed')).toBe(0);
    expect(calls).toEqual([]);
  });

  it('gets an open fit again after its store was emptied', async () => {
    await app.get(FitsProcessor).worker.pause();
    const id = await ask();
    await app.get(Outbox).dispatch();
    const client = new Redis(redis.url);
    await client.flushall();
    client.disconnect();
    expect(await queue().getJob(id)).toBeUndefined();
    await app.get(FitsProcessor).reconcile();
    app.get(FitsProcessor).worker.resume();
    await ended([id]);
    expect((await app.database.db.select().from(fits).where(eq(fits.id, id)))[0]).toMatchObject({ state: 'failed', error: `refused ${id}` });
  });
});
