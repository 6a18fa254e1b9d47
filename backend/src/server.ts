import type { AddressInfo } from 'node:net';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { createApplication } from './application';
import { openDatabase } from './database/open';
import { firstStart, isNew } from './first-start';
import { fitWorker } from './fits/fit-worker';
import type { Config } from './platform/config';

export interface Server {
  app: NestExpressApplication;
  port: number;
  /** What to tell whoever started it. */
  notes: string[];
  close(): Promise<void>;
}

/** Opens the database, brings it up to date and listens. Closing ends open requests, puts running fits back, and closes the database last. */
export async function startServer(config: Config): Promise<Server> {
  const database = await openDatabase(config);
  try {
    // The demo's fits are computed while it is made, before any worker of its own can be there.
    const computes = database.kind === 'embedded' || (config.demo && (await isNew(database)));
    const app = await createApplication(config, database, computes ? fitWorker() : undefined);
    const notes = await firstStart(app);
    const http = await app.listen(config.port, config.host);
    const { port } = http.address() as AddressInfo;
    return {
      app, port, notes,
      close: async () => {
        http.closeAllConnections();
        await app.close();
        await database.close();
      },
    };
  } catch (error) {
    await database.close();
    throw error;
  }
}
