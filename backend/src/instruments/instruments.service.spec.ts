import type { Instrument } from '@strainwright/common/contract/instruments';
import type { Problem } from '@strainwright/common/contract/wire';
import { eq } from 'drizzle-orm';
import { calibrations, instruments } from '../database/schema/instruments';
import { newId } from '../platform/ids';
import { testLaboratory, type TestLaboratory } from '../testing/laboratory';
import { instrumentStates } from './instrument-state';

let lab: TestLaboratory;
beforeAll(async () => {
  lab = await testLaboratory();
}, 60_000);
afterAll(() => lab.app.close());

const body = { name: 'Micrometer 7', kind: 'micrometer', serial: '7', unit: 'mm', resolution: 0.001, rangeLow: 0, rangeHigh: 25 };
const calibration = { calibratedOn: '2025-02-01', dueOn: '2026-02-01', certificate: 'C1', laboratory: 'L', relative: false, expandedUncertainty: 0.002, coverageFactor: 2, correction: -0.001 };
const add = async (name: string, change: object = {}) => (await lab.qualityManager.post('/api/instruments', { ...body, name, ...change }).expect(201)).body as Instrument;
const calibrate = async (id: string, change: object = {}) => (await lab.qualityManager.post(`/api/instruments/${id}/calibrations`, { ...calibration, ...change }).expect(201)).body as Instrument;
const row = async (id: string) => (await lab.app.database.db.select().from(instruments).where(eq(instruments.id, id)))[0];

describe('InstrumentsService.add', () => {
  it('stores SI and shows the instrument’s own unit', async () => {
    const made = await add('Micrometer A');
    expect(made).toMatchObject({ resolution: 0.001, rangeHigh: 25, unit: 'mm', calibrationState: 'never calibrated', dueOn: null, inService: true });
    expect(await row(made.id)).toMatchObject({ resolution: 1e-6, rangeLow: 0, rangeHigh: 0.025 });
  });

  it('turns a temperature’s range with its zero, and its resolution without', async () => {
    const made = await add('Thermometer A', { kind: 'thermometer', unit: '°C', resolution: 0.1, rangeLow: -10, rangeHigh: 110 });
    expect(await row(made.id)).toMatchObject({ resolution: 0.1, rangeLow: 263.15, rangeHigh: 383.15 });
    expect(made).toMatchObject({ resolution: 0.1, rangeLow: -10, rangeHigh: 110 });
  });

  it.each([
    { what: 'a unit nobody knows', change: { unit: 'cubit' }, path: 'unit' },
    { what: 'a mass unit for a micrometer', change: { unit: 'g' }, path: 'unit' },
    { what: 'a range the wrong way round', change: { rangeLow: 30 }, path: 'rangeHigh' },
    { what: 'a negative resolution', change: { resolution: -1 }, path: 'resolution' },
    { what: 'a kind nobody knows', change: { kind: 'ruler' }, path: 'kind' },
    { what: 'no serial number', change: { serial: '' }, path: 'serial' },
  ])('refuses $what at $path', async ({ change, path }) => {
    const answer = await lab.qualityManager.post('/api/instruments', { ...body, ...change }).expect(422);
    expect((answer.body as Problem).errors?.map((e) => e.path)).toContain(path);
  });

  it('refuses a name that another has, and those who may not', async () => {
    const answer = await lab.qualityManager.post('/api/instruments', { ...body, name: 'Caliper 1' }).expect(409);
    expect(answer.body as Problem).toMatchObject({ code: 'instrument.name-taken', errors: [{ path: 'name' }] });
    await lab.technician.post('/api/instruments', body).expect(403);
    await lab.customer.get('/api/instruments').expect(403);
  });
});

describe('InstrumentsService.calibrate', () => {
  it('turns absolute figures into SI and leaves fractions as they are', async () => {
    const absolute = await calibrate((await add('Micrometer B')).id);
    expect(absolute.calibrations).toEqual([expect.objectContaining({ expandedUncertainty: 2e-6, correction: -1e-6, enteredBy: lab.qualityManager.name })]);
    expect(absolute).toMatchObject({ dueOn: '2026-02-01', calibrationState: 'in calibration' });
    const relative = await calibrate((await add('Load cell B', { kind: 'load cell', unit: 'kN' })).id, { relative: true, expandedUncertainty: 0.005, correction: 0.001 });
    expect(relative.calibrations[0]).toMatchObject({ relative: true, expandedUncertainty: 0.005, correction: 0.001 });
  });

  it.each([
    { what: 'a day in the future', change: { calibratedOn: '2025-06-03' }, path: 'calibratedOn' },
    { what: 'a due date before the calibration', change: { dueOn: '2025-01-31' }, path: 'dueOn' },
    { what: 'a fraction above one', change: { relative: true, expandedUncertainty: 5 }, path: 'expandedUncertainty' },
    { what: 'a correction larger than the reading', change: { relative: true, expandedUncertainty: 0.01, correction: -2 }, path: 'correction' },
    { what: 'no uncertainty', change: { expandedUncertainty: 0 }, path: 'expandedUncertainty' },
  ])('refuses $what at $path', async ({ change, path }) => {
    const answer = await lab.qualityManager.post(`/api/instruments/${lab.caliper}/calibrations`, { ...calibration, ...change }).expect(422);
    expect((answer.body as Problem).errors?.map((e) => e.path)).toContain(path);
  });

  it('adds, and never changes, calibrations', async () => {
    const { id } = await add('Micrometer C');
    await calibrate(id);
    await expect(lab.app.database.db.update(calibrations).set({ dueOn: '2030-01-01' }).where(eq(calibrations.instrumentId, id))).rejects.toMatchObject({ cause: { message: expect.stringContaining('insert-only') } });
    await lab.qualityManager.post(`/api/instruments/${newId()}/calibrations`, calibration).expect(404);
  });
});

describe('InstrumentsService.change', () => {
  it('refuses a stale version', async () => {
    const { id, version } = await add('Micrometer D');
    const change = { name: 'Micrometer D', location: 'Bench 2', inService: false, version };
    expect((await lab.qualityManager.patch(`/api/instruments/${id}`, change).expect(200)).body as Instrument).toMatchObject({ location: 'Bench 2', inService: false, version: version + 1 });
    const answer = await lab.qualityManager.patch(`/api/instruments/${id}`, change).expect(409);
    expect(answer.body as Problem).toMatchObject({ code: 'version.stale', current: { version: version + 1 } });
  });
});

describe('InstrumentsService.list', () => {
  it('tells each state on the laboratory’s day, and filters by it', async () => {
    const due = { 'Z lapsed': '2025-06-01', 'Z soon': '2025-07-02', 'Z fine': '2025-07-03' };
    for (const [name, dueOn] of Object.entries(due)) await calibrate((await add(name)).id, { dueOn });
    await add('Z new');
    const list = async (query: string) => ((await lab.technician.get(`/api/instruments?q=Z%20&${query}`).expect(200)).body as { items: Instrument[] }).items.map((i) => [i.name, i.calibrationState]);
    expect(await list('sort=name')).toEqual([['Z fine', 'in calibration'], ['Z lapsed', 'lapsed'], ['Z new', 'never calibrated'], ['Z soon', 'due soon']]);
    for (const state of ['in calibration', 'due soon', 'lapsed', 'never calibrated']) expect(await list(`state=${encodeURIComponent(state)}`)).toEqual([[expect.any(String), state]]);
    expect((await list('sort=dueOn')).map(([name]) => name)).toEqual(['Z lapsed', 'Z soon', 'Z fine', 'Z new']);
    expect(await list('kind=balance')).toEqual([]);
    await lab.technician.get('/api/instruments?state=broken').expect(400);
  });
});

describe('instrumentStates', () => {
  it('gives the calibration in force on the day asked about', async () => {
    const { id } = await add('Micrometer E');
    await calibrate(id, { calibratedOn: '2024-01-01', dueOn: '2025-01-01', correction: 0.001 });
    await calibrate(id, { calibratedOn: '2025-02-01', dueOn: '2026-02-01', correction: 0.002 });
    const on = async (day: string) => (await instrumentStates(lab.app.database.db, [id, newId()], day)).get(id)?.calibration?.correction ?? null;
    expect([await on('2023-12-31'), await on('2024-01-01'), await on('2025-01-31'), await on('2025-02-01')]).toEqual([null, 1e-6, 1e-6, 2e-6]);
  });
});
