import type { Sample } from '@strainwright/common/contract/orders';
import type { Problem } from '@strainwright/common/contract/wire';
import { newId } from '../platform/ids';
import { testLaboratory, type TestLaboratory } from '../testing/laboratory';

let lab: TestLaboratory;
beforeAll(async () => {
  lab = await testLaboratory();
}, 60_000);
afterAll(() => lab.app.close());

const body = { material: 'granite', materialClass: 'rock', receivedOn: '2025-06-01' };
const log = async (orderId: string, change: object = {}) => (await lab.technician.post(`/api/orders/${orderId}/samples`, { ...body, ...change }).expect(201)).body as Sample;

describe('SamplesService.log', () => {
  it('gives the next mark of the order when none is given', async () => {
    const { id } = await lab.order();
    expect([(await log(id)).mark, (await log(id)).mark, (await log(id, { mark: 'S9' })).mark, (await log(id, { mark: 'Core 7' })).mark, (await log(id)).mark]).toEqual(['S1', 'S2', 'S9', 'Core 7', 'S10']);
  });

  it('gives two samples that come at the same time different marks', async () => {
    const { id } = await lab.order();
    const marks = (await Promise.all([log(id), log(id), log(id)])).map((s) => s.mark);
    expect(marks.sort()).toEqual(['S1', 'S2', 'S3']);
  });

  it('refuses a mark that the order has', async () => {
    const { id } = await lab.order();
    await log(id, { mark: 'A' });
    const answer = await lab.technician.post(`/api/orders/${id}/samples`, { ...body, mark: 'A' }).expect(409);
    expect(answer.body as Problem).toMatchObject({ code: 'sample.mark-taken', errors: [{ path: 'mark' }] });
    expect((await log((await lab.order()).id, { mark: 'A' })).mark).toBe('A');
  });

  it('refuses an order that is not open yet', async () => {
    const { id } = await lab.order('requested');
    const answer = await lab.technician.post(`/api/orders/${id}/samples`, body).expect(409);
    expect(answer.body as Problem).toMatchObject({ code: 'order.not-open', detail: expect.stringContaining('Open it first') });
  });

  it.each([
    { what: 'a day of receipt in the future', change: { receivedOn: '2025-06-03' }, path: 'receivedOn' },
    { what: 'a day that is none', change: { receivedOn: '2025-02-30' }, path: 'receivedOn' },
    { what: 'sampling after receipt', change: { sampledOn: '2025-06-02' }, path: 'sampledOn' },
    { what: 'a material class nobody knows', change: { materialClass: 'cheese' }, path: 'materialClass' },
    { what: 'an empty material', change: { material: ' ' }, path: 'material' },
    { what: 'a mark of 10 000 characters', change: { mark: 'M'.repeat(10_000) }, path: 'mark' },
    { what: 'a mark with a line break', change: { mark: 'A\nB' }, path: 'mark' },
    { what: 'a mark with a NUL', change: { mark: 'A\0B' }, path: 'mark' },
  ])('refuses $what at $path', async ({ change, path }) => {
    const { id } = await lab.order();
    const answer = await lab.technician.post(`/api/orders/${id}/samples`, { ...body, ...change }).expect(422);
    expect((answer.body as Problem).errors?.map((e) => e.path)).toContain(path);
    expect((await lab.technician.get(`/api/orders/${id}/samples`).expect(200)).body).toEqual({ items: [], total: 0 });
  });
});

describe('SamplesService.list and one', () => {
  it('tells a sample with its order and specimens', async () => {
    const { id } = await lab.order();
    const sample = await log(id, { sampledBy: 'A drill crew', sampledOn: '2025-05-20' });
    await lab.technician.post(`/api/samples/${sample.id}/specimens`, { shape: 'cube', count: 3 }).expect(201);
    const one = (await lab.reviewer.get(`/api/samples/${sample.id}`).expect(200)).body as Sample;
    expect(one).toEqual({ ...sample, specimenCount: 3 });
    expect((await lab.reviewer.get(`/api/orders/${id}/samples`).expect(200)).body).toEqual({ items: [one], total: 1 });
  });

  it('answers 404 where there is none, and 403 to a customer', async () => {
    await lab.technician.get(`/api/orders/${newId()}/samples`).expect(404);
    await lab.technician.get(`/api/samples/${newId()}`).expect(404);
    await lab.technician.post(`/api/orders/${newId()}/samples`, body).expect(404);
    const { id } = await lab.order();
    await lab.customer.get(`/api/orders/${id}/samples`).expect(403);
  });
});
