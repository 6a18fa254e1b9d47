/** Every route of the program with everybody who could call it, against the one table of permissions. */
import { Controller, Get, Module, type Type } from '@nestjs/common';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { Test } from '@nestjs/testing';
import { ACTIONS, isPublic, mayDo, onlyOwn, type Action } from '@strainwright/common/contract/permissions';
import { ROLES, type Role } from '@strainwright/common/contract/vocabulary';
import { eq } from 'drizzle-orm';
import { AppModule } from '../../backend/src/app.module';
import { prepare } from '../../backend/src/application';
import { people as peopleTable } from '../../backend/src/database/schema/people';
import { FEATURES } from '../../backend/src/features';
import { declaredRoutes, routesOf, type DeclaredRoute } from '../../backend/src/platform/contract/declared-actions';
import { Secrets } from '../../backend/src/platform/secrets';
import { setUp, type Setting } from './setting';
import { claimsOf, makeToken } from './tokens';

jest.setTimeout(60_000);

const ROUTES = routesOf(FEATURES.flatMap((feature) => (Reflect.getMetadata('controllers', feature) as Type[] | undefined) ?? []));
const NOWHERE = '0190f3a0-0000-7000-8000-000000000000';

let setting: Setting;
beforeAll(async () => {
  setting = await setUp();
}, 120_000);
afterAll(() => setting.app.close());

interface Outcome { status: number; code: string | undefined }

async function call(route: DeclaredRoute, path: string, token: string | undefined): Promise<Outcome> {
  const hasBody = route.method === 'POST' || route.method === 'PATCH' || route.method === 'PUT';
  const response = await fetch(`${setting.url}/api${path}`, {
    method: route.method,
    headers: { ...(token === undefined ? {} : { authorization: `Bearer ${token}` }), ...(hasBody ? { 'content-type': 'application/json' } : {}) },
    // No route knows this field: whoever is let in is told so, and nothing changes.
    body: hasBody ? JSON.stringify({ surprise: true }) : undefined,
  });
  if (!(response.headers.get('content-type') ?? '').includes('problem+json')) {
    // The stream of events never ends by itself.
    await response.body?.cancel();
    return { status: response.status, code: undefined };
  }
  return { status: response.status, code: ((await response.json()) as { code: string }).code };
}

/** The path with real ids for reading, and with ids of nothing for what would change it. */
function pathFor(route: DeclaredRoute): string {
  const parts: string[] = [];
  for (const part of route.path.split('/').slice(1)) {
    const real = setting.ids[`/${[...route.path.split('/').slice(1, parts.length + 1), part].join('/')}`];
    if (!part.startsWith(':')) parts.push(part);
    else if (route.method !== 'GET') parts.push(NOWHERE);
    else if (real === undefined) throw new Error(`The setting has nothing for ${route.path}: add it to setting.ts`);
    else parts.push(real);
  }
  return `/${parts.join('/')}${route.path === '/find' ? '?q=Bars' : ''}`;
}

/** Reading answers 200 to whoever is let in, but for these, and why. */
const READS_ANSWERED_OTHERWISE: Readonly<Record<string, number>> = {
  // The code is missing.
  '/verify/:number': 400,
};
/** Changing with a field that nobody knows, or at an id of nothing: refused for that, not for who asks. */
const REFUSED_FOR_CONTENT = [400, 404, 409, 422];

function expectLetIn(route: DeclaredRoute, who: string, outcome: Outcome): void {
  const seen = `${who}: ${outcome.status} ${outcome.code ?? ''}`;
  if (route.action === 'session.refresh') expect(seen).toBe(`${who}: 401 session.expired`);
  else if (route.action === 'session.close') expect(seen).toBe(`${who}: 204 `);
  else if (route.method === 'GET') expect(seen).toMatch(new RegExp(`^${who}: ${READS_ANSWERED_OTHERWISE[route.path] ?? 200} `));
  else expect(REFUSED_FOR_CONTENT.map((status) => `${who}: ${status}`)).toContain(seen.replace(/ [^ ]*$/, ''));
}

/** Tokens that name a real person with a real sign-in and every right, but are not the server's or no longer good. */
function badTokens(role: Role): Record<string, string | undefined> {
  const { tokenSecret } = setting.app.get(Secrets);
  const good = { algorithm: 'HS256' as const, secret: tokenSecret, expiresIn: 600, claims: claimsOf(setting.people[role].token) };
  return {
    'nobody': undefined,
    'an expired token': makeToken({ ...good, expiresIn: -1 }),
    'a token of another secret': makeToken({ ...good, secret: 'another secret that is long enough to sign with' }),
    'a token that is not signed': makeToken({ ...good, algorithm: 'none' }),
    'a token of another algorithm': makeToken({ ...good, algorithm: 'HS512' }),
    'claims under the signature of other claims': `${makeToken({ ...good, claims: { ...good.claims, sub: setting.stranger.id } }).split('.').slice(0, 2).join('.')}.${setting.people[role].token.split('.')[2] ?? ''}`,
    'a word for a token': 'undefined',
  };
}

/** Somebody who may do it, so that only the token can be what is wrong. */
const allowedRole = (action: Action): Role => ROLES.find((role) => mayDo([role], action)) ?? 'administrator';

describe('every route', () => {
  it('is among those walked here, as the running program has them', () => {
    const key = (r: DeclaredRoute) => `${r.method} ${r.path} ${r.action}`;
    expect(ROUTES.map(key).sort()).toEqual(declaredRoutes(setting.app.nest).map(key).sort());
    expect(ROUTES.length).toBeGreaterThan(60);
  });

  it('has an action of the table, and every action of the table has a route', () => {
    expect([...new Set(ROUTES.map((r) => r.action))].sort()).toEqual(Object.keys(ACTIONS).sort());
  });

  it('would be taken with a token made here, if it were right in everything', async () => {
    const { tokenSecret } = setting.app.get(Secrets);
    const token = makeToken({ algorithm: 'HS256', secret: tokenSecret, expiresIn: 600, claims: claimsOf(setting.people.analyst.token) });
    const route = ROUTES.find((r) => r.action === 'session.read');
    expect(route === undefined ? undefined : await call(route, '/session', token)).toEqual({ status: 200, code: undefined });
  });
});

describe('who may call', () => {
  it.each(ROUTES)('$method $path ($action)', async (route) => {
    const path = pathFor(route);
    for (const [who, token] of Object.entries(badTokens(allowedRole(route.action)))) {
      const outcome = await call(route, path, token);
      if (isPublic(route.action)) expectLetIn(route, who, outcome);
      else expect([who, outcome]).toEqual([who, { status: 401, code: 'session.invalid' }]);
    }
    for (const role of ROLES) {
      // Signing out ends the sign-in: it gets one of its own.
      const customerId = role === 'customer' ? setting.theirs.order.customerId : undefined;
      const { token } = route.action === 'session.close' ? await setting.app.person(role, customerId) : setting.people[role];
      const outcome = await call(route, path, token);
      if (mayDo([role], route.action)) expectLetIn(route, role, outcome);
      else expect([role, outcome]).toEqual([role, { status: 403, code: 'action.forbidden' }]);
    }
  });

  it('is refused to a person who was set inactive, and to a sign-in that was ended', async () => {
    const [gone, left] = [await setting.app.person('analyst'), await setting.app.person('analyst')];
    await setting.app.database.db.update(peopleTable).set({ active: false }).where(eq(peopleTable.id, gone.id));
    await left.delete('/api/session').expect(204);
    for (const person of [gone, left]) await person.get('/api/orders').expect(401);
  });
});

describe('another customer', () => {
  const scoped = ROUTES.filter((r) => onlyOwn(['customer'], r.action));

  it.each(scoped.filter((r) => r.path.includes(':')))('is told that there is no such thing: $method $path', async (route) => {
    expect(await call(route, pathFor(route), setting.people.customer.token)).toMatchObject({ status: 200 });
    const outcome = await call(route, pathFor(route), setting.stranger.token);
    expect(outcome).toEqual({ status: 404, code: expect.stringMatching(/^(order|certificate)\.not-found$/) as string });
  });

  it.each(scoped.filter((r) => r.method === 'GET' && !r.path.includes(':') && r.action !== 'events.read'))('finds nothing but its own in $path', async ({ path }) => {
    const query = path === '/find' ? '?q=2026' : '';
    const { theirs, strangers } = setting;
    const { text } = await setting.stranger.get(`/api${path}${query}`).expect(200);
    expect(text).toContain(strangers.order.orderId);
    for (const secret of [theirs.order.orderId, theirs.order.customerId, theirs.certificateId, theirs.orderNumber, 'Tarn Quarries']) expect(text).not.toContain(secret);
  });

  it.each(scoped.filter((r) => r.method === 'GET' && r.action === 'orders.read' && !r.path.includes(':')))('cannot ask for it by a filter of $path', async ({ path }) => {
    const answer = await setting.stranger.get(`/api${path}?customerId=${setting.theirs.order.customerId}`);
    expect(answer.text).not.toContain(setting.theirs.order.orderId);
  });

  it('cannot order in the name of another', async () => {
    const answer = await setting.stranger.post('/api/orders', { customerId: setting.theirs.order.customerId, title: 'T', materialDescription: 'M', constantsWanted: ['E'], kindsOfRun: ['pulse'] });
    const { items } = (await setting.people.customer.get('/api/orders').expect(200)).body as { items: { id: string }[] };
    expect(answer.status).toBeGreaterThanOrEqual(400);
    expect(items.map((o) => o.id)).toEqual([setting.theirs.order.orderId]);
  });

  it('hears of nothing but its own orders', async () => {
    const stop = new AbortController();
    const stream = await fetch(`${setting.url}/api/events`, { headers: { authorization: `Bearer ${setting.stranger.token}` }, signal: stop.signal });
    const reader = stream.body?.pipeThrough(new TextDecoderStream()).getReader();
    const order = { title: 'T', materialDescription: 'M', constantsWanted: ['E'], kindsOfRun: ['pulse'] };
    const { body: foreign } = await setting.people.customer.post('/api/orders', order).expect(201);
    const { body: own } = await setting.stranger.post('/api/orders', order).expect(201);
    let heard = '';
    while (!heard.includes((own as { id: string }).id)) heard += (await reader?.read())?.value ?? '';
    stop.abort();
    expect(heard).not.toContain((foreign as { id: string }).id);
  });
});

@Controller('open')
class Undeclared {
  @Get()
  read(): string {
    return 'anything';
  }
}

@Module({ controllers: [Undeclared] })
class UndeclaredModule {}

describe('a route without an action', () => {
  it('keeps the program from starting', async () => {
    const { config, database } = setting.app;
    const module = await Test.createTestingModule({ imports: [AppModule.with(config, database, undefined), UndeclaredModule] }).compile();
    const program = module.createNestApplication<NestExpressApplication>({ bodyParser: false, bufferLogs: true });
    await expect(prepare(program, config)).rejects.toThrow('Undeclared.read');
    await program.close();
  });
});
