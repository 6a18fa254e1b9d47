import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import type { DynamicModule, Type } from '@nestjs/common';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { Test } from '@nestjs/testing';
import type { Role } from '@strainwright/common/contract/vocabulary';
import request, { type Test as HttpTest } from 'supertest';
import { AppModule } from '../app.module';
import { prepare } from '../application';
import type { Database } from '../database/database';
import { customers, people } from '../database/schema/people';
import { testDatabase } from '../database/testing';
import { Clock } from '../platform/clock';
import { Config } from '../platform/config';
import { newId } from '../platform/ids';
import { Passwords } from '../session/passwords';

/** A clock that stands where a test puts it; from the wall clock until then. */
export class TestClock extends Clock {
  private fixed: Date | undefined;

  set(now: Date | string): void {
    this.fixed = new Date(now);
  }

  override now(): Date {
    return this.fixed ?? super.now();
  }
}

export interface HttpCalls {
  get(path: string): HttpTest;
  post(path: string, body?: object): HttpTest;
  put(path: string, body?: object): HttpTest;
  patch(path: string, body?: object): HttpTest;
  delete(path: string): HttpTest;
}

export interface TestPerson extends HttpCalls {
  id: string;
  name: string;
  email: string;
  password: string;
  token: string;
}

export interface TestApp {
  nest: NestExpressApplication;
  config: Config;
  database: Database;
  clock: TestClock;
  /** Calls without a sign-in. Paths are given with /api. */
  nobody: HttpCalls;
  get<T>(type: Type<T>): T;
  customer(name?: string): Promise<string>;
  /** Makes a person with these roles and signs them in. A customer's person needs the customer's id. */
  person(roles: Role | Role[], customerId?: string): Promise<TestPerson>;
  close(): Promise<void>;
}

const TYPESCRIPT_HOOK = pathToFileURL(join(__dirname, '..', '..', 'typescript-hook.mjs')).href;
const PASSWORD = 'a long enough phrase';

/** The whole application over HTTP on a database and a data folder of its own; only the clock is a test's. */
export async function testApp(options: { worker?: DynamicModule; env?: Record<string, string>; database?: Database } = {}): Promise<TestApp> {
  const folder = mkdtempSync(join(tmpdir(), 'strainwright-'));
  const config = new Config({ NODE_ENV: 'test', STRAINWRIGHT_DATA: folder, LOG_LEVEL: 'silent', STRAINWRIGHT_DEMO: 'off', ...options.env }, ['--import', TYPESCRIPT_HOOK]);
  const database = options.database ?? (await testDatabase());
  const clock = new TestClock();
  const module = await Test.createTestingModule({ imports: [AppModule.with(config, database, options.worker)] }).overrideProvider(Clock).useValue(clock).compile();
  const nest = await prepare(module.createNestApplication<NestExpressApplication>({ bodyParser: false, bufferLogs: true }), config);
  const calls = callsOf(nest);
  let made = 0;

  return {
    nest, config, database, clock,
    nobody: calls(undefined),
    get: (type) => nest.get(type, { strict: false }),
    async customer(name) {
      made += 1;
      const id = newId();
      await database.db.insert(customers).values({ id, name: name ?? `Customer ${made}`, address: '1 Quarry Lane', contactEmail: `office${made}@customer.example`, createdAt: clock.now() });
      return id;
    },
    async person(roles, customerId) {
      made += 1;
      const list = [roles].flat();
      const row = { id: newId(), name: `${list[0] ?? 'person'} ${made}`, email: `person${made}@lab.example` };
      const passwordHash = await nest.get(Passwords, { strict: false }).hash(PASSWORD);
      await database.db.insert(people).values({ ...row, roles: list, customerId: customerId ?? null, passwordHash, createdAt: clock.now() });
      const answer = await calls(undefined).post('/api/session', { email: row.email, password: PASSWORD }).expect(200);
      const { accessToken } = answer.body as { accessToken: string };
      return { ...row, password: PASSWORD, token: accessToken, ...calls(accessToken) };
    },
    async close() {
      await nest.close();
      await database.close();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}

function callsOf(nest: NestExpressApplication): (token: string | undefined) => HttpCalls {
  const server = nest.getHttpServer();
  return (token) => {
    const call = (method: 'get' | 'post' | 'put' | 'patch' | 'delete') => (path: string, body?: object): HttpTest => {
      const made = request(server)[method](path);
      if (token !== undefined) made.set('Authorization', `Bearer ${token}`);
      return body === undefined ? made : made.send(body);
    };
    return { get: call('get'), post: call('post'), put: call('put'), patch: call('patch'), delete: call('delete') };
  };
}
