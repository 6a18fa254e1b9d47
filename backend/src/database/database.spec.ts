import { sql } from 'drizzle-orm';
import { rowsOf, sqlState, isDuplicate, type Database } from './database';
import { laboratory, numberSeries } from './schema/people';
import { testDatabase } from './testing';

describe('Database', () => {
  let database: Database;
  beforeAll(async () => {
    database = await testDatabase();
  }, 60_000);
  afterAll(() => database.close());

  it('has no table of ours called as one of BullMQ’s, whose SQL is unqualified', async () => {
    const names = async (schema: string) => rowsOf<{ name: string }>(await database.db.execute(sql`select tablename as name from pg_tables where schemaname = ${schema}`)).map((r) => r.name);
    const ours = await names('public');
    const theirs = await names('bullmq');
    expect(ours).toContain('record_entries');
    expect(theirs).toContain('job');
    expect(ours.filter((name) => theirs.includes(name) || name.startsWith('relay_'))).toEqual([]);
  });

  it('keeps all of a transaction or nothing', async () => {
    const half = database.transaction(async (tx) => {
      await tx.insert(numberSeries).values({ series: 'half', last: 1 });
      throw new Error('stop here');
    });
    await expect(half).rejects.toThrow('stop here');
    expect(await database.db.select().from(numberSeries)).toEqual([]);
  });

  it('runs what was put off after the commit, not when the transaction failed', async () => {
    const seen: string[] = [];
    await database.transaction(async (tx) => {
      await database.afterCommit(() => seen.push('after'));
      await tx.execute(sql`select 1`);
      seen.push('inside');
    });
    await database.transaction(async () => {
      await database.afterCommit(() => seen.push('never'));
      throw new Error('no');
    }).catch(() => undefined);
    expect(seen).toEqual(['inside', 'after']);
  });

  it('refuses a transaction inside a transaction', async () => {
    await expect(database.transaction(() => database.transaction(async () => 1))).rejects.toThrow('open already');
  });

  it('tells a broken unique constraint by its name', async () => {
    const row = { id: 1, name: 'Corrie Bank', address: 'x', timeZone: 'UTC' };
    await database.db.insert(laboratory).values(row);
    const error: unknown = await database.db.insert(laboratory).values(row).catch((e: unknown) => e);
    expect(sqlState(error)).toBe('23505');
    expect(isDuplicate(error, 'laboratory_pkey')).toBe(true);
    expect(isDuplicate(error, 'people_email_unique')).toBe(false);
  });
});

const embeddedOnly = process.env.STRAINWRIGHT_TEST_DATABASE_URL === undefined ? describe : null;
embeddedOnly?.('Database on PGlite', () => {
  it('refuses a statement beside the open transaction, which would wait for ever', async () => {
    const database = await testDatabase();
    const beside = database.transaction(async () => {
      await database.db.execute(sql`select 1`);
    });
    await expect(beside).rejects.toThrow();
    await database.close();
  }, 60_000);
});
