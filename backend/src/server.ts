import type { Server as HttpServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { createApplication } from './application';
import { openDatabase } from './database/open';
import { firstStart, isNew } from './first-start';
import { fitWorker } from './fits/fit-worker';
import type { Config } from './platform/config';

/** What open requests are given when the server stops. */
const PATIENCE_MS = 1_000;

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
    const http: HttpServer = await app.listen(config.port, config.host);
    const { port } = http.address() as AddressInfo;
    return {
      app, port, notes,
      close: async () => {
        await endRequests(http);
        await app.close();
        await database.close();
      },
    };
  } catch (error) {
    await database.close();
    throw error;
  }
}

/** Open requests may end; streams of events, which never would, and whatever else takes longer, are cut off. */
async function endRequests(http: HttpServer): Promise<void> {
  const closed = new Promise((resolve) => http.close(resolve));
  http.closeIdleConnections();
  const cut = setTimeout(() => http.closeAllConnections(), PATIENCE_MS);
  await closed;
  clearTimeout(cut);
}
