import type { readingsAnswer, Specimen } from '@strainwright/common/contract/specimens';
import type { Problem } from '@strainwright/common/contract/wire';
import { eq, sql } from 'drizzle-orm';
import type { z } from 'zod';
import { readings } from '../database/schema/readings';
import { recordEntries } from '../database/schema/record';
import { newId } from '../platform/ids';
import { testLaboratory, type TestLaboratory } from '../testing/laboratory';

type ReadingsAnswer = z.infer<typeof readingsAnswer>;

let lab: TestLaboratory;
beforeAll(async () => {
  lab = await testLaboratory();
}, 60_000);
afterAll(() => lab.app.close());

const stored = (specimenId: string) => lab.app.database.db.select().from(readings).where(eq(readings.specimenId, specimenId));

describe('ReadingsService.enter', () => {
  it('stores SI beside what was typed, and answers with mean and density', async () => {
    const { id } = await lab.specimen();
    const { body } = await lab.technician.post(`/api/specimens/${id}/readings`, lab.cylinderReadings()).expect(201);
    const answer = body as ReadingsAnswer;
    expect(answer.readings).toHaveLength(7);
    expect(answer.readings[0]).toMatchObject({ quantity: 'length', value: 0.05001, typedValue: 50.01, unit: 'mm', instrumentName: 'Caliper 1', supersededBy: null });
    // By hand: 0.066 kg / (π/4 · 0.025² · 0.050 m³) = 2689.08 kg/m³.
    expect(answer.measurement.density?.value).toBeCloseTo(2689.08, 1);
    const length = answer.measurement.statistics.find((s) => s.quantity === 'length');
    expect(length).toMatchObject({ n: 3 });
    // s = 0.01 mm: s/√3 with the caliper's U/k = 0.01 mm and δ/√12 = 0.0029 mm in quadrature.
    expect(length?.standardUncertainty).toBeCloseTo(Math.hypot(1e-5 / Math.sqrt(3), 1e-5, 1e-5 / Math.sqrt(12)), 9);
  });

  it('writes one entry of the record for the burst, in the same transaction', async () => {
    const { id } = await lab.specimen();
    await lab.technician.post(`/api/specimens/${id}/readings`, lab.cylinderReadings()).expect(201);
    const entries = await lab.app.database.db.select().from(recordEntries).where(sql`${recordEntries.nounId} = ${id} and ${recordEntries.action} = 'reading.entered'`);
    expect(entries).toHaveLength(1);
    expect(entries[0]?.details.readings).toHaveLength(7);
    expect(entries[0]?.personName).toBe(lab.technician.name);
  });

  it('stores a burst that comes twice under one key once, and answers both alike', async () => {
    const { id } = await lab.specimen();
    const send = () => lab.technician.post(`/api/specimens/${id}/readings`, lab.cylinderReadings()).set('Idempotency-Key', 'burst-1').expect(201);
    const [first, second] = await Promise.all([send(), send()]);
    expect(await stored(id)).toHaveLength(7);
    expect((second.body as ReadingsAnswer).readings).toEqual((first.body as ReadingsAnswer).readings);
    expect((first.body as ReadingsAnswer).readings).toHaveLength(7);
  });

  it('refuses a key that was given to other readings before', async () => {
    const { id } = await lab.specimen();
    const [one, two] = lab.cylinderReadings();
    await lab.technician.post(`/api/specimens/${id}/readings`, [one ?? {}]).set('Idempotency-Key', 'burst-2').expect(201);
    const { body } = await lab.technician.post(`/api/specimens/${id}/readings`, [two ?? {}]).set('Idempotency-Key', 'burst-2').expect(409);
    expect((body as Problem).code).toBe('request.key-used');
    expect(await stored(id)).toHaveLength(1);
  });

  it('refuses readings once the order is cancelled', async () => {
    const { id, orderId } = await lab.specimen();
    await lab.qualityManager.post(`/api/orders/${orderId}/cancel`, { reason: 'The customer withdrew' }).expect(200);
    const { body } = await lab.technician.post(`/api/specimens/${id}/readings`, lab.cylinderReadings()).expect(409);
    expect((body as Problem).code).toBe('order.not-open');
  });

  it('stores a negative or broken reading nowhere, nor the good ones beside it', async () => {
    const { id } = await lab.specimen();
    const { body } = await lab.technician.post(`/api/specimens/${id}/readings`, [...lab.cylinderReadings(), { quantity: 'length', station: 4, value: -1, unit: 'mm', instrumentId: lab.caliper }]).expect(422);
    expect((body as Problem).errors?.map((e) => e.path)).toEqual(['7.value']);
    expect(await stored(id)).toHaveLength(0);
  });

  const good = () => ({ quantity: 'length', station: 1, value: 50, unit: 'mm', instrumentId: lab.caliper });
  it.each([
    { what: 'a unit nobody knows', change: () => ({ unit: 'furlong' }), path: '0.unit' },
    { what: 'a mass unit for a length', change: () => ({ unit: 'g' }), path: '0.unit' },
    { what: 'a negative length', change: () => ({ value: -50 }), path: '0.value' },
    { what: 'a length of zero', change: () => ({ value: 0 }), path: '0.value' },
    { what: 'a mass of zero, which would be a density of zero', change: () => ({ quantity: 'mass', unit: 'g', value: 0, instrumentId: lab.balance }), path: '0.value' },
    { what: 'a length of a kilometre', change: () => ({ value: 1000, unit: 'm' }), path: '0.value' },
    { what: 'boiling water', change: () => ({ quantity: 'waterTemperature', unit: '°C', value: 99, instrumentId: lab.thermometer }), path: '0.value' },
    { what: 'letters for a number', change: () => ({ value: 'fifty' }), path: '0.value' },
    { what: 'no value', change: () => ({ value: null }), path: '0.value' },
    { what: 'an instrument that is not there', change: () => ({ instrumentId: newId() }), path: '0.instrumentId' },
    { what: 'an instrument id that is none', change: () => ({ instrumentId: 'caliper' }), path: '0.instrumentId' },
    { what: 'a balance for a length', change: () => ({ instrumentId: lab.balance }), path: '0.instrumentId' },
    { what: 'a caliper for a mass', change: () => ({ quantity: 'mass', unit: 'g', instrumentId: lab.caliper }), path: '0.instrumentId' },
    { what: 'a width of a cylinder', change: () => ({ quantity: 'width' }), path: '0.quantity' },
    { what: 'a quantity nobody knows', change: () => ({ quantity: 'girth' }), path: '0.quantity' },
    { what: 'station 0', change: () => ({ station: 0 }), path: '0.station' },
    { what: 'station 1.5', change: () => ({ station: 1.5 }), path: '0.station' },
    { what: 'a field nobody asked for', change: () => ({ colour: 'blue' }), path: '0.colour' },
  ])('refuses $what at $path', async ({ change, path }) => {
    const { id } = await sharedSpecimen();
    const { body } = await lab.technician.post(`/api/specimens/${id}/readings`, [{ ...good(), ...change() }]).expect(422);
    expect((body as Problem).errors?.map((e) => e.path)).toContain(path);
    expect(await stored(id)).toHaveLength(0);
  });

  it('refuses an instrument out of service', async () => {
    const { id } = await sharedSpecimen();
    const old = await lab.instrument('Old caliper', 'caliper', { unit: 'mm', resolution: 0.02, expandedUncertainty: 0.05 });
    await lab.qualityManager.patch(`/api/instruments/${old}`, { name: 'Old caliper', location: 'Cupboard', inService: false, version: 1 }).expect(200);
    const { body } = await lab.technician.post(`/api/specimens/${id}/readings`, [{ ...good(), instrumentId: old }]).expect(422);
    expect((body as Problem).errors).toEqual([{ path: '0.instrumentId', message: 'Old caliper is out of service' }]);
  });

  it('answers 404 for a specimen that is not there, and 403 to those who may not enter readings', async () => {
    await lab.technician.post(`/api/specimens/${newId()}/readings`, lab.cylinderReadings()).expect(404);
    const { id } = await sharedSpecimen();
    await lab.reviewer.post(`/api/specimens/${id}/readings`, lab.cylinderReadings()).expect(403);
    await lab.customer.post(`/api/specimens/${id}/readings`, lab.cylinderReadings()).expect(403);
  });

  let shared: Promise<{ id: string }> | undefined;
  const sharedSpecimen = () => (shared ??= lab.specimen());
});

describe('ReadingsService.correct', () => {
  const correction = () => ({ value: 50.2, unit: 'mm', instrumentId: lab.caliper, reason: 'Read the wrong end of the scale' });
  const entered = async () => {
    const { id } = await lab.specimen();
    const { readings: made } = (await lab.technician.post(`/api/specimens/${id}/readings`, lab.cylinderReadings()).expect(201)).body as ReadingsAnswer;
    return { specimenId: id, wrong: made[0]?.id ?? '' };
  };

  it('adds a reading that takes the place of the wrong one, and keeps both', async () => {
    const { specimenId, wrong } = await entered();
    const answer = (await lab.technician.post(`/api/readings/${wrong}/correct`, correction()).expect(200)).body as ReadingsAnswer;
    expect(answer.readings).toEqual([expect.objectContaining({ supersedes: wrong, value: 0.0502, station: 1, reason: 'Read the wrong end of the scale' })]);
    expect(answer.measurement.statistics.find((s) => s.quantity === 'length')).toMatchObject({ n: 3, mean: expect.closeTo((50.2 + 50 + 49.99) / 3000, 9) });
    const { readings: all } = (await lab.technician.get(`/api/specimens/${specimenId}`).expect(200)).body as Specimen;
    expect(all).toHaveLength(8);
    expect(all.find((r) => r.id === wrong)?.supersededBy).toBe(answer.readings[0]?.id);
  });

  it('corrects a reading once: of two at the same time, the second is refused', async () => {
    const { specimenId, wrong } = await entered();
    const answers = await Promise.all([1, 2].map(() => lab.technician.post(`/api/readings/${wrong}/correct`, correction())));
    expect(answers.map((a) => a.status).sort()).toEqual([200, 409]);
    expect((answers.find((a) => a.status === 409)?.body as Problem).code).toBe('reading.superseded');
    expect(await stored(specimenId)).toHaveLength(8);
  });

  it.each([
    { what: 'no reason', change: { reason: '' }, path: 'reason' },
    { what: 'a value of zero', change: { value: 0 }, path: 'value' },
    { what: 'another quantity’s unit', change: { unit: 'kg' }, path: 'unit' },
  ])('refuses $what at $path', async ({ change, path }) => {
    const { wrong } = await entered();
    const { body } = await lab.technician.post(`/api/readings/${wrong}/correct`, { ...correction(), ...change }).expect(422);
    expect((body as Problem).errors?.map((e) => e.path)).toEqual([path]);
  });

  it('answers 404 for a reading that is not there', async () => {
    await lab.technician.post(`/api/readings/${newId()}/correct`, correction()).expect(404);
  });
});

describe('readings in the database', () => {
  it('cannot be changed or removed, whatever the program does', async () => {
    const { id } = await lab.specimen();
    await lab.technician.post(`/api/specimens/${id}/readings`, lab.cylinderReadings()).expect(201);
    const { db } = lab.app.database;
    await expect(db.update(readings).set({ value: 1 }).where(eq(readings.specimenId, id))).rejects.toMatchObject({ cause: { message: expect.stringContaining('insert-only') } });
    await expect(db.delete(readings).where(eq(readings.specimenId, id))).rejects.toMatchObject({ cause: { message: expect.stringContaining('insert-only') } });
    expect(await stored(id)).toHaveLength(7);
  });
});
