/** The demo: an invented laboratory with orders in every state, made through the services so that the record tells it. */
import type { INestApplicationContext } from '@nestjs/common';
import { Clock } from '../platform/clock';
import { Bench } from './bench';
import { play, type Scene } from './calendar';
import { concrete } from './concrete';
import { equipmentToCome, referenceChecks, setUp } from './equipment';
import { cancelledRequest, glass, glassRequest } from './glass';
import { granite } from './granite';
import { aluminium, nickel } from './metals';
import { makeCast, type Cast } from './people';

/** Fills an empty database. Needs whatever takes fits from the queue. */
export async function seedDemo(app: INestApplicationContext): Promise<void> {
  const clock = app.get(Clock);
  const today = clock.now();
  const equipment = equipmentToCome();
  let cast: Cast | undefined;
  const there = (): Cast => {
    if (cast === undefined) throw new Error('Nobody is there yet');
    return cast;
  };
  const bench = () => new Bench(app, there(), equipment);
  const opening: Scene = {
    daysAgo: 70, at: '08:00',
    act: async () => {
      cast = await makeCast(app);
      await setUp(app, equipment, today, cast.quality);
    },
  };
  await play(clock, [
    opening, ...referenceChecks(app, equipment, () => there().quality),
    ...granite(bench), ...nickel(bench), ...cancelledRequest(bench), ...concrete(bench), ...aluminium(bench), ...glass(bench), ...glassRequest(bench),
  ]);
}
