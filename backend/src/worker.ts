import 'reflect-metadata';
import { NestFactory } from '@nestjs/core';
import { Logger } from 'nestjs-pino';
import { AppModule } from './app.module';
import { openDatabase } from './database/open';
import { fitWorker } from './fits/fit-worker';
import { Config } from './platform/config';

/** Computes fits and nothing else; as many of these as wanted may run against one PostgreSQL server. */
async function main(): Promise<void> {
  const config = new Config(process.env);
  if (config.databaseUrl === undefined) throw new Error('A worker of its own needs DATABASE_URL: an embedded database belongs to the one process that opened it, which computes the fits itself.');
  const database = await openDatabase(config);
  const app = await NestFactory.createApplicationContext(AppModule.with(config, database, fitWorker()), { bufferLogs: true });
  app.useLogger(app.get(Logger));
  app.get(Logger).log('This worker takes fits');
  const stop = (): void => {
    app.close().then(() => database.close()).then(() => process.exit(0), () => process.exit(1));
  };
  process.once('SIGTERM', stop);
  process.once('SIGINT', stop);
}

main().catch((error: unknown) => {
  console.error(error instanceof Error ? error.message : error);
  process.exit(1);
});
