import { asc, inArray } from 'drizzle-orm';
import type { InstrumentState } from '@strainwright/common/specimens/instrument-state';
import type { Queries } from '../database/database';
import { calibrations, instruments } from '../database/schema/instruments';
import { inForce } from './calibration-state';

type InstrumentRow = typeof instruments.$inferSelect;
type CalibrationRow = typeof calibrations.$inferSelect;

/** What evaluations need of some instruments, on whatever day each was used. */
export class InstrumentHistory {
  private readonly rows: ReadonlyMap<string, InstrumentRow>;
  private readonly calibrations = new Map<string, CalibrationRow[]>();

  constructor(rows: readonly InstrumentRow[], calibrationRows: readonly CalibrationRow[]) {
    this.rows = new Map(rows.map((row) => [row.id, row]));
    for (const row of rows) this.calibrations.set(row.id, calibrationRows.filter((c) => c.instrumentId === row.id));
  }

  /** The instrument as calibrated on a day (of the laboratory); undefined when there is no such instrument. */
  stateOn(id: string, on: string): InstrumentState | undefined {
    const row = this.rows.get(id);
    if (row === undefined) return undefined;
    const c = inForce(this.calibrations.get(id) ?? [], on);
    return {
      id, name: row.name, resolution: row.resolution, rangeLow: row.rangeLow, rangeHigh: row.rangeHigh,
      calibration: c === undefined ? null : {
        calibratedOn: c.calibratedOn, dueOn: c.dueOn, expandedUncertainty: c.expandedUncertainty, relative: c.relative, coverageFactor: c.coverageFactor, correction: c.correction,
      },
    };
  }
}

/** Loads instruments with all their calibrations in two statements. */
export async function instrumentHistory(db: Queries, ids: readonly string[]): Promise<InstrumentHistory> {
  const wanted = [...new Set(ids)];
  if (wanted.length === 0) return new InstrumentHistory([], []);
  const rows = await db.select().from(instruments).where(inArray(instruments.id, wanted));
  const calibrationRows = await db.select().from(calibrations).where(inArray(calibrations.instrumentId, wanted)).orderBy(asc(calibrations.calibratedOn));
  return new InstrumentHistory(rows, calibrationRows);
}

/** Instruments as calibrated on one day, by id; ids that do not exist are missing from the map. */
export async function instrumentStates(db: Queries, ids: readonly string[], on: string): Promise<Map<string, InstrumentState>> {
  const history = await instrumentHistory(db, ids);
  const states = [...new Set(ids)].flatMap((id) => {
    const state = history.stateOn(id, on);
    return state === undefined ? [] : [[id, state] as const];
  });
  return new Map(states);
}
