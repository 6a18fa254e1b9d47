/** Fits on the real stores: two workers on one PostgreSQL server, and the queue on Redis. A worker killed in between loses nothing. */
import type { Fit } from '@strainwright/common/contract/run-answers';
import { Client } from '../services/client';
import { cylinderReadings, fitEnded, logSpecimen, recordRun, setUpLaboratory, stressStrainRun, type Laboratory } from '../services/laboratory';
import { postgresPrograms, startPostgres, type Postgres } from '../services/postgres';
import { redisIsInstalled, startRedis, type RedisServer } from '../services/redis';
import { removeFolder, startServer, temporaryFolder, type Server } from '../services/server';
import { recordText } from '../faults/record-text';

jest.setTimeout(180_000);

const ASK = { settings: { kind: 'stress-strain', region: { by: 'automatic' } } };

async function aRun(lab: Laboratory, rows: number): Promise<string> {
  const { specimenId } = await logSpecimen(lab);
  await lab.technician.post(`/api/specimens/${specimenId}/readings`, cylinderReadings(lab, { length: 100, diameter: 20, mass: 84.82 }));
  const run = await recordRun(lab.technician, specimenId, stressStrainRun(lab, [{ purpose: 'record' }]), [{ name: 'record.csv', bytes: recordText(rows) }]);
  return run.id;
}
const ask = async (analyst: Client, runId: string): Promise<string> => (await analyst.post<{ fit: Fit }>(`/api/runs/${runId}/fits`, ASK)).fit.id;

async function outcomesOf(lab: Laboratory, fitId: string): Promise<string[]> {
  const { items } = await lab.administrator.get<{ items: { action: string }[] }>(`/api/record?noun=fit&nounId=${fitId}`);
  return items.map((entry) => entry.action).filter((action) => action === 'fit.done' || action === 'fit.failed');
}

const hasPostgres = postgresPrograms() !== undefined;
const QUEUES = [{ queue: 'in the database', there: hasPostgres, onRedis: false }, { queue: 'on Redis', there: hasPostgres && redisIsInstalled(), onRedis: true }];

for (const { queue, there, onRedis } of QUEUES) (there ? describe : describe.skip)(`two workers on one PostgreSQL server, the queue ${queue}`, () => {
  let postgres: Postgres;
  let redis: RedisServer | undefined;
  let data: string;
  let api: Server;
  let workers: Server[];
  let lab: Laboratory;

  beforeAll(async () => {
    postgres = await startPostgres();
    data = temporaryFolder();
    redis = onRedis ? await startRedis() : undefined;
    const env = { DATABASE_URL: await postgres.createDatabase('laboratory'), STRAINWRIGHT_FITS_AT_ONCE: '1', REDIS_URL: redis?.url ?? '' };
    api = await startServer({ data, env });
    workers = await Promise.all([startServer({ data, env, entry: 'worker' }), startServer({ data, env, entry: 'worker' })]);
    lab = await setUpLaboratory(api.url);
  });
  afterAll(async () => {
    await Promise.all([api, ...workers].map((server) => server.stop()));
    await redis?.stop();
    await postgres.stop();
    removeFolder(data);
  });

  it('share the fits between them, each computed once and to the same bytes', async () => {
    const runId = await aRun(lab, 5_000);
    const ids = await Promise.all(Array.from({ length: 4 }, () => ask(lab.analyst, runId)));
    const fits = await Promise.all(ids.map((id) => fitEnded(lab.analyst, id)));
    expect(fits.map((fit) => fit.state)).toEqual(ids.map(() => 'done'));
    expect(new Set(fits.map((fit) => JSON.stringify(fit.result))).size).toBe(1);
    for (const id of ids) expect(await outcomesOf(lab, id)).toEqual(['fit.done']);
  });

  it('finish the fit of one that is killed', async () => {
    const runId = await aRun(lab, 200_000);
    const ids = await Promise.all(Array.from({ length: 4 }, () => ask(lab.analyst, runId)));
    // Each computes one at a time: two that run at once are one in each.
    const running = async () => (await Promise.all(ids.map((id) => lab.analyst.get<Fit>(`/api/fits/${id}`)))).filter((fit) => fit.state === 'running').length;
    while ((await running()) < 2);
    await workers[0]?.kill();
    const fits = await Promise.all(ids.map((id) => fitEnded(lab.analyst, id, 120_000)));
    expect(fits.map((fit) => fit.state)).toEqual(['done', 'done', 'done', 'done']);
    expect(new Set(fits.map((fit) => JSON.stringify(fit.result))).size).toBe(1);
    for (const id of ids) expect(await outcomesOf(lab, id)).toEqual(['fit.done']);
    expect(await lab.administrator.get('/api/record/verify')).toMatchObject({ intact: true });
  });
});

(redisIsInstalled() ? describe : describe.skip)('the queue on Redis', () => {
  let redis: RedisServer;
  let api: Server;
  beforeAll(async () => {
    redis = await startRedis();
    api = await startServer({ env: { REDIS_URL: redis.url } });
  });
  afterAll(async () => {
    await api.stop();
    await redis.stop();
    removeFolder(api.data);
  });

  it('brings a fit to its end, and says so in health', async () => {
    const health = await new Client(api.url).get<{ queue: { kind: string; ready: boolean } }>('/api/health');
    expect(health.queue).toEqual({ kind: 'redis', ready: true });
    const lab = await setUpLaboratory(api.url);
    const id = await ask(lab.analyst, await aRun(lab, 5_000));
    expect((await fitEnded(lab.analyst, id)).state).toBe('done');
    expect(await outcomesOf(lab, id)).toEqual(['fit.done']);
  });

  it('counts failed sign-ins there, so that every process sees the lock', async () => {
    const statuses: number[] = [];
    for (let i = 0; i < 11; i += 1) statuses.push((await new Client(api.url).raw('POST', '/api/session', { email: 'somebody@example.org', password: 'not the phrase' })).status);
    expect(statuses).toEqual([...Array.from({ length: 10 }, () => 401), 429]);
  });
});
