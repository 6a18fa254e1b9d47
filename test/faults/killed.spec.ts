/** SIGKILL, as a power cut or an impatient operator sends it: nothing acknowledged is lost, no fit ends twice or differently. */
import type { Specimen } from '@strainwright/common/contract/specimens';
import { Client } from '../services/client';
import { cylinderReadings, fitEnded, logSpecimen, recordRun, setUpLaboratory, stressStrainRun, type Laboratory } from '../services/laboratory';
import { ADMINISTRATOR, removeFolder, startServer, type Server } from '../services/server';
import { recordText } from './record-text';

jest.setTimeout(180_000);

const PASSWORD = 'slow river over stones';
let server: Server;
let lab: Laboratory;

beforeAll(async () => {
  server = await startServer();
  lab = await setUpLaboratory(server.url);
});
afterAll(async () => {
  await server.stop();
  removeFolder(server.data);
});

const signedIn = async () => ({
  technician: await Client.signIn(server.url, 'terry.technician@example.org', PASSWORD),
  analyst: await Client.signIn(server.url, 'ana.analyst@example.org', PASSWORD),
  administrator: await Client.signIn(server.url, ADMINISTRATOR.email, ADMINISTRATOR.password),
});

describe('the API, killed during a burst of readings', () => {
  it('has every acknowledged reading when it comes back, and an intact record', async () => {
    const { specimenId } = await logSpecimen(lab);
    const acknowledged: string[] = [];
    let killed: Promise<void> | undefined;
    for (let i = 0; i < 400; i += 1) {
      const reading = { quantity: 'length', station: 1, value: 50 + i / 1000, unit: 'mm', instrumentId: lab.instruments.caliper };
      const answer = await lab.technician.raw('POST', `/api/specimens/${specimenId}/readings`, [reading]).catch(() => null);
      if (answer === null) break;
      if (answer.status < 300) acknowledged.push(reading.value.toFixed(3));
      if (acknowledged.length === 60) killed = server.kill();
    }
    await killed;
    expect(acknowledged.length).toBeGreaterThanOrEqual(60);
    expect(acknowledged.length).toBeLessThan(400);

    server = await startServer({ data: server.data });
    const { technician, administrator } = await signedIn();
    const { readings } = await technician.get<Specimen>(`/api/specimens/${specimenId}`);
    const kept = new Set(readings.map((r) => r.typedValue.toFixed(3)));
    expect(acknowledged.filter((value) => !kept.has(value))).toEqual([]);
    expect(await administrator.get('/api/record/verify')).toMatchObject({ intact: true, firstBroken: null });
  });
});

describe('the worker, killed in the middle of a fit', () => {
  it('ends the fit once, done, with the same bytes as undisturbed', async () => {
    const text = recordText(200_000);
    const before = await signedIn();
    const current = { ...lab, technician: before.technician, customer: await Client.signIn(server.url, 'casey.customer@example.org', PASSWORD) };
    const { specimenId } = await logSpecimen(current);
    await before.technician.post(`/api/specimens/${specimenId}/readings`, cylinderReadings(lab, { length: 100, diameter: 20, mass: 84.82 }));
    const run = await recordRun(before.technician, specimenId, stressStrainRun(lab, [{ purpose: 'record' }]), [{ name: 'big.csv', bytes: text }]);
    const ask = { settings: { kind: 'stress-strain', region: { by: 'automatic' } } };
    const undisturbed = await before.analyst.post<{ fit: { id: string } }>(`/api/runs/${run.id}/fits`, ask);
    const reference = await fitEnded(before.analyst, undisturbed.fit.id);
    expect(reference).toMatchObject({ state: 'done', error: null });

    const disturbed = await before.analyst.post<{ fit: { id: string } }>(`/api/runs/${run.id}/fits`, ask);
    let state = 'queued';
    while (state === 'queued') ({ state } = await before.analyst.get<{ state: string }>(`/api/fits/${disturbed.fit.id}`));
    await server.kill();
    expect(state).toBe('running');

    server = await startServer({ data: server.data });
    const { analyst, administrator } = await signedIn();
    const fit = await fitEnded(analyst, disturbed.fit.id);
    expect(fit.state).toBe('done');
    expect(JSON.stringify(fit.result)).toBe(JSON.stringify(reference.result));
    expect(fit.inputsSha256).toBe(reference.inputsSha256);
    const { items } = await administrator.get<{ items: { action: string }[] }>(`/api/record?noun=fit&nounId=${disturbed.fit.id}`);
    expect(items.filter((entry) => entry.action === 'fit.done')).toHaveLength(1);
  });
});
