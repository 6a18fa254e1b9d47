/** The demo's days: what happened weeks ago is done with the program's clock put back to then. */
import type { Clock } from '../platform/clock';

export interface Scene {
  readonly daysAgo: number;
  /** Time of day, UTC. */
  readonly at: string;
  readonly act: () => Promise<void>;
}

const DAY = 86_400_000;

/** ISO date some days before today (after it when negative). */
export function dayBefore(now: Date, daysAgo: number): string {
  return new Date(now.getTime() - daysAgo * DAY).toISOString().slice(0, 10);
}

/** Plays scenes in the order of their times, so that the record is in order too. */
export async function play(clock: Clock, scenes: readonly Scene[]): Promise<void> {
  const now = clock.now();
  const timed = scenes.map((scene) => ({ scene, time: Date.parse(`${dayBefore(now, scene.daysAgo)}T${scene.at}:00.000Z`) })).sort((a, b) => a.time - b.time);
  try {
    for (const { scene, time } of timed) {
      clock.putBack(0);
      clock.putBack(clock.now().getTime() - time);
      await scene.act();
    }
  } finally {
    clock.putBack(0);
  }
}
