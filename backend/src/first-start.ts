import type { INestApplicationContext } from '@nestjs/common';
import { eq } from 'drizzle-orm';
import { Database } from './database/database';
import { numberSeries, people } from './database/schema/people';
import { DEMO_SIGN_INS } from './demo/people';
import { seedDemo } from './demo/seed';
import { FirstAdministrator } from './people/first-administrator';
import { Config } from './platform/config';

/** Stands in `number_series` while the demo is being made (1) and when it was finished (2). */
const DEMO = 'demo';

/** True before anybody is there. */
export async function isNew({ db }: Database): Promise<boolean> {
  return (await db.select({ id: people.id }).from(people).limit(1)).length === 0;
}

/** Fills a new database: with the demo, or with a first administrator. @returns lines to tell whoever started the program */
export async function firstStart(app: INestApplicationContext): Promise<string[]> {
  const database = app.get(Database);
  if (await isNew(database)) {
    if (!app.get(Config).demo) return tellAdministrator(app);
    await makeDemo(app);
  }
  const [made] = await database.db.select().from(numberSeries).where(eq(numberSeries.series, DEMO));
  if (made === undefined) return [];
  if (made.last < 2) return [`The demo was interrupted while it was made. To have all of it, stop, delete ${app.get(Config).dataFolder} and start again.`];
  const wide = (text: (row: (typeof DEMO_SIGN_INS)[number]) => string) => Math.max(...DEMO_SIGN_INS.map((row) => text(row).length));
  const [whoWide, emailWide] = [wide((row) => row.who), wide((row) => row.email)];
  return ['Demo sign-ins (everything in the demo is invented):', ...DEMO_SIGN_INS.map(({ who, email, password }) => `  ${who.padEnd(whoWide)}  ${email.padEnd(emailWide)}  ${password}`)];
}

async function makeDemo(app: INestApplicationContext): Promise<void> {
  const { db } = app.get(Database);
  await db.insert(numberSeries).values({ series: DEMO, last: 1 });
  await seedDemo(app);
  await db.update(numberSeries).set({ last: 2 }).where(eq(numberSeries.series, DEMO));
}

async function tellAdministrator(app: INestApplicationContext): Promise<string[]> {
  const { email, toldIn } = await app.get(FirstAdministrator, { strict: false }).make();
  return [toldIn === undefined ? `Sign in as ${email} to add people.` : `Sign in as ${email} with the password in ${toldIn} to add people; then change it and delete that file.`];
}
