import { Injectable } from '@nestjs/common';
import type { OrderState } from '@strainwright/common/contract/states';
import type { correctReading, NewReading, readingsAnswer } from '@strainwright/common/contract/specimens';
import type { MaterialClass, Shape } from '@strainwright/common/contract/vocabulary';
import { toSI, unit } from '@strainwright/common/quantities/units';
import { and, asc, eq, inArray, type SQL } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, isDuplicate, type Queries, type Transaction } from '../database/database';
import { instruments } from '../database/schema/instruments';
import { orders, samples, specimens } from '../database/schema/orders';
import { readings } from '../database/schema/readings';
import { EventsService } from '../events/events.service';
import { MAY_BE_WORKED_ON, refuseUnless } from '../orders/open-order';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { invalidFields, notFound, refused } from '../platform/problem';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';
import { answeredBefore } from './answered-requests';
import { measurementOf } from './measurement';
import { readingsOf } from './reading-answer';
import { readingFaults, type UsableInstrument } from './reading-input';

type ReadingsAnswer = z.infer<typeof readingsAnswer>;
type Correction = z.infer<typeof correctReading>;
interface SpecimenAtWork { id: string; mark: string; shape: Shape; materialClass: MaterialClass; order: { id: string; number: string; state: OrderState } }

const alreadyCorrected = () => refused('reading.superseded', 'This reading was corrected already. Load the specimen again and correct the reading that stands.');

@Injectable()
export class ReadingsService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly events: EventsService, private readonly clock: Clock) {}

  /** Stores a burst of readings, all or none; the same burst under the same key is stored once, and answered alike each time. */
  async enter(specimenId: string, typed: readonly NewReading[], key: string | undefined, caller: Caller): Promise<ReadingsAnswer> {
    const now = this.clock.now();
    const { specimen, readAt } = await this.database.transaction(async (tx) => {
      const found = await this.specimenOrFail(tx, eq(specimens.id, specimenId));
      const before = await answeredBefore(tx, { personId: caller.id, key, nounId: specimenId, body: typed, at: now });
      if (before === undefined) await this.store(tx, found, typed, now, caller);
      return { specimen: found, readAt: before ?? now };
    });
    return this.answer(specimen, and(eq(readings.specimenId, specimenId), eq(readings.personId, caller.id), eq(readings.readAt, readAt)));
  }

  /** A correction is a new reading that takes the place of one that stands, and says why. */
  async correct(id: string, correction: Correction, caller: Caller): Promise<ReadingsAnswer> {
    const newReadingId = newId();
    try {
      const specimen = await this.database.transaction(async (tx) => {
        const [wrong] = await tx.select().from(readings).where(eq(readings.id, id));
        if (wrong === undefined) throw notFound('reading');
        const found = await this.specimenOrFail(tx, eq(specimens.id, wrong.specimenId));
        await this.storeCorrection(tx, found, wrong, { ...correction, id: newReadingId }, caller);
        return found;
      });
      return await this.answer(specimen, eq(readings.id, newReadingId));
    } catch (error) {
      throw isDuplicate(error, 'readings_supersedes') ? alreadyCorrected() : error;
    }
  }

  private async store(tx: Transaction, specimen: SpecimenAtWork, typed: readonly NewReading[], readAt: Date, caller: Caller): Promise<void> {
    refuseUnless(MAY_BE_WORKED_ON, specimen.order);
    await refuseFaults(tx, specimen.shape, typed, (i) => `${i}.`);
    const rows = typed.map((reading) => ({ id: newId(), specimenId: specimen.id, ...asRead(reading), station: reading.station, personId: caller.id, readAt }));
    await tx.insert(readings).values(rows);
    const details = { mark: specimen.mark, order: specimen.order.number, readings: rows.map((row, i) => ({ id: row.id, ...typed[i] })) };
    await this.record.append(tx, { action: 'reading.entered', noun: 'specimen', nounId: specimen.id, person: caller, details });
    await this.events.tell({ topic: 'specimen', id: specimen.id, orderId: specimen.order.id });
  }

  private async storeCorrection(tx: Transaction, specimen: SpecimenAtWork, wrong: typeof readings.$inferSelect, right: Correction & { id: string }, caller: Caller): Promise<void> {
    const { id, reason, ...typed } = right;
    const reading = { ...typed, quantity: wrong.quantity };
    refuseUnless(MAY_BE_WORKED_ON, specimen.order);
    const [later] = await tx.select({ id: readings.id }).from(readings).where(eq(readings.supersedesId, wrong.id));
    if (later !== undefined) throw alreadyCorrected();
    await refuseFaults(tx, specimen.shape, [reading], () => '');
    await tx.insert(readings).values({ id, specimenId: specimen.id, ...asRead(reading), station: wrong.station, personId: caller.id, readAt: this.clock.now(), supersedesId: wrong.id, reason });
    const details = { mark: specimen.mark, order: specimen.order.number, supersedes: wrong.id, before: { value: wrong.typedValue, unit: wrong.unit, instrumentId: wrong.instrumentId }, after: { id, ...typed }, reason };
    await this.record.append(tx, { action: 'reading.corrected', noun: 'specimen', nounId: specimen.id, person: caller, details });
    await this.events.tell({ topic: 'specimen', id: specimen.id, orderId: specimen.order.id });
  }

  private async specimenOrFail(db: Queries, where: SQL): Promise<SpecimenAtWork> {
    const [row] = await db.select({ id: specimens.id, mark: specimens.mark, shape: specimens.shape, materialClass: samples.materialClass, order: { id: orders.id, number: orders.number, state: orders.state } })
      .from(specimens).innerJoin(samples, eq(samples.id, specimens.sampleId)).innerJoin(orders, eq(orders.id, samples.orderId)).where(where);
    if (row === undefined) throw notFound('specimen');
    return row;
  }

  /** The readings asked for, and what all readings of the specimen say together. */
  private async answer(specimen: SpecimenAtWork, which: SQL | undefined): Promise<ReadingsAnswer> {
    const db = this.database.db;
    const wanted = new Set((await db.select({ id: readings.id }).from(readings).where(which)).map((row) => row.id));
    const all = await readingsOf(db, specimen.id);
    return { readings: all.filter((reading) => wanted.has(reading.id)), measurement: await measurementOf(db, specimen, all) };
  }
}

/** @throws Problem 422 with every field at fault */
async function refuseFaults(tx: Transaction, shape: Shape, typed: readonly Omit<NewReading, 'station'>[], prefix: (i: number) => string): Promise<void> {
  const ids = [...new Set(typed.map((reading) => reading.instrumentId))];
  const rows = await tx.select({ id: instruments.id, name: instruments.name, kind: instruments.kind, inService: instruments.inService }).from(instruments).where(inArray(instruments.id, ids)).orderBy(asc(instruments.id));
  const byId = new Map<string, UsableInstrument>(rows.map((row) => [row.id, row]));
  const faults = typed.flatMap((reading, i) => readingFaults(reading, shape, byId.get(reading.instrumentId)).map(({ path, message }) => ({ path: `${prefix(i)}${path}`, message })));
  if (faults.length > 0) throw invalidFields(faults);
}

/** What is stored of a typed reading: SI, and what was typed beside it. */
function asRead({ quantity, value, unit: symbol, instrumentId }: Omit<NewReading, 'station'>) {
  return { quantity, value: toSI(value, symbol), typedValue: value, unit: unit(symbol)?.symbol ?? symbol, instrumentId };
}
