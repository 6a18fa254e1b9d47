import { Controller, Get, Module } from '@nestjs/common';
import { DiscoveryModule, NestFactory } from '@nestjs/core';
import { declaredRoutes } from './platform/contract/declared-actions';
import { testApp, type TestApp, type TestPerson } from './testing/app';

@Controller('open')
class Undeclared {
  @Get()
  read(): string {
    return 'anything';
  }
}

@Module({ imports: [DiscoveryModule], controllers: [Undeclared] })
class UndeclaredModule {}

describe('Application', () => {
  let app: TestApp;
  let administrator: TestPerson;
  beforeAll(async () => {
    app = await testApp();
    administrator = await app.person('administrator');
  }, 60_000);
  afterAll(() => app.close());

  it('does not start with a route that declares no action', async () => {
    const bare = await NestFactory.create(UndeclaredModule, { logger: false });
    await bare.init();
    expect(() => declaredRoutes(bare)).toThrow('Undeclared.read');
    await bare.close();
  });

  it('finds every route that Express serves among the declared ones', () => {
    const declared = new Set(declaredRoutes(app.nest).map((r) => `${r.method.toLowerCase()} /api${r.path}`));
    interface Layer { route?: { path: string; methods: Record<string, boolean> } }
    const { stack } = (app.nest.getHttpAdapter().getInstance() as { router: { stack: Layer[] } }).router;
    // What answers to every method is the logger's middleware, no route.
    const routes = stack.flatMap(({ route }) => (route === undefined || route.methods.propfind === true ? [] : [route]));
    const served = routes.flatMap((route) => Object.keys(route.methods).map((method) => `${method} ${route.path}`));
    expect(served.length).toBeGreaterThan(10);
    expect(served.filter((route) => !declared.has(route))).toEqual([]);
  });

  it('is ready when its database and its queue answer', async () => {
    const answer = await app.nobody.get('/api/health').expect(200);
    expect(answer.body).toMatchObject({ status: 'ready', database: { ready: true }, queue: { ready: true } });
  });

  it('lets no script run but its own', async () => {
    const { headers } = await app.nobody.get('/api/health');
    const policy = String(headers['content-security-policy']);
    expect(policy).toContain("script-src 'self';");
    expect(policy).toContain("frame-ancestors 'none'");
    expect(headers['x-content-type-options']).toBe('nosniff');
    expect(headers['x-powered-by']).toBeUndefined();
    expect(headers['cache-control']).toBe('no-store');
  });

  it('tells the path of every field at fault, and refuses unknown ones', async () => {
    const answer = await app.nobody.post('/api/session', { email: 'not an address', password: '', extra: 1 }).expect(422);
    expect(answer.type).toBe('application/problem+json');
    expect((answer.body.errors as { path: string }[]).map((e) => e.path).sort()).toEqual(['email', 'extra', 'password']);
  });

  it.each([
    ['a body that is not JSON', '{"email": ', 400, 'body.not-json'],
    ['a body that is no object', '"text"', 400, 'body.not-json'],
    ['a body larger than 1 MB', JSON.stringify({ email: 'x'.repeat(1_100_000) }), 413, 'body.too-large'],
    ['a text with NUL', JSON.stringify({ email: 'a@b.example', password: 'a\0b' }), 422, 'input.invalid'],
    ['half a surrogate pair', '{"email":"a@b.example","password":"\\ud800"}', 422, 'input.invalid'],
  ])('refuses %s with a code', async (_what, body, status, code) => {
    const answer = await app.nobody.post('/api/session').set('Content-Type', 'application/json').send(body);
    expect([answer.status, answer.body.code]).toEqual([status, code]);
  });

  it('refuses a missing body, a wrong query and an unknown address with a code', async () => {
    expect((await app.nobody.post('/api/session').expect(400)).body.code).toBe('body.missing');
    expect((await administrator.get('/api/people?pageSize=0').expect(400)).body).toMatchObject({ code: 'query.invalid', errors: [{ path: 'pageSize' }] });
    expect((await administrator.get('/api/people?colour=red').expect(400)).body).toMatchObject({ code: 'query.invalid', errors: [{ path: 'colour' }] });
    expect((await administrator.get('/api/nowhere').expect(404)).body.code).toBe('route.not-found');
    expect((await administrator.patch('/api/people/not-an-id', { name: 'A', roles: ['analyst'], customerId: null, active: true, version: 1 }).expect(404)).body.code).toBe('person.not-found');
  });

  it('describes every route in its document, with its input', async () => {
    const { body } = await app.nobody.get('/api/docs/document.json').expect(200);
    const paths = body.paths as Record<string, Record<string, { requestBody?: { content: Record<string, { schema: object }> } }>>;
    const signIn = paths['/api/session']?.post?.requestBody?.content['application/json']?.schema;
    expect(signIn).toMatchObject({ type: 'object', required: ['email', 'password'], additionalProperties: false });
    for (const { path, method } of declaredRoutes(app.nest).filter((r) => !r.path.startsWith('/docs'))) {
      expect(Object.keys(paths[`/api${path.replace(/:(\w+)/g, '{$1}')}`] ?? {})).toContain(method.toLowerCase());
    }
  });

  it('shows the document from its own origin without inline script', async () => {
    const page = await app.nobody.get('/api/docs').expect(200);
    expect(page.text).not.toMatch(/<script>|on\w+=/);
    for (const [, file] of page.text.matchAll(/(?:src|href)="([^"]+)"/g)) await app.nobody.get(file ?? '').expect(200);
    await app.nobody.get('/api/docs/package.json').expect(404);
  });
});
