import { Injectable } from '@nestjs/common';
import type { newSpecimens, specimenQuery, SpecimenSummary } from '@strainwright/common/contract/orders';
import type { Specimen } from '@strainwright/common/contract/specimens';
import type { ListQuery } from '@strainwright/common/contract/wire';
import { and, asc, count, eq, getTableColumns, inArray, sql, type SQL } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, isDuplicate, type Queries } from '../database/database';
import { matching, sortedBy, stateAsked } from '../database/listing';
import { orders, samples, specimens } from '../database/schema/orders';
import { customers } from '../database/schema/people';
import { readings } from '../database/schema/readings';
import { runs } from '../database/schema/runs';
import { EventsService } from '../events/events.service';
import { lockedOrder, MAY_BE_LOGGED_ON } from '../orders/open-order';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { invalid, notFound, Problem } from '../platform/problem';
import { measurementOf } from '../readings/measurement';
import { readingsOf } from '../readings/reading-answer';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';
import { nextMarks } from './specimen-marks';
import { determinationsOf, runsOf } from './specimen-work';

type NewSpecimens = z.infer<typeof newSpecimens>;
type SpecimenRow = Awaited<ReturnType<SpecimensService['findOrFail']>>;

const SORTS = {
  mark: specimens.mark, createdAt: specimens.createdAt, material: samples.material, sampleMark: samples.mark, orderNumber: orders.number, customerName: customers.name, shape: specimens.shape,
};

@Injectable()
export class SpecimensService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly events: EventsService, private readonly clock: Clock) {}

  async list(query: z.infer<typeof specimenQuery>): Promise<{ items: SpecimenSummary[]; total: number }> {
    stateAsked(query, []);
    const where = and(
      matching(query.q, specimens.mark, samples.material, orders.number, customers.name),
      query.orderId === undefined ? undefined : eq(samples.orderId, query.orderId),
      query.sampleId === undefined ? undefined : eq(specimens.sampleId, query.sampleId),
    );
    const db = this.database.db;
    const rows = await this.select(db, where).orderBy(...sortedBy(query, SORTS, specimens.id, '-createdAt')).limit(query.pageSize).offset(query.page * query.pageSize);
    const [counted] = await db.select({ total: count() }).from(specimens).innerJoin(samples, eq(samples.id, specimens.sampleId))
      .innerJoin(orders, eq(orders.id, samples.orderId)).innerJoin(customers, eq(customers.id, orders.customerId)).where(where);
    return { items: rows.map(summary), total: counted?.total ?? 0 };
  }

  async listOfSample(sampleId: string, query: ListQuery): Promise<{ items: SpecimenSummary[]; total: number }> {
    await this.sampleOrFail(this.database.db, sampleId);
    return this.list({ ...query, sort: query.sort ?? 'mark', sampleId });
  }

  async one(id: string): Promise<Specimen> {
    const db = this.database.db;
    const row = await this.findOrFail(db, id);
    const all = await readingsOf(db, id);
    return {
      ...summary(row), orientation: row.orientation, moisture: row.moisture, notes: row.notes,
      readings: all, measurement: await measurementOf(db, row, all), runs: await runsOf(db, id), determinations: await determinationsOf(db, id),
    };
  }

  /** Logs one specimen, or several alike with the next free marks. */
  async log(sampleId: string, body: NewSpecimens, caller: Caller): Promise<{ items: SpecimenSummary[] }> {
    const { count: wanted, mark, ...alike } = body;
    if (mark !== undefined && wanted > 1) throw invalid('mark', 'One mark is for one specimen: leave it out to log several');
    try {
      return await this.database.transaction(async (tx) => {
        const sample = await this.sampleOrFail(tx, sampleId);
        const order = await lockedOrder(tx, sample.orderId, MAY_BE_LOGGED_ON);
        const marks = mark === undefined ? await nextMarks(tx, sample, wanted) : [mark];
        const rows = marks.map((own) => ({ ...alike, id: newId(), sampleId, mark: own, createdAt: this.clock.now() }));
        await tx.insert(specimens).values(rows);
        await this.record.append(tx, ...rows.map((row) => ({
          action: 'specimen.logged', noun: 'specimen', nounId: row.id, person: caller, details: { order: order.number, sample: sample.mark, mark: row.mark, ...alike },
        })));
        await this.events.tell({ topic: 'order', id: order.id, orderId: order.id });
        const logged = await this.select(tx, inArray(specimens.id, rows.map((row) => row.id))).orderBy(asc(specimens.id));
        return { items: logged.map(summary) };
      });
    } catch (error) {
      if (!isDuplicate(error, 'specimens_mark')) throw error;
      const message = `The sample has a specimen marked ${mark ?? ''} already`;
      throw new Problem(409, 'specimen.mark-taken', message, [{ path: 'mark', message }]);
    }
  }

  private async findOrFail(db: Queries, id: string) {
    const [row] = await this.select(db, eq(specimens.id, id));
    if (row === undefined) throw notFound('specimen');
    return row;
  }

  private async sampleOrFail(db: Queries, id: string): Promise<{ id: string; orderId: string; mark: string }> {
    const [row] = await db.select({ id: samples.id, orderId: samples.orderId, mark: samples.mark }).from(samples).where(eq(samples.id, id));
    if (row === undefined) throw notFound('sample');
    return row;
  }

  private select(db: Queries, where: SQL | undefined) {
    return db.select({
      ...getTableColumns(specimens), sampleMark: samples.mark, material: samples.material, materialClass: samples.materialClass,
      orderId: orders.id, orderNumber: orders.number, customerName: customers.name,
      readingCount: sql<number>`(select count(*)::int from ${readings} where ${readings.specimenId} = ${specimens.id})`,
      runCount: sql<number>`(select count(*)::int from ${runs} where ${runs.specimenId} = ${specimens.id})`,
    }).from(specimens).innerJoin(samples, eq(samples.id, specimens.sampleId)).innerJoin(orders, eq(orders.id, samples.orderId))
      .innerJoin(customers, eq(customers.id, orders.customerId)).where(where).$dynamic();
  }
}

function summary({ orientation: _o, moisture: _m, notes: _n, createdAt, ...row }: SpecimenRow): SpecimenSummary {
  return { ...row, createdAt: createdAt.toISOString() };
}
