import { eq } from 'drizzle-orm';
import { people, sessions } from '../database/schema/people';
import { recordEntries } from '../database/schema/record';
import { testApp, type TestApp, type TestPerson } from '../testing/app';

const cookieOf = (answer: { headers: Record<string, unknown> }): string => (String((answer.headers['set-cookie'] as string[] | undefined)?.[0] ?? '').split(';')[0] ?? '');

describe('Session', () => {
  let app: TestApp;
  let person: TestPerson;
  beforeAll(async () => {
    app = await testApp();
    person = await app.person('technician');
  }, 60_000);
  afterAll(() => app.close());

  const signIn = (password = person.password, email = person.email) => app.nobody.post('/api/session', { email, password });
  const refresh = (cookie: string) => app.nobody.post('/api/session/refresh').set('Cookie', cookie);

  it('answers with the user and an access token, and keeps the refresh token in an HttpOnly, strict cookie', async () => {
    const answer = await signIn().expect(200);
    expect(answer.body.user).toEqual({ id: person.id, name: person.name, email: person.email, roles: ['technician'], customerId: null, customerName: null, decimalStyle: '.' });
    const cookie = String(answer.headers['set-cookie']);
    expect(cookie).toMatch(/HttpOnly/);
    expect(cookie).toMatch(/SameSite=Strict/);
    expect(cookie).toMatch(/Path=\/api\/session/);
    expect(JSON.stringify(answer.body)).not.toContain(cookieOf(answer).split('=')[1]);
  });

  it.each([
    ['a wrong password', { password: 'a wrong enough phrase' }],
    ['an unknown address', { email: 'nobody@lab.example' }],
  ])('tells nothing about which part was wrong: %s', async (_what, part) => {
    const answer = await app.nobody.post('/api/session', { email: person.email, password: person.password, ...part }).expect(401);
    expect(answer.body).toMatchObject({ status: 401, code: 'session.refused', detail: 'The e-mail address or the password is wrong.' });
  });

  it('gives a new pair for a refresh token once; a second use ends the whole sign-in', async () => {
    const first = await signIn().expect(200);
    const second = await refresh(cookieOf(first)).expect(200);
    expect(cookieOf(second)).not.toBe(cookieOf(first));
    const token = second.body.accessToken as string;
    await app.nobody.get('/api/session').set('Authorization', `Bearer ${token}`).expect(200);

    await refresh(cookieOf(first)).expect(401);
    await refresh(cookieOf(second)).expect(401);
    await app.nobody.get('/api/session').set('Authorization', `Bearer ${token}`).expect(401);
    const entries = await app.database.db.select().from(recordEntries).where(eq(recordEntries.action, 'session.revoked'));
    expect(entries).toHaveLength(1);
  });

  it('lets one of two refreshes at the same instant through, and then ends the sign-in', async () => {
    const first = await signIn().expect(200);
    const answers = await Promise.all([refresh(cookieOf(first)), refresh(cookieOf(first))]);
    expect(answers.map((a) => a.status).sort()).toEqual([200, 401]);
  });

  it('ends a sign-in at once with sign-out, its access token included', async () => {
    const answer = await signIn().expect(200);
    const bearer = `Bearer ${answer.body.accessToken as string}`;
    await app.nobody.delete('/api/session').set('Authorization', bearer).expect(204);
    await app.nobody.get('/api/session').set('Authorization', bearer).expect(401);
    await refresh(cookieOf(answer)).expect(401);
  });

  it('refuses a forged token, one without a signature, and none', async () => {
    const [header, payload] = person.token.split('.');
    const unsigned = `${Buffer.from('{"alg":"none","typ":"JWT"}').toString('base64url')}.${payload}.`;
    for (const token of [`${header}.${payload}.AAAA`, unsigned, 'nonsense']) {
      const answer = await app.nobody.get('/api/session').set('Authorization', `Bearer ${token}`).expect(401);
      expect(answer.body.code).toBe('session.invalid');
    }
    await app.nobody.get('/api/session').expect(401);
  });

  it('stores refresh tokens only as hashes', async () => {
    const answer = await signIn().expect(200);
    const rows = await app.database.db.select().from(sessions);
    expect(JSON.stringify(rows)).not.toContain(cookieOf(answer).split('=')[1]);
  });

  it('locks an account after ten failures, also against the right password, and tells its owner', async () => {
    const other = await app.person('analyst');
    for (let i = 0; i < 10; i += 1) await signIn('not the phrase', other.email).expect(401);
    const locked = await signIn(other.password, other.email).expect(429);
    expect(locked.body.code).toBe('session.locked');
    expect(Number(locked.headers['retry-after'])).toBeGreaterThan(0);
    await signIn().expect(200);
    const entries = await app.database.db.select().from(recordEntries).where(eq(recordEntries.action, 'session.locked'));
    expect(entries.map((e) => e.nounId)).toEqual([other.id]);
  });

  it('locks an account that does not exist in the same way', async () => {
    for (let i = 0; i < 10; i += 1) await signIn('not the phrase', 'ghost@lab.example').expect(401);
    await signIn('not the phrase', 'ghost@lab.example').expect(429);
  });

  it('does not let many attempts at once slip past the lock', async () => {
    const other = await app.person('analyst');
    const answers = await Promise.all(Array.from({ length: 20 }, () => signIn('not the phrase', other.email)));
    expect(answers.filter((a) => a.status === 401)).toHaveLength(10);
    expect(answers.filter((a) => a.status === 429)).toHaveLength(10);
  });

  it('shuts out a person who was deactivated, with a token in hand', async () => {
    const other = await app.person('analyst');
    await other.get('/api/session').expect(200);
    await app.database.db.update(people).set({ active: false }).where(eq(people.id, other.id));
    await other.get('/api/session').expect(401);
    await signIn(other.password, other.email).expect(401);
  });

  it('writes every sign-in, kept or refused, into the record', async () => {
    const entries = await app.database.db.select().from(recordEntries);
    expect(entries.filter((e) => e.action === 'session.opened' && e.personId === person.id).length).toBeGreaterThan(0);
    expect(entries.filter((e) => e.action === 'session.refused' && e.nounId === person.id).length).toBeGreaterThan(0);
    expect(JSON.stringify(entries)).not.toContain('a wrong enough phrase');
  });
});
