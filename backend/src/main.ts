import 'reflect-metadata';
import { Config } from './platform/config';
import { startServer } from './server';

/** The API, with the web client; on an embedded database it computes the fits as well. */
async function main(): Promise<void> {
  const server = await startServer(new Config(process.env));
  const stop = (): void => {
    server.close().then(() => process.exit(0), (error: unknown) => {
      console.error(error);
      process.exit(1);
    });
  };
  process.once('SIGTERM', stop);
  process.once('SIGINT', stop);
}

main().catch((error: unknown) => {
  console.error(error instanceof Error ? error.message : error);
  process.exit(1);
});
