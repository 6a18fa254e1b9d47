import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, readdirSync, renameSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Database } from './database';
import { migrate } from './migrate';
import { embedded, openServer } from './open';
import { sha256 } from '../platform/canonical';

const CACHE = join(__dirname, '..', '..', '..', 'node_modules', '.cache', 'strainwright');
const MIGRATIONS = join(__dirname, '..', '..', '..', 'drizzle');

/**
 * A new, migrated, empty database for one test file: a PGlite in memory, loaded from an image that is made once for each state
 * of the migrations; or, where STRAINWRIGHT_TEST_DATABASE_URL names a PostgreSQL server, a database of its own there.
 */
export async function testDatabase(): Promise<Database> {
  const url = process.env.STRAINWRIGHT_TEST_DATABASE_URL;
  return url === undefined || url === '' ? inMemory() : onServer(url);
}

async function inMemory(): Promise<Database> {
  const { PGlite } = await import('@electric-sql/pglite');
  const image = await templateImage();
  return embedded(await PGlite.create({ loadDataDir: new Blob([new Uint8Array(readFileSync(image))]) }));
}

/** The files of a migrated, empty database as a tar archive. */
export async function templateImage(): Promise<string> {
  const path = join(CACHE, `database-${migrationsKey()}.tar`);
  if (existsSync(path)) return path;
  const { PGlite } = await import('@electric-sql/pglite');
  const pglite = await PGlite.create();
  await migrate(await embedded(pglite));
  const dump = await pglite.dumpDataDir('none');
  await pglite.close();
  mkdirSync(CACHE, { recursive: true });
  const draft = `${path}.${process.pid}`;
  writeFileSync(draft, Buffer.from(await dump.arrayBuffer()));
  renameSync(draft, path);
  return path;
}

/** Changes with the migrations and with the packages whose schema is in the image. */
function migrationsKey(): string {
  const own = readdirSync(MIGRATIONS).filter((name) => statSync(join(MIGRATIONS, name)).isFile()).sort().map((name) => readFileSync(join(MIGRATIONS, name), 'utf8'));
  const packages = ['bullmq', '@electric-sql/pglite'].map((name) => readFileSync(join(CACHE, '..', '..', name, 'package.json'), 'utf8'));
  return sha256([...own, ...packages].join('\0')).slice(0, 16);
}

async function onServer(url: string): Promise<Database> {
  const { Client } = await import('pg');
  const admin = new Client({ connectionString: url });
  await admin.connect();
  const name = `test_${randomBytes(8).toString('hex')}`;
  await admin.query(`create database ${name}`);
  await admin.end();
  const own = new URL(url);
  own.pathname = `/${name}`;
  return openServer(own.toString());
}
