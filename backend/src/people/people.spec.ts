import { eq } from 'drizzle-orm';
import { people } from '../database/schema/people';
import { recordEntries } from '../database/schema/record';
import { testApp, type TestApp, type TestPerson } from '../testing/app';

describe('People', () => {
  let app: TestApp;
  let administrator: TestPerson;
  beforeAll(async () => {
    app = await testApp();
    administrator = await app.person('administrator');
  }, 60_000);
  afterAll(() => app.close());

  const added = { name: 'Ulla Rask', email: 'Ulla.Rask@Lab.Example', roles: ['technician'], customerId: null, password: 'nine quiet pebbles' };
  const entries = (action: string) => app.database.db.select().from(recordEntries).where(eq(recordEntries.action, action));

  it('are added by an administrator, who can then sign in', async () => {
    const { body } = await administrator.post('/api/people', added).expect(201);
    expect(body).toMatchObject({ name: 'Ulla Rask', email: 'ulla.rask@lab.example', roles: ['technician'], active: true, version: 1 });
    expect(JSON.stringify(body)).not.toMatch(/hash|pebbles/);
    await app.nobody.post('/api/session', { email: 'ulla.rask@lab.example', password: added.password }).expect(200);
    expect((await entries('person.added')).map((e) => e.nounId)).toContain(body.id);
    expect(JSON.stringify(await entries('person.added'))).not.toContain('pebbles');
  });

  it.each([
    ['an address that is taken', { email: 'ulla.rask@lab.example' }, 'email', 'person.email-taken'],
    ['a common password', { email: 'b@lab.example', password: 'password12345' }, 'password', 'input.invalid'],
    ['no role', { email: 'c@lab.example', roles: [] }, 'roles', 'input.invalid'],
    ['a customer’s role without a customer', { email: 'd@lab.example', roles: ['customer'] }, 'customerId', 'input.invalid'],
    ['a customer that does not exist', { email: 'e@lab.example', roles: ['customer'], customerId: '019a0000-0000-7000-8000-000000000000' }, 'customerId', 'customer.unknown'],
    ['a line break in the name', { email: 'f@lab.example', name: 'Two\nlines' }, 'name', 'input.invalid'],
  ])('are refused with %s, at the field', async (_what, part, path, code) => {
    const { body } = await administrator.post('/api/people', { ...added, ...part }).expect(422);
    expect(body.code).toBe(code);
    expect((body.errors as { path: string }[]).map((e) => e.path)).toContain(path);
  });

  it('lose their sign-in at once when their roles change', async () => {
    const person = await app.person('analyst');
    await administrator.patch(`/api/people/${person.id}`, { name: person.name, roles: ['technician'], customerId: null, active: true, version: 1 }).expect(200);
    await person.get('/api/session').expect(401);
  });

  it('are changed only by who saw their present version', async () => {
    const person = await app.person('analyst');
    const change = { name: 'New Name', roles: ['analyst'], customerId: null, active: true, version: 1 };
    await administrator.patch(`/api/people/${person.id}`, change).expect(200);
    const { body } = await administrator.patch(`/api/people/${person.id}`, { ...change, name: 'Other Name' }).expect(409);
    expect(body).toMatchObject({ code: 'version.stale', current: { name: 'New Name', version: 2 } });
    await person.get('/api/session').expect(200);
  });

  it('keep one administrator', async () => {
    const change = { name: administrator.name, roles: ['technician'], customerId: null, active: true, version: 1 };
    expect((await administrator.patch(`/api/people/${administrator.id}`, change).expect(409)).body.code).toBe('person.last-administrator');
    expect((await administrator.patch(`/api/people/${administrator.id}`, { ...change, roles: ['administrator'], active: false }).expect(409)).body.code).toBe('person.last-administrator');
    await administrator.get('/api/session').expect(200);
  });

  it('change their own password with the old one, which ends their other sign-ins', async () => {
    const person = await app.person('reviewer');
    const other = await app.nobody.post('/api/session', { email: person.email, password: person.password }).expect(200);
    const wrong = await person.post('/api/people/me/password', { password: 'not the phrase', newPassword: 'slow river over stones' }).expect(403);
    expect(wrong.body).toMatchObject({ code: 'password.wrong', errors: [{ path: 'password' }] });
    await person.post('/api/people/me/password', { password: person.password, newPassword: 'slow river over stones' }).expect(204);
    await person.get('/api/session').expect(200);
    await app.nobody.get('/api/session').set('Authorization', `Bearer ${other.body.accessToken as string}`).expect(401);
    await app.nobody.post('/api/session', { email: person.email, password: 'slow river over stones' }).expect(200);
  });

  it('are found by name, address and state, and paged', async () => {
    const inactive = await app.person('technician');
    await app.database.db.update(people).set({ active: false, name: '100% Off_Duty' }).where(eq(people.id, inactive.id));
    const found = async (query: string) => (await administrator.get(`/api/people?${query}`).expect(200)).body as { items: { id: string }[]; total: number };
    expect((await found('q=100%25')).items.map((p) => p.id)).toEqual([inactive.id]);
    expect((await found('q=%25%25%25')).total).toBe(0);
    expect((await found('state=inactive')).items.map((p) => p.id)).toEqual([inactive.id]);
    expect((await found('pageSize=2')).items).toHaveLength(2);
  });

  it('do not see each other unless they are administrators', async () => {
    const manager = await app.person('quality manager');
    await manager.get('/api/people').expect(403);
    await manager.post('/api/people', added).expect(403);
  });
});

describe('Laboratory', () => {
  let app: TestApp;
  beforeAll(async () => {
    app = await testApp();
  }, 60_000);
  afterAll(() => app.close());

  it('separates duties from the start; switching that off is an administrator’s act, and recorded', async () => {
    const administrator = await app.person('administrator');
    const { body } = await administrator.get('/api/laboratory').expect(200);
    expect(body).toMatchObject({ separationOfDuties: true, version: 1 });
    const change = { name: 'Corrie Bank Materials Laboratory', address: '1 Bank Street', timeZone: 'Europe/London', separationOfDuties: false, version: 1 };
    const analyst = await app.person('analyst');
    await analyst.patch('/api/laboratory', change).expect(403);
    expect((await administrator.patch('/api/laboratory', change).expect(200)).body).toMatchObject({ separationOfDuties: false, version: 2 });
    expect((await administrator.patch('/api/laboratory', change).expect(409)).body.code).toBe('version.stale');
    const entries = await app.database.db.select().from(recordEntries).where(eq(recordEntries.noun, 'laboratory'));
    expect(entries.map((e) => e.action)).toEqual(['laboratory.changed', 'laboratory.separation-off']);
  });

  it('refuses a time zone that does not exist', async () => {
    const administrator = await app.person('administrator');
    const { body } = await administrator.patch('/api/laboratory', { name: 'X', address: 'Y', timeZone: 'Mars/Olympus', separationOfDuties: true, version: 2 }).expect(422);
    expect(body.errors).toEqual([expect.objectContaining({ path: 'timeZone' })]);
  });
});
