import 'reflect-metadata';
import { Config } from './platform/config';
import { errorText } from './platform/error-text';
import { startServer } from './server';

/** The API, with the web client; on an embedded database it computes the fits as well. */
async function main(): Promise<void> {
  const config = new Config(process.env);
  const server = await startServer(config);
  console.log(['', `Strainwright is at http://localhost:${server.port}`, ...server.notes, ''].join('\n'));
  const stop = (): void => {
    server.close().then(() => process.exit(0), fail);
  };
  process.once('SIGTERM', stop);
  process.once('SIGINT', stop);
}

function fail(error: unknown): void {
  const { code, port } = error as { code?: unknown; port?: unknown };
  console.error(code === 'EADDRINUSE' ? `Port ${String(port)} is in use. Stop what uses it, or choose another with PORT.` : errorText(error));
  process.exit(1);
}

main().catch(fail);
