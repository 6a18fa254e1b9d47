import type { SpecimenSummary } from '@strainwright/common/contract/orders';
import type { Specimen } from '@strainwright/common/contract/specimens';
import type { Problem } from '@strainwright/common/contract/wire';
import { readings } from '../database/schema/readings';
import { newId } from '../platform/ids';
import { finishedWork } from '../testing/finished-work';
import { NOW, testLaboratory, type TestLaboratory } from '../testing/laboratory';

let lab: TestLaboratory;
beforeAll(async () => {
  lab = await testLaboratory();
}, 60_000);
afterAll(() => lab.app.close());

const log = async (sampleId: string, change: object = {}) =>
  ((await lab.technician.post(`/api/samples/${sampleId}/specimens`, { shape: 'cylinder', ...change }).expect(201)).body as { items: SpecimenSummary[] }).items;

describe('SpecimensService.log', () => {
  it('gives marks of two digits, several at once, and skips those that people gave', async () => {
    const sample = await lab.sample();
    expect((await log(sample.id, { count: 3 })).map((s) => s.mark)).toEqual(['S1-01', 'S1-02', 'S1-03']);
    expect((await log(sample.id, { mark: 'S1-05' })).map((s) => s.mark)).toEqual(['S1-05']);
    expect((await log(sample.id, { count: 2 })).map((s) => s.mark)).toEqual(['S1-04', 'S1-06']);
    const [first] = await log(sample.id);
    expect(first).toMatchObject({ mark: 'S1-07', sampleMark: 'S1', material: 'aluminium alloy', customerName: 'Tarn Quarries', readingCount: 0, runCount: 0 });
  });

  it('logs thirty at once within a second', async () => {
    const sample = await lab.sample();
    expect((await log(sample.id, { count: 30 })).at(-1)?.mark).toBe('S1-30');
  });

  it('gives specimens that come at the same time different marks', async () => {
    const sample = await lab.sample();
    const marks = (await Promise.all([log(sample.id, { count: 2 }), log(sample.id, { count: 2 })])).flat().map((s) => s.mark);
    expect(marks.sort()).toEqual(['S1-01', 'S1-02', 'S1-03', 'S1-04']);
  });

  it('keeps a script in a mark as text', async () => {
    const sample = await lab.sample();
    expect((await log(sample.id, { mark: '<script>alert(1)</script>' }))[0]?.mark).toBe('<script>alert(1)</script>');
  });

  it('refuses a mark that the sample has', async () => {
    const sample = await lab.sample();
    await log(sample.id, { mark: 'A' });
    const answer = await lab.technician.post(`/api/samples/${sample.id}/specimens`, { shape: 'cube', mark: 'A' }).expect(409);
    expect(answer.body as Problem).toMatchObject({ code: 'specimen.mark-taken', errors: [{ path: 'mark' }] });
  });

  it.each([
    { what: 'a shape nobody knows', change: { shape: 'sphere' }, path: 'shape' },
    { what: 'a thousand at once', change: { count: 1000 }, path: 'count' },
    { what: 'one mark for two', change: { mark: 'A', count: 2 }, path: 'mark' },
    { what: 'a moisture state nobody knows', change: { moisture: 'soggy' }, path: 'moisture' },
  ])('refuses $what at $path', async ({ change, path }) => {
    const sample = await lab.sample();
    const answer = await lab.technician.post(`/api/samples/${sample.id}/specimens`, { shape: 'cube', ...change }).expect(422);
    expect((answer.body as Problem).errors?.map((e) => e.path)).toContain(path);
  });

  it('answers 404 for a sample that is not there, 409 when the order was cancelled, 403 to a reviewer', async () => {
    await lab.technician.post(`/api/samples/${newId()}/specimens`, { shape: 'cube' }).expect(404);
    const sample = await lab.sample();
    await lab.reviewer.post(`/api/samples/${sample.id}/specimens`, { shape: 'cube' }).expect(403);
    await lab.qualityManager.post(`/api/orders/${sample.orderId}/cancel`, { reason: 'The customer withdrew' }).expect(200);
    await lab.technician.post(`/api/samples/${sample.id}/specimens`, { shape: 'cube' }).expect(409);
  });
});

describe('SpecimensService.list', () => {
  it('filters by order and sample, searches and pages', async () => {
    const sample = await lab.sample({ material: 'gneiss, banded' });
    await log(sample.id, { count: 3 });
    const list = async (query: string) => (await lab.analyst.get(`/api/specimens?${query}`).expect(200)).body as { items: SpecimenSummary[]; total: number };
    expect(await list(`orderId=${sample.orderId}&sort=-mark&pageSize=1`)).toMatchObject({ total: 3, items: [{ mark: 'S1-03' }] });
    expect((await list(`sampleId=${sample.id}`)).total).toBe(3);
    expect((await list(`sampleId=${newId()}`)).total).toBe(0);
    expect((await list('q=gneiss')).total).toBe(3);
    const { body } = await lab.analyst.get(`/api/samples/${sample.id}/specimens`).expect(200);
    expect((body as { items: SpecimenSummary[] }).items.map((s) => s.mark)).toEqual(['S1-01', 'S1-02', 'S1-03']);
    await lab.analyst.get('/api/specimens?sort=passwordHash').expect(400);
    await lab.customer.get('/api/specimens').expect(403);
  });
});

describe('SpecimensService.one', () => {
  it('tells a specimen with readings, measurement, runs, fits and determinations', async () => {
    const work = finishedWork(lab);
    const { id } = await lab.specimen({ orientation: 'along the axis', moisture: 'oven dry', notes: 'A chip at the edge' });
    await lab.technician.post(`/api/specimens/${id}/readings`, lab.cylinderReadings()).expect(201);
    const runId = await work.run(id);
    const [first, second] = [await work.fit(runId, 1), await work.fit(runId, 2)];
    await work.adopt(runId, first);
    await work.adopt(runId, second);
    const determinationId = await work.determination(id, 'draft');
    const specimen = (await lab.reviewer.get(`/api/specimens/${id}`).expect(200)).body as Specimen;
    expect(specimen).toMatchObject({
      orientation: 'along the axis', moisture: 'oven dry', notes: 'A chip at the edge', readingCount: 7, runCount: 1,
      runs: [{ id: runId, number: 1, methodName: 'Pulse test', fits: [{ number: 1, adopted: false }, { number: 2, adopted: true }] }],
      determinations: [{ id: determinationId, basis: 'dynamic', state: 'draft' }],
    });
    expect(specimen.readings).toHaveLength(7);
    expect(specimen.measurement.volume?.value).toBeCloseTo((Math.PI / 4) * 0.025 ** 2 * 0.05, 9);
  });

  it('says what is missing before anything was read', async () => {
    const { id } = await lab.specimen();
    const { measurement } = (await lab.technician.get(`/api/specimens/${id}`).expect(200)).body as Specimen;
    expect(measurement).toMatchObject({ statistics: [], density: null, findings: [expect.objectContaining({ code: 'READINGS_MISSING' })] });
  });

  it('uses the calibration that was in force on the day of each reading, also across a recalibration', async () => {
    const { id } = await lab.specimen();
    const caliper = await lab.instrument('Caliper R', 'caliper', { unit: 'mm', resolution: 0.01, expandedUncertainty: 0.02, correction: 0.1 });
    const reading = { quantity: 'length', station: 1, value: 50, unit: 'mm', instrumentId: caliper };
    await lab.technician.post(`/api/specimens/${id}/readings`, [reading]).expect(201);
    lab.app.clock.set('2025-06-02T09:05:00Z');
    await lab.app.database.db.insert(readings).values({ id: newId(), specimenId: id, quantity: 'length', station: 2, value: 0.05, typedValue: 50, unit: 'mm', instrumentId: caliper, personId: lab.technician.id, readAt: new Date('2025-01-20T09:00:00Z') });
    await lab.qualityManager.post(`/api/instruments/${caliper}/calibrations`, { calibratedOn: '2025-03-01', dueOn: '2026-03-01', certificate: 'R2', laboratory: 'L', relative: false, expandedUncertainty: 0.02, coverageFactor: 2, correction: 0.3 }).expect(201);
    lab.app.clock.set(NOW);
    const { measurement } = (await lab.technician.get(`/api/specimens/${id}`).expect(200)).body as Specimen;
    const [length] = measurement.statistics;
    // Two calibrations, each with half the weight: u = ½ √(2) · 0.01 mm, beside δ/√12 of the resolution; the two readings are alike.
    expect(length?.standardUncertainty).toBeCloseTo(Math.hypot(0.5e-5, 0.5e-5, 1e-5 / Math.sqrt(12)), 10);
    expect(measurement.findings.map((f) => f.code)).not.toContain('OUT_OF_CALIBRATION');
  });

  it('tells three thousand readings and their mean', async () => {
    const { id } = await lab.specimen();
    const rows = Array.from({ length: 3000 }, (_, i) => ({ id: newId(), specimenId: id, quantity: 'length' as const, station: (i % 99) + 1, value: 0.05 + (i % 7) * 1e-6, typedValue: 50, unit: 'mm', instrumentId: lab.caliper, personId: lab.technician.id, readAt: new Date(NOW) }));
    for (let from = 0; from < rows.length; from += 500) await lab.app.database.db.insert(readings).values(rows.slice(from, from + 500));
    const { readings: all, measurement } = (await lab.technician.get(`/api/specimens/${id}`).expect(200)).body as Specimen;
    expect(all).toHaveLength(3000);
    const mean = rows.reduce((sum, row) => sum + row.value, 0) / rows.length;
    expect(measurement.statistics[0]).toMatchObject({ n: 3000, mean: expect.closeTo(mean, 12) });
  });

  it('answers 404 where there is none', async () => {
    await lab.technician.get(`/api/specimens/${newId()}`).expect(404);
  });
});
