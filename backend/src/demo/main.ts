import 'reflect-metadata';
import { Config } from '../platform/config';
import { errorText } from '../platform/error-text';
import { startServer } from '../server';

/** `npm run demo`: fills an empty database with the demo, tells the sign-ins, and stops. */
async function main(): Promise<void> {
  const server = await startServer(new Config({ ...process.env, STRAINWRIGHT_DEMO: 'on', PORT: '0' }));
  console.log(server.notes.length > 0 ? server.notes.join('\n') : 'There is data already: the demo is made in an empty database only.');
  await server.close();
}

main().then(() => process.exit(0), (error: unknown) => {
  console.error(errorText(error));
  process.exit(1);
});
