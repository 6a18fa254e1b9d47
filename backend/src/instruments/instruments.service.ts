import { Injectable } from '@nestjs/common';
import { and, count, desc, eq, inArray, sql, type SQL } from 'drizzle-orm';
import type { z } from 'zod';
import type { changeInstrument, Instrument, instrumentQuery, newCalibration, newInstrument } from '@strainwright/common/contract/instruments';
import { toSI } from '@strainwright/common/quantities/units';
import { Database, isDuplicate, type Queries } from '../database/database';
import { matching, sortedBy, stateAsked } from '../database/listing';
import { calibrations, instruments } from '../database/schema/instruments';
import { people } from '../database/schema/people';
import { laboratoryToday } from '../laboratory/laboratory-day';
import { newId } from '../platform/ids';
import { Problem, notFound, stale } from '../platform/problem';
import { Clock } from '../platform/clock';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';
import { CALIBRATION_STATES, DUE_SOON_DAYS, daysAfter, type CalibrationState } from './calibration-state';
import { calibrationInSI, checkedCalibration, checkedUnit } from './instrument-input';
import { instrumentAnswer, type CalibrationRow, type InstrumentRow } from './instrument-answer';

@Injectable()
export class InstrumentsService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly clock: Clock) {}

  async list(query: z.infer<typeof instrumentQuery>): Promise<{ items: Instrument[]; total: number }> {
    const today = await laboratoryToday(this.database.db, this.clock);
    const dueOn = dueOnBy(today);
    const where = and(
      matching(query.q, instruments.name, instruments.serial, instruments.model, instruments.location),
      query.kind === undefined ? undefined : eq(instruments.kind, query.kind),
      isInState(stateAsked(query, CALIBRATION_STATES), dueOn, today),
    );
    const order = sortedBy(query, { name: instruments.name, kind: instruments.kind, serial: instruments.serial, location: instruments.location, dueOn }, instruments.id, 'name');
    const rows = await this.database.db.select().from(instruments).where(where).orderBy(...order).limit(query.pageSize).offset(query.page * query.pageSize);
    const [counted] = await this.database.db.select({ total: count() }).from(instruments).where(where);
    return { items: await this.answers(this.database.db, rows, today), total: counted?.total ?? 0 };
  }

  async one(id: string): Promise<Instrument> {
    return this.answer(this.database.db, await this.findOrFail(this.database.db, id));
  }

  async add(body: z.infer<typeof newInstrument>, caller: Caller): Promise<Instrument> {
    const u = checkedUnit(body.kind, body.unit);
    const limit = (value: number | null) => (value === null ? null : toSI(value, u.symbol));
    const row = { ...body, id: newId(), unit: u.symbol, resolution: body.resolution * u.factor, rangeLow: limit(body.rangeLow), rangeHigh: limit(body.rangeHigh), createdAt: this.clock.now() };
    return this.unlessNameTaken(() => this.database.transaction(async (tx) => {
      const [stored] = await tx.insert(instruments).values(row).returning();
      await this.record.append(tx, { person: caller, action: 'instrument.added', noun: 'instrument', nounId: row.id, details: body });
      return this.answer(tx, stored ?? { ...row, inService: true, version: 1 });
    }));
  }

  async change(id: string, { version, ...change }: z.infer<typeof changeInstrument>, caller: Caller): Promise<Instrument> {
    return this.unlessNameTaken(() => this.database.transaction(async (tx) => {
      const [changed] = await tx.update(instruments).set({ ...change, version: version + 1 }).where(and(eq(instruments.id, id), eq(instruments.version, version))).returning();
      if (changed === undefined) throw stale('instrument', await this.answer(tx, await this.findOrFail(tx, id)));
      await this.record.append(tx, { person: caller, action: 'instrument.changed', noun: 'instrument', nounId: id, details: change });
      return this.answer(tx, changed);
    }));
  }

  async calibrate(id: string, body: z.infer<typeof newCalibration>, caller: Caller): Promise<Instrument> {
    checkedCalibration(body, await laboratoryToday(this.database.db, this.clock));
    return this.database.transaction(async (tx) => {
      const row = await this.findOrFail(tx, id);
      await tx.insert(calibrations).values({ ...calibrationInSI(body, row.unit), id: newId(), instrumentId: id, enteredById: caller.id, enteredAt: this.clock.now() });
      await this.record.append(tx, { person: caller, action: 'instrument.calibrated', noun: 'instrument', nounId: id, details: { name: row.name, ...body, unit: row.unit } });
      return this.answer(tx, row);
    });
  }

  private async findOrFail(db: Queries, id: string): Promise<InstrumentRow> {
    const [row] = await db.select().from(instruments).where(eq(instruments.id, id));
    if (row === undefined) throw notFound('instrument');
    return row;
  }

  private async answer(db: Queries, row: InstrumentRow): Promise<Instrument> {
    return instrumentAnswer(row, await calibrationsOf(db, [row.id]), await laboratoryToday(db, this.clock));
  }

  private async answers(db: Queries, rows: readonly InstrumentRow[], today: string): Promise<Instrument[]> {
    const all = await calibrationsOf(db, rows.map((row) => row.id));
    return rows.map((row) => instrumentAnswer(row, all.filter((c) => c.instrumentId === row.id), today));
  }

  private async unlessNameTaken<T>(work: () => Promise<T>): Promise<T> {
    try {
      return await work();
    } catch (error) {
      if (!isDuplicate(error, 'instruments_name_unique')) throw error;
      const message = 'There is an instrument of this name already';
      throw new Problem(409, 'instrument.name-taken', message, [{ path: 'name', message }]);
    }
  }
}

async function calibrationsOf(db: Queries, instrumentIds: string[]): Promise<CalibrationRow[]> {
  if (instrumentIds.length === 0) return [];
  const rows = await db.select({ calibration: calibrations, enteredBy: people.name }).from(calibrations).innerJoin(people, eq(people.id, calibrations.enteredById))
    .where(inArray(calibrations.instrumentId, instrumentIds)).orderBy(desc(calibrations.calibratedOn), desc(calibrations.enteredAt));
  return rows.map(({ calibration, enteredBy }) => ({ ...calibration, enteredBy }));
}

/** When the calibration in force on a day is due; null before the first. */
function dueOnBy(day: string): SQL<string | null> {
  return sql`(select ${calibrations.dueOn} from ${calibrations} where ${calibrations.instrumentId} = ${instruments.id} and ${calibrations.calibratedOn} <= ${day}
    order by ${calibrations.calibratedOn} desc, ${calibrations.enteredAt} desc limit 1)`;
}

/** The states of calibration-state.ts, as a condition. */
function isInState(state: CalibrationState | undefined, dueOn: SQL, today: string): SQL | undefined {
  const soon = daysAfter(today, DUE_SOON_DAYS);
  switch (state) {
    case undefined: return undefined;
    case 'never calibrated': return sql`${dueOn} is null`;
    case 'lapsed': return sql`${dueOn} < ${today}`;
    case 'due soon': return sql`${dueOn} between ${today} and ${soon}`;
    case 'in calibration': return sql`${dueOn} > ${soon}`;
  }
}
