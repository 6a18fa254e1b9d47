import { join } from 'node:path';
import { readMigrationFiles } from 'drizzle-orm/migrator';
import { sql } from 'drizzle-orm';
import { runMigrations } from 'bullmq';
import { rowsOf, type Database } from './database';

const FOLDER = join(__dirname, '..', '..', '..', 'drizzle');

/** Of our own choosing: keeps two servers that start at once from migrating side by side. */
const LOCK_KEY = 7_311_452;

/**
 * Brings our tables, then BullMQ's, up to date. Drizzle's own migrator takes no lock, so its steps (the journal, its table, one
 * transaction) are done here with one; the files and the table are those of drizzle-kit.
 */
export async function migrate(database: Database): Promise<void> {
  await database.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(${LOCK_KEY})`);
    await tx.execute(sql`create schema if not exists drizzle`);
    await tx.execute(sql`create table if not exists drizzle.__drizzle_migrations (id serial primary key, hash text not null, created_at bigint)`);
    const done = rowsOf<{ last: string | number | null }>(await tx.execute(sql`select max(created_at) as last from drizzle.__drizzle_migrations`));
    const last = Number(done[0]?.last ?? 0);
    for (const migration of readMigrationFiles({ migrationsFolder: FOLDER })) {
      if (migration.folderMillis <= last) continue;
      for (const statement of migration.sql) await tx.execute(sql.raw(statement));
      await tx.execute(sql`insert into drizzle.__drizzle_migrations (hash, created_at) values (${migration.hash}, ${migration.folderMillis})`);
    }
  });
  const client = await database.pool.connect();
  try {
    await runMigrations(client as Parameters<typeof runMigrations>[0], 'bullmq');
  } finally {
    client.release();
  }
}
