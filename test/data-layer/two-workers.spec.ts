/** Fits on a PostgreSQL server by two worker processes, one of which is killed: once with the queue in the database, once with it on Redis. */
import type { Fit } from '@strainwright/common/contract/run-answers';
import { recordText } from '../faults/record-text';
import { cylinderReadings, fitEnded, logSpecimen, recordRun, setUpLaboratory, stressStrainRun } from '../services/laboratory';
import { postgresPrograms, startPostgres, type Postgres } from '../services/postgres';
import { redisIsInstalled, startRedis } from '../services/redis';
import { removeFolder, startServer, temporaryFolder, type Server } from '../services/server';

jest.setTimeout(240_000);

const hasPostgres = postgresPrograms() !== undefined;
const hasRedis = redisIsInstalled();
if (!hasPostgres) console.error('!!! SKIPPED: there is no PostgreSQL server on this machine (Debian package postgresql): workers of their own were not tested.');
if (!hasRedis) console.error('!!! SKIPPED: there is no Redis server on this machine (Debian package redis-server): the queue was not tested on Redis.');

/** Stops in the reverse order of starting, whatever happened in between. */
async function withCleanUp(story: (later: (act: () => unknown) => void) => Promise<void>): Promise<void> {
  const acts: (() => unknown)[] = [];
  try {
    await story((act) => acts.push(act));
  } finally {
    for (const act of acts.reverse()) await act();
  }
}

async function killOneOfTwo(databaseUrl: string, env: Record<string, string>): Promise<void> {
  await withCleanUp(async (later) => {
    const data = temporaryFolder();
    later(() => removeFolder(data));
    const start = async (entry: 'main' | 'worker'): Promise<Server> => {
      const server = await startServer({ data, entry, env: { DATABASE_URL: databaseUrl, STRAINWRIGHT_FITS_AT_ONCE: '1', ...env } });
      later(() => server.stop());
      return server;
    };
    const api = await start('main');
    const lab = await setUpLaboratory(api.url);
    const { specimenId } = await logSpecimen(lab);
    await lab.technician.post(`/api/specimens/${specimenId}/readings`, cylinderReadings(lab, { length: 100, diameter: 20, mass: 84.82 }));
    const run = await recordRun(lab.technician, specimenId, stressStrainRun(lab, [{ purpose: 'record' }]), [{ name: 'record.csv', bytes: recordText(100_000) }]);
    const ids: string[] = [];
    for (let i = 0; i < 4; i += 1) {
      const { fit } = await lab.analyst.post<{ fit: { id: string } }>(`/api/runs/${run.id}/fits`, { settings: { kind: 'stress-strain', region: { by: 'automatic' } } });
      ids.push(fit.id);
    }
    const states = () => Promise.all(ids.map(async (id) => (await lab.analyst.get<Fit>(`/api/fits/${id}`)).state));
    expect(await states()).toEqual(['queued', 'queued', 'queued', 'queued']);

    // Each computes one at a time: two that run at once are one in each.
    const [doomed] = await Promise.all([start('worker'), start('worker')]);
    while ((await states()).filter((state) => state === 'running').length < 2);
    await doomed.kill();
    const fits: Fit[] = [];
    for (const id of ids) fits.push(await fitEnded(lab.analyst, id, 120_000));

    expect(fits.map((f) => f.state)).toEqual(['done', 'done', 'done', 'done']);
    expect(new Set(fits.map((f) => JSON.stringify(f.result))).size).toBe(1);
    for (const { id } of fits) {
      const { items } = await lab.administrator.get<{ items: { action: string }[] }>(`/api/record?noun=fit&nounId=${id}`);
      expect(items.map((e) => e.action).filter((action) => /^fit\.(done|failed)$/.test(action))).toEqual(['fit.done']);
    }
    expect(await lab.administrator.get('/api/record/verify')).toMatchObject({ intact: true });
  });
}

(hasPostgres ? describe : describe.skip)('two worker processes, one killed in the middle of a fit', () => {
  let postgres: Postgres;
  beforeAll(async () => {
    postgres = await startPostgres();
  });
  afterAll(() => postgres.stop());

  it('end every fit once, the queue being in the database', async () => {
    await killOneOfTwo(await postgres.createDatabase('queue_in_database'), {});
  });

  (hasRedis ? it : it.skip)('end every fit once, the queue being on Redis', async () => {
    const redis = await startRedis();
    try {
      await killOneOfTwo(await postgres.createDatabase('queue_on_redis'), { REDIS_URL: redis.url });
    } finally {
      await redis.stop();
    }
  });
});
