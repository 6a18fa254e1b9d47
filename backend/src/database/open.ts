import { execFile } from 'node:child_process';
import { existsSync, mkdirSync, renameSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { setImmediate } from 'node:timers/promises';
import { promisify } from 'node:util';
import type { PGlite } from '@electric-sql/pglite';
import { Logger } from '@nestjs/common';
import type { Config } from '../platform/config';
import { DataLock } from './data-lock';
import { Database, insideTransaction } from './database';
import { migrate } from './migrate';
import { PglitePool, type PgPool } from './pool';

/** Ours first: BullMQ's SQL is unqualified, and none of our tables is called as one of its own (a test says so). */
export const SEARCH_PATH = 'public, bullmq';

/** Opens the database that the settings name, brings its schema up to date, and answers with it. */
export async function openDatabase(config: Config): Promise<Database> {
  return config.databaseUrl === undefined ? openFolder(config.dataFolder) : openServer(config.databaseUrl);
}

async function openFolder(dataFolder: string): Promise<Database> {
  mkdirSync(dataFolder, { recursive: true, mode: 0o700 });
  const lock = DataLock.acquire(dataFolder);
  try {
    const folder = join(dataFolder, 'database');
    if (!existsSync(join(folder, 'PG_VERSION'))) await createInOwnProcess(folder);
    const { PGlite } = await import('@electric-sql/pglite');
    const pglite = await PGlite.create({ dataDir: folder });
    const database = await embedded(pglite, () => lock.release());
    await migrate(database);
    return database;
  } catch (error) {
    lock.release();
    throw error;
  }
}

/** Making a new database takes three times the memory that using it does: a process of its own gives it back. */
async function createInOwnProcess(folder: string): Promise<void> {
  const draft = `${folder}.new`;
  rmSync(draft, { recursive: true, force: true });
  rmSync(folder, { recursive: true, force: true });
  const script = `require('@electric-sql/pglite').PGlite.create({ dataDir: process.argv[1] }).then((made) => made.close())`;
  await promisify(execFile)(process.execPath, ['-e', script, draft], { cwd: __dirname });
  renameSync(draft, folder);
}

/** A database over a PGlite that is open already. */
export async function embedded(pglite: PGlite, afterClose: () => void = () => {}): Promise<Database> {
  const { drizzle } = await import('drizzle-orm/pglite');
  await pglite.exec(`set search_path to ${SEARCH_PATH}; set timezone to 'UTC'`);
  letOthersIn(pglite);
  refuseDuringTransactions(pglite);
  return new Database('embedded', drizzle(pglite), new PglitePool(pglite), async () => {
    if (!pglite.closed) await pglite.close();
    afterClose();
  });
}

/** A statement beside the open transaction would wait for it while it waits for the statement: an error tells the programmer instead. */
function refuseDuringTransactions(pglite: PGlite): void {
  const query = pglite.query.bind(pglite);
  const exec = pglite.exec.bind(pglite);
  const check = () => {
    if (insideTransaction()) throw new Error('Inside a transaction, use its `tx` for every statement');
  };
  pglite.query = async (...args) => {
    check();
    return query(...args);
  };
  pglite.exec = async (...args) => {
    check();
    return exec(...args);
  };
}

/** A statement runs on this thread, and the next one would follow without a pause: other requests get their turn in between. */
function letOthersIn(pglite: PGlite): void {
  giveTurns(pglite);
  const transaction = pglite.transaction.bind(pglite);
  pglite.transaction = (work) => transaction((tx) => {
    giveTurns(tx);
    return work(tx);
  });
}

function giveTurns(on: Pick<PGlite, 'query'>): void {
  const query = on.query.bind(on);
  on.query = async (...args) => {
    await setImmediate();
    return query(...args);
  };
}

export async function openServer(url: string): Promise<Database> {
  const { Pool } = await import('pg');
  const { drizzle } = await import('drizzle-orm/node-postgres');
  const logger = new Logger('Database');
  const pool = new Pool({ connectionString: url, max: 16, keepAlive: true, options: `-c search_path=${SEARCH_PATH.replace(' ', '')} -c timezone=UTC` });
  pool.on('error', (error) => logger.warn(`A database connection was lost: ${error.message}`));
  const database = new Database('server', drizzle(pool), pool satisfies PgPool, async () => {
    if (!pool.ended) await pool.end();
  });
  try {
    await migrate(database);
    return database;
  } catch (error) {
    await database.close();
    throw error;
  }
}
