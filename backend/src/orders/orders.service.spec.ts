import type { Order, OrderSummary } from '@strainwright/common/contract/orders';
import { ORDER_STATES, ORDER_STEPS } from '@strainwright/common/contract/states';
import type { Problem } from '@strainwright/common/contract/wire';
import { eq } from 'drizzle-orm';
import { orders } from '../database/schema/orders';
import { recordEntries } from '../database/schema/record';
import { newId } from '../platform/ids';
import { finishedWork } from '../testing/finished-work';
import { NOW, orderBody, testLaboratory, type TestLaboratory } from '../testing/laboratory';

let lab: TestLaboratory;
beforeAll(async () => {
  lab = await testLaboratory();
}, 60_000);
afterAll(() => lab.app.close());
beforeEach(() => lab.app.clock.set(NOW));

const get = async (path: string, by = lab.technician) => (await by.get(path).expect(200)).body as Order;
const list = async (query: string, by = lab.technician) => (await by.get(`/api/orders${query}`).expect(200)).body as { items: OrderSummary[]; total: number };

describe('OrdersService.request', () => {
  it('numbers orders within the year of the laboratory, starting anew each year', async () => {
    const first = await lab.order('requested');
    const second = await lab.order('requested');
    expect(first.number).toMatch(/^2025-\d{4}$/);
    expect(Number(second.number.slice(5))).toBe(Number(first.number.slice(5)) + 1);
    const { timeZone: _, ...laboratory } = (await lab.administrator.get('/api/laboratory').expect(200)).body as { timeZone: string };
    await lab.administrator.patch('/api/laboratory', { ...laboratory, timeZone: 'Pacific/Auckland' }).expect(200);
    // 11:30 UTC on New Year's Eve is already January there.
    lab.app.clock.set('2025-12-31T11:30:00Z');
    // Access tokens of June have run out by then.
    const manager = await lab.app.person('quality manager');
    const { body } = await manager.post('/api/orders', { ...orderBody, customerId: lab.customerId }).expect(201);
    expect((body as Order).number).toBe('2026-0001');
  });

  it('is the customer’s own when a customer asks, and on behalf of one when the quality manager does', async () => {
    expect((await lab.order('requested')).customerName).toBe('Tarn Quarries');
    const { body } = await lab.qualityManager.post('/api/orders', { ...orderBody, customerId: lab.otherCustomerId }).expect(201);
    expect(body as Order).toMatchObject({ customerName: 'Elm Castings', state: 'requested', requestedBy: lab.qualityManager.name });
  });

  it('refuses a customer who asks in another’s name, and stores nothing', async () => {
    const before = (await list('')).total;
    const { body } = await lab.customer.post('/api/orders', { ...orderBody, customerId: lab.otherCustomerId }).expect(403);
    expect((body as Problem).errors?.[0]?.path).toBe('customerId');
    expect((await list('')).total).toBe(before);
  });

  it.each([
    { what: 'no customer', change: {}, path: 'customerId' },
    { what: 'a customer that is not there', change: { customerId: newId() }, path: 'customerId' },
    { what: 'no constant wanted', change: { constantsWanted: [] }, path: 'constantsWanted' },
    { what: 'no kind of test', change: { kindsOfRun: [] }, path: 'kindsOfRun' },
    { what: 'a title of blanks', change: { title: '   ' }, path: 'title' },
    { what: 'a title of 10 000 characters', change: { title: 'M'.repeat(10_000) }, path: 'title' },
    { what: 'a title with a line break', change: { title: 'A\nB' }, path: 'title' },
    { what: 'a day that is none', change: { dueOn: '2026-02-31' }, path: 'dueOn' },
    { what: 'a limit that limits nothing', change: { limits: [{ constant: 'E', lower: null, upper: null, rule: 'simple' }] }, path: 'limits.0.lower' },
    { what: 'limits the wrong way round', change: { limits: [{ constant: 'E', lower: 2e9, upper: 1e9, rule: 'simple' }] }, path: 'limits.0.upper' },
    { what: 'a state of its own choosing', change: { state: 'closed' }, path: 'state' },
  ])('refuses $what at $path', async ({ change, path }) => {
    const { body } = await lab.qualityManager.post('/api/orders', { ...orderBody, ...change }).expect(422);
    expect((body as Problem).errors?.map((e) => e.path)).toContain(path);
  });
});

describe('OrdersService.list', () => {
  it('shows a customer their own orders only, whatever is asked for', async () => {
    await lab.order('requested');
    await lab.qualityManager.post('/api/orders', { ...orderBody, title: 'Castings', customerId: lab.otherCustomerId }).expect(201);
    const own = await list('?pageSize=200', lab.otherCustomer);
    expect(own.items.map((o) => o.customerName)).toEqual(own.items.map(() => 'Elm Castings'));
    expect(own.total).toBe(own.items.length);
    expect(await list(`?customerId=${lab.customerId}`, lab.otherCustomer)).toEqual({ items: [], total: 0 });
  });

  it('searches, filters, sorts and pages on the server', async () => {
    for (const title of ['Basalt b', 'Basalt a', 'Basalt c']) await lab.order('requested', { title });
    const sorted = await list('?q=basalt&sort=-title&pageSize=2');
    expect(sorted.items.map((o) => o.title)).toEqual(['Basalt c', 'Basalt b']);
    expect(sorted.total).toBe(3);
    expect((await list('?q=basalt&sort=-title&pageSize=2&page=1')).items.map((o) => o.title)).toEqual(['Basalt a']);
    expect((await list('?q=basalt&state=open')).total).toBe(0);
    expect((await list('?q=%25')).total).toBe(0);
  });

  it.each([
    { query: 'sort=passwordHash', path: 'sort' },
    { query: 'sort=constructor', path: 'sort' },
    { query: 'state=lost', path: 'state' },
    { query: 'pageSize=1000000', path: 'pageSize' },
    { query: 'page=-1', path: 'page' },
    { query: 'colour=blue', path: 'colour' },
    { query: 'customerId=7', path: 'customerId' },
  ])('refuses ?$query at $path', async ({ query, path }) => {
    const { body } = await lab.technician.get(`/api/orders?${query}`).expect(400);
    expect((body as Problem).errors?.map((e) => e.path)).toContain(path);
  });
});

describe('OrdersService.one', () => {
  it('answers another customer’s order like none at all', async () => {
    const order = await lab.order('requested');
    expect(((await lab.otherCustomer.get(`/api/orders/${order.id}`).expect(404)).body as Problem).code).toBe('order.not-found');
    await lab.customer.get(`/api/orders/${order.id}`).expect(200);
    await lab.technician.get(`/api/orders/${newId()}`).expect(404);
    await lab.technician.get('/api/orders/7').expect(404);
  });

  it('tells the laboratory how far each specimen is', async () => {
    const work = finishedWork(lab);
    const { id, orderId } = await lab.specimen();
    expect((await get(`/api/orders/${orderId}`)).specimens).toEqual([expect.objectContaining({ measured: false, tested: [], fitted: [], determinations: [], constants: [] })]);
    await lab.technician.post(`/api/specimens/${id}/readings`, lab.cylinderReadings()).expect(201);
    await work.fit(await work.run(id));
    const determinationId = await work.determination(id, 'accepted');
    expect((await get(`/api/orders/${orderId}`)).specimens).toEqual([
      expect.objectContaining({
        id, measured: true, tested: ['pulse'], fitted: ['dynamic'], determinations: [{ id: determinationId, basis: 'dynamic', state: 'accepted' }],
        constants: [expect.objectContaining({ basis: 'dynamic', E: expect.objectContaining({ value: 70e9, expandedUncertainty: 1e9 }), G: null })],
      }),
    ]);
  });

  it('shows a customer constants once they stand on a released certificate, never a draft or a determination', async () => {
    const work = finishedWork(lab);
    const { id, orderId } = await lab.specimen();
    const determinationId = await work.determination(id, 'accepted');
    await work.certificate(orderId, 'C-2025-0901', 'draft', [determinationId]);
    const before = await get(`/api/orders/${orderId}`, lab.customer);
    expect(before).toMatchObject({ certificates: [], specimens: [{ determinations: [], constants: [] }] });
    await work.certificate(orderId, 'C-2025-0902', 'released', [determinationId]);
    const after = await get(`/api/orders/${orderId}`, lab.customer);
    expect(after.certificates.map((c) => c.number)).toEqual(['C-2025-0902']);
    expect(after.specimens[0]).toMatchObject({ determinations: [], constants: [{ basis: 'dynamic', nu: { value: 0.33 } }] });
    expect((await get(`/api/orders/${orderId}`)).certificates.map((c) => c.number)).toEqual(['C-2025-0901', 'C-2025-0902']);
  });
});

describe('OrdersService.step', () => {
  const roleFor = { open: () => lab.technician, close: () => lab.qualityManager, cancel: () => lab.qualityManager };
  const cases = (['open', 'close', 'cancel'] as const).flatMap((step) => ORDER_STATES.map((state) => ({ step, state, allowed: (ORDER_STEPS[step].from as readonly string[]).includes(state) })));

  it.each(cases)('$step of an order that is $state: allowed $allowed', async ({ step, state, allowed }) => {
    const { id } = await lab.order('requested');
    await lab.app.database.db.update(orders).set({ state }).where(eq(orders.id, id));
    const answer = await roleFor[step]().post(`/api/orders/${id}/${step}`, step === 'cancel' ? { reason: 'The customer withdrew' } : {});
    expect(answer.status).toBe(allowed ? 200 : 409);
    if (!allowed) expect((answer.body as Problem).code).toBe('order.wrong-state');
    expect((await get(`/api/orders/${id}`)).state).toBe(allowed ? ORDER_STEPS[step].to : state);
    const entries = await lab.app.database.db.select().from(recordEntries).where(eq(recordEntries.nounId, id));
    expect(entries).toHaveLength(allowed ? 2 : 1);
  });

  it('opens without a body, and refuses a version that is stale, telling what there is', async () => {
    const { id, version } = await lab.order('requested');
    const { body } = await lab.technician.post(`/api/orders/${id}/open`, { version: version - 1 }).expect(409);
    expect(body as Problem).toMatchObject({ code: 'version.stale', current: { id, version } });
    expect((await lab.technician.post(`/api/orders/${id}/open`).expect(200)).body as Order).toMatchObject({ state: 'open', version: version + 1 });
  });

  it('is opened once when two people open it at the same time', async () => {
    const { id } = await lab.order('requested');
    const answers = await Promise.all([lab.technician, lab.analyst].map((p) => p.post(`/api/orders/${id}/open`)));
    expect(answers.map((a) => a.status).sort()).toEqual([200, 409]);
  });

  it('needs a reason to cancel', async () => {
    const { id } = await lab.order('requested');
    const { body } = await lab.qualityManager.post(`/api/orders/${id}/cancel`, {}).expect(422);
    expect((body as Problem).errors?.map((e) => e.path)).toEqual(['reason']);
  });

  it.each([
    { who: 'a customer', by: () => lab.customer, step: 'open' },
    { who: 'a reviewer', by: () => lab.reviewer, step: 'open' },
    { who: 'a technician', by: () => lab.technician, step: 'close' },
    { who: 'an analyst', by: () => lab.analyst, step: 'cancel' },
  ])('forbids $who to $step', async ({ by, step }) => {
    const { id } = await lab.order('requested');
    await by().post(`/api/orders/${id}/${step}`, {}).expect(403);
  });
});
