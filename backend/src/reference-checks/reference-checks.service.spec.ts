import type { ReferencePiece } from '@strainwright/common/contract/instruments';
import type { Problem } from '@strainwright/common/contract/wire';
import { newId } from '../platform/ids';
import { testLaboratory, type TestLaboratory } from '../testing/laboratory';
import { referenceCheckFindings } from './reference-check-findings';

let lab: TestLaboratory;
let pulseUnit: string;
beforeAll(async () => {
  lab = await testLaboratory();
  pulseUnit = await lab.instrument('Pulse unit 1', 'pulse unit', { unit: 'µs', resolution: 0.01, expandedUncertainty: 0.02 });
}, 60_000);
afterAll(() => lab.app.close());

const piece = (name: string, change: object = {}) => ({ name, quantity: 'transit time P', knownValue: 8.5, knownExpandedUncertainty: 0.03, unit: 'µs', instrumentId: pulseUnit, ...change });
const check = { value: 8.52, unit: 'µs', expandedUncertainty: 0.04, checkedAt: '2025-05-01T09:00:00.000Z' };
const add = async (name: string) => (await lab.qualityManager.post('/api/reference-pieces', piece(name)).expect(201)).body as ReferencePiece;
const enter = async (id: string, value: number, checkedAt: string) =>
  (await lab.qualityManager.post(`/api/reference-pieces/${id}/checks`, { ...check, value, checkedAt }).expect(201)).body as ReferencePiece;

describe('ReferenceChecksService', () => {
  it('judges a check by E_n against the known value', async () => {
    const bar = await add('Bar A');
    expect(bar).toMatchObject({ knownValue: 8.5, unit: 'µs', instrumentName: 'Pulse unit 1', checks: [], withinLimits: true });
    // By hand: 0.02/√(0.03² + 0.04²) = 0.4 and 0.06/0.05 = 1.2.
    const good = await enter(bar.id, 8.52, '2025-05-01T09:00:00.000Z');
    expect(good).toMatchObject({ withinLimits: true, checks: [{ value: 8.52, en: expect.closeTo(0.4, 9), withinLimits: true }] });
    const bad = await enter(bar.id, 8.56, '2025-05-20T09:00:00.000Z');
    expect(bad).toMatchObject({ withinLimits: false, checks: [{ en: expect.closeTo(0.4, 9) }, { en: expect.closeTo(1.2, 9), withinLimits: false }] });
    expect((await lab.reviewer.get(`/api/reference-pieces/${bar.id}`).expect(200)).body).toEqual(bad);
    expect(((await lab.reviewer.get('/api/reference-pieces?q=Bar%20A').expect(200)).body as { items: ReferencePiece[] }).items).toEqual([bad]);
  });

  it('takes a check in another unit of the same kind', async () => {
    const bar = await add('Bar B');
    const { body } = await lab.qualityManager.post(`/api/reference-pieces/${bar.id}/checks`, { ...check, value: 8520, expandedUncertainty: 40, unit: 'ns' }).expect(201);
    expect((body as ReferencePiece).checks[0]).toMatchObject({ value: 8.52, en: expect.closeTo(0.4, 9) });
  });

  it.each([
    { what: 'a length for a transit time', body: () => piece('C', { unit: 'mm' }), path: 'unit' },
    { what: 'an instrument that is not there', body: () => piece('C', { instrumentId: newId() }), path: 'instrumentId' },
    { what: 'a known value of zero', body: () => piece('C', { knownValue: 0 }), path: 'knownValue' },
  ])('refuses a piece with $what at $path', async ({ body, path }) => {
    const answer = await lab.qualityManager.post('/api/reference-pieces', body()).expect(422);
    expect((answer.body as Problem).errors?.map((e) => e.path)).toEqual([path]);
  });

  it.each([
    { what: 'in the future', change: { checkedAt: '2025-06-03T00:00:00.000Z' }, path: 'checkedAt' },
    { what: 'without uncertainty', change: { expandedUncertainty: 0 }, path: 'expandedUncertainty' },
    { what: 'in a pressure unit', change: { unit: 'MPa' }, path: 'unit' },
  ])('refuses a check $what at $path', async ({ what, change, path }) => {
    const bar = await add(`Bar ${what}`);
    const answer = await lab.qualityManager.post(`/api/reference-pieces/${bar.id}/checks`, { ...check, ...change }).expect(422);
    expect((answer.body as Problem).errors?.map((e) => e.path)).toEqual([path]);
  });

  it('refuses a name that is taken, and those who may not', async () => {
    await add('Bar D');
    expect((await lab.qualityManager.post('/api/reference-pieces', piece('Bar D')).expect(409)).body as Problem).toMatchObject({ code: 'reference-piece.name-taken', errors: [{ path: 'name' }] });
    await lab.technician.post('/api/reference-pieces', piece('Bar E')).expect(403);
    await lab.customer.get('/api/reference-pieces').expect(403);
    await lab.qualityManager.post(`/api/reference-pieces/${newId()}/checks`, check).expect(404);
  });
});

describe('referenceCheckFindings', () => {
  it('doubts every use since the last good check, before or after the bad one', async () => {
    const other = await lab.instrument('Pulse unit 2', 'pulse unit', { unit: 'µs', resolution: 0.01, expandedUncertainty: 0.02 });
    const bar = (await lab.qualityManager.post('/api/reference-pieces', piece('Bar F', { instrumentId: other })).expect(201)).body as ReferencePiece;
    await enter(bar.id, 8.5, '2025-03-01T09:00:00.000Z');
    await enter(bar.id, 8.51, '2025-04-01T09:00:00.000Z');
    await enter(bar.id, 8.6, '2025-05-01T09:00:00.000Z');
    await enter(bar.id, 8.5, '2025-05-10T09:00:00.000Z');
    const on = async (day: string) => (await referenceCheckFindings(lab.app.database.db, [other], new Date(`${day}T12:00:00Z`))).map((f) => f.seen);
    expect(await on('2025-03-15')).toEqual([]);
    expect(await on('2025-04-15')).toEqual([expect.stringMatching(/Bar F: E_n = 2\.00 on 2025-05-01 \(limit 1\), last good check on 2025-04-01/)]);
    expect(await on('2025-05-05')).toHaveLength(1);
    expect(await on('2025-05-11')).toEqual([]);
    expect(await referenceCheckFindings(lab.app.database.db, [], new Date())).toEqual([]);
  });
});
