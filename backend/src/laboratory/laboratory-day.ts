import type { Queries } from '../database/database';
import { laboratory } from '../database/schema/people';
import type { Clock } from '../platform/clock';

/** The laboratory's time zone; UTC until the laboratory has been set up. */
export async function timeZoneOf(db: Queries): Promise<string> {
  const [row] = await db.select({ timeZone: laboratory.timeZone }).from(laboratory).limit(1);
  return row?.timeZone ?? 'UTC';
}

/** Today's date where the laboratory is. */
export async function laboratoryToday(db: Queries, clock: Clock): Promise<string> {
  return clock.today(await timeZoneOf(db));
}

/** Tells the date, YYYY-MM-DD, that an instant has in a time zone. Made once for many instants: making it is what takes time. */
export function dayIn(timeZone: string): (instant: Date) => string {
  const format = new Intl.DateTimeFormat('en-CA', { timeZone, year: 'numeric', month: '2-digit', day: '2-digit' });
  return (instant) => {
    const parts = new Map(format.formatToParts(instant).map((p) => [p.type, p.value]));
    return `${parts.get('year')}-${parts.get('month')}-${parts.get('day')}`;
  };
}
