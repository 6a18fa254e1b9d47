import { BullModule } from '@nestjs/bullmq';
import { Global, Logger, Module } from '@nestjs/common';
import { createPostgresBackend, createRedisBackend, setDefaultBackendFactory } from 'bullmq';
import { Database } from '../../database/database';
import { Config } from '../config';
import { Outbox } from './outbox';
import { FITS_QUEUE } from './queue.settings';

/** BullMQ on Redis where there is one, else on the database. */
async function connection(config: Config, database: Database) {
  if (config.redisUrl !== undefined) {
    setDefaultBackendFactory(createRedisBackend);
    return { connection: { url: config.redisUrl, maxRetriesPerRequest: null } };
  }
  setDefaultBackendFactory(createPostgresBackend);
  if (database.kind === 'embedded') await resumeInterrupted(database);
  return { connection: database.pool };
}

/**
 * This process is the only owner of an embedded database: a job that is marked as running was interrupted with the process
 * before it, and need not wait until its lock has run out. Reaches into BullMQ's own tables: its version is pinned, and a test watches.
 */
async function resumeInterrupted(database: Database): Promise<void> {
  const { rowCount } = await database.pool.query(`update bullmq.job set locked_until_ms = 0, stalled_marked = true where state = 'active'`);
  await database.pool.query(`delete from bullmq.meta where field = 'stalled-check'`);
  if (rowCount !== null && rowCount > 0) new Logger('Queue').log(`${rowCount} interrupted ${rowCount === 1 ? 'job runs' : 'jobs run'} again`);
}

@Global()
@Module({
  imports: [BullModule.forRootAsync({ inject: [Config, Database], useFactory: connection }), BullModule.registerQueue({ name: FITS_QUEUE })],
  providers: [Outbox],
  exports: [Outbox, BullModule],
})
export class QueueModule {}
