/** SIGKILL, as a power cut or an impatient operator sends it: nothing acknowledged is lost, no fit ends twice or differently. */
import type { Specimen } from '@strainwright/common/contract/specimens';
import { Client } from '../services/client';
import { cylinderReadings, fitEnded, logSpecimen, recordRun, setUpLaboratory, stressStrainRun } from '../services/laboratory';
import { ADMINISTRATOR, removeFolder, startServer, temporaryFolder } from '../services/server';
import { recordText } from './record-text';

jest.setTimeout(180_000);

const analystSignIn = (url: string) => Client.signIn(url, 'ana.analyst@example.org', 'slow river over stones');

describe('the API, killed during a burst of readings', () => {
  it('has every acknowledged reading when it comes back, and an intact record', async () => {
    const data = temporaryFolder();
    const first = await startServer({ data });
    const lab = await setUpLaboratory(first.url);
    const { specimenId } = await logSpecimen(lab);
    const acknowledged: string[] = [];
    const burst = Array.from({ length: 400 }, (_, i) => i);
    const sending = (async () => {
      for (const i of burst) {
        const reading = { quantity: 'length', station: 1, value: 50 + i / 1000, unit: 'mm', instrumentId: lab.instruments.caliper };
        const answer = await lab.technician.raw('POST', `/api/specimens/${specimenId}/readings`, [reading]).catch(() => null);
        if (answer === null) return;
        if (answer.status < 300) acknowledged.push(reading.value.toFixed(3));
        if (acknowledged.length === 60) void first.kill();
      }
    })();
    await sending;
    expect(acknowledged.length).toBeGreaterThanOrEqual(60);
    expect(acknowledged.length).toBeLessThan(400);

    const second = await startServer({ data });
    const technician = await Client.signIn(second.url, 'terry.technician@example.org', 'slow river over stones');
    const { readings } = await technician.get<Specimen>(`/api/specimens/${specimenId}`);
    const kept = new Set(readings.map((r) => r.typedValue.toFixed(3)));
    expect(acknowledged.filter((value) => !kept.has(value))).toEqual([]);
    const administrator = await Client.signIn(second.url, ADMINISTRATOR.email, ADMINISTRATOR.password);
    expect(await administrator.get('/api/record/verify')).toMatchObject({ intact: true, firstBroken: null });
    await second.stop();
    removeFolder(data);
  });
});

describe('the worker, killed in the middle of a fit', () => {
  it('ends the fit once, done, with the same bytes as undisturbed', async () => {
    const data = temporaryFolder();
    const first = await startServer({ data });
    const lab = await setUpLaboratory(first.url);
    const { specimenId } = await logSpecimen(lab);
    await lab.technician.post(`/api/specimens/${specimenId}/readings`, cylinderReadings(lab, { length: 100, diameter: 20, mass: 84.82 }));
    const run = await recordRun(lab.technician, specimenId, stressStrainRun(lab, [{ purpose: 'record' }]), [{ name: 'big.csv', bytes: recordText(200_000) }]);
    const ask = { settings: { kind: 'stress-strain', region: { by: 'automatic' } } };

    const undisturbed = await lab.analyst.post<{ fit: { id: string } }>(`/api/runs/${run.id}/fits`, ask);
    const reference = await fitEnded(lab.analyst, undisturbed.fit.id);
    expect(reference.state).toBe('done');

    const disturbed = await lab.analyst.post<{ fit: { id: string } }>(`/api/runs/${run.id}/fits`, ask);
    for (let state = 'queued'; state === 'queued'; ) ({ state } = await lab.analyst.get<{ state: string }>(`/api/fits/${disturbed.fit.id}`));
    await first.kill();

    const second = await startServer({ data });
    const analyst = await analystSignIn(second.url);
    const fit = await fitEnded(analyst, disturbed.fit.id);
    expect(fit.state).toBe('done');
    expect(JSON.stringify(fit.result)).toBe(JSON.stringify(reference.result));
    expect(fit.inputsSha256).toBe(reference.inputsSha256);
    const administrator = await Client.signIn(second.url, ADMINISTRATOR.email, ADMINISTRATOR.password);
    const { items } = await administrator.get<{ items: { action: string }[] }>(`/api/record?noun=fit&nounId=${disturbed.fit.id}`);
    expect(items.filter((entry) => entry.action === 'fit.done')).toHaveLength(1);
    await second.stop();
    removeFolder(data);
  });
});
