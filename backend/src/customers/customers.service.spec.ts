import type { Customer } from '@strainwright/common/contract/people';
import type { Problem } from '@strainwright/common/contract/wire';
import { newId } from '../platform/ids';
import { testLaboratory, type TestLaboratory } from '../testing/laboratory';

let lab: TestLaboratory;
beforeAll(async () => {
  lab = await testLaboratory();
}, 60_000);
afterAll(() => lab.app.close());

const body = { name: 'Glen Aggregates', address: '3 Pit Road', contactEmail: 'Office@Glen.example' };
const add = async (change: object = {}) => (await lab.administrator.post('/api/customers', { ...body, ...change }).expect(201)).body as Customer;

describe('CustomersService.add', () => {
  it('keeps the address in lower case and a formula in the name as text', async () => {
    expect(await add()).toMatchObject({ name: 'Glen Aggregates', contactEmail: 'office@glen.example', version: 1 });
    expect((await add({ name: '=1+2' })).name).toBe('=1+2');
  });

  it('refuses a name that another has', async () => {
    const answer = await lab.administrator.post('/api/customers', { ...body, name: 'Tarn Quarries' }).expect(409);
    expect(answer.body as Problem).toMatchObject({ code: 'customer.name-taken', errors: [{ path: 'name' }] });
  });

  it.each([
    { what: 'no name', change: { name: ' ' }, path: 'name' },
    { what: 'no address', change: { address: '' }, path: 'address' },
    { what: 'an e-mail address that is none', change: { contactEmail: 'nobody' }, path: 'contactEmail' },
    { what: 'an id of its own', change: { id: newId() }, path: 'id' },
  ])('refuses $what at $path', async ({ change, path }) => {
    const answer = await lab.administrator.post('/api/customers', { ...body, ...change }).expect(422);
    expect((answer.body as Problem).errors?.map((e) => e.path)).toContain(path);
  });

  it('is the administrator’s alone', async () => {
    await lab.qualityManager.post('/api/customers', body).expect(403);
    await lab.customer.get('/api/customers').expect(403);
  });
});

describe('CustomersService.change', () => {
  it('changes what is given and counts the version', async () => {
    const { id, version } = await add({ name: 'Before' });
    const changed = (await lab.administrator.patch(`/api/customers/${id}`, { name: 'After', version }).expect(200)).body as Customer;
    expect(changed).toEqual({ id, name: 'After', address: body.address, contactEmail: 'office@glen.example', version: version + 1 });
    expect((await lab.technician.get(`/api/customers/${id}`).expect(200)).body).toEqual(changed);
  });

  it('refuses a stale version and tells what there is now', async () => {
    const { id, version } = await add({ name: 'Twice' });
    await lab.administrator.patch(`/api/customers/${id}`, { name: 'First', version }).expect(200);
    const answer = await lab.administrator.patch(`/api/customers/${id}`, { name: 'Second', version }).expect(409);
    expect(answer.body as Problem).toMatchObject({ code: 'version.stale', current: { name: 'First', version: version + 1 } });
  });

  it('answers 404 where there is none', async () => {
    await lab.administrator.patch(`/api/customers/${newId()}`, { name: 'Nobody', version: 1 }).expect(404);
    await lab.administrator.get(`/api/customers/${newId()}`).expect(404);
  });
});

describe('CustomersService.list', () => {
  it('searches and sorts', async () => {
    for (const name of ['Zinc b', 'Zinc a']) await add({ name });
    const { items, total } = (await lab.reviewer.get('/api/customers?q=zinc&sort=name').expect(200)).body as { items: Customer[]; total: number };
    expect(items.map((c) => c.name)).toEqual(['Zinc a', 'Zinc b']);
    expect(total).toBe(2);
    await lab.reviewer.get('/api/customers?state=open').expect(400);
  });
});
