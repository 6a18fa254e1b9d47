import { Injectable } from '@nestjs/common';
import type { newSample, Sample } from '@strainwright/common/contract/orders';
import type { ListQuery } from '@strainwright/common/contract/wire';
import { and, count, eq, getTableColumns, sql, type SQL } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, isDuplicate, type Queries, type Transaction } from '../database/database';
import { matching, sortedBy, stateAsked } from '../database/listing';
import { orders, samples, specimens } from '../database/schema/orders';
import { EventsService } from '../events/events.service';
import { laboratoryToday } from '../laboratory/laboratory-day';
import { lockedOrder, MAY_BE_LOGGED_ON } from '../orders/open-order';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { invalid, notFound, Problem } from '../platform/problem';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';

type NewSample = z.infer<typeof newSample>;
type SampleRow = typeof samples.$inferSelect & { orderNumber: string; specimenCount: number };

const SORTS = { mark: samples.mark, material: samples.material, receivedOn: samples.receivedOn, createdAt: samples.createdAt };

@Injectable()
export class SamplesService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly events: EventsService, private readonly clock: Clock) {}

  async list(orderId: string, query: ListQuery): Promise<{ items: Sample[]; total: number }> {
    stateAsked(query, []);
    const db = this.database.db;
    const [order] = await db.select({ id: orders.id }).from(orders).where(eq(orders.id, orderId));
    if (order === undefined) throw notFound('order');
    const where = and(eq(samples.orderId, orderId), matching(query.q, samples.mark, samples.material, samples.description));
    const rows = await this.select(db, where).orderBy(...sortedBy(query, SORTS, samples.id, 'createdAt')).limit(query.pageSize).offset(query.page * query.pageSize);
    const [counted] = await db.select({ total: count() }).from(samples).where(where);
    return { items: rows.map(answer), total: counted?.total ?? 0 };
  }

  one(id: string): Promise<Sample> {
    return this.findOrFail(this.database.db, id);
  }

  async log(orderId: string, body: NewSample, caller: Caller): Promise<Sample> {
    const today = await laboratoryToday(this.database.db, this.clock);
    if (body.receivedOn > today) throw invalid('receivedOn', 'Lies in the future');
    if (body.sampledOn !== null && body.sampledOn > body.receivedOn) throw invalid('sampledOn', 'Lies after the day of receipt');
    const id = newId();
    try {
      return await this.database.transaction(async (tx) => {
        const order = await lockedOrder(tx, orderId, MAY_BE_LOGGED_ON);
        const mark = body.mark ?? (await nextMark(tx, orderId));
        await tx.insert(samples).values({ ...body, id, orderId, mark, createdAt: this.clock.now() });
        await this.record.append(tx, { action: 'sample.logged', noun: 'sample', nounId: id, person: caller, details: { order: order.number, ...body, mark } });
        await this.events.tell({ topic: 'order', id: orderId, orderId });
        return this.findOrFail(tx, id);
      });
    } catch (error) {
      if (!isDuplicate(error, 'samples_mark')) throw error;
      const message = `The order has a sample marked ${body.mark ?? ''} already`;
      throw new Problem(409, 'sample.mark-taken', message, [{ path: 'mark', message }]);
    }
  }

  private async findOrFail(db: Queries, id: string): Promise<Sample> {
    const [row] = await this.select(db, eq(samples.id, id));
    if (row === undefined) throw notFound('sample');
    return answer(row);
  }

  private select(db: Queries, where: SQL | undefined) {
    return db.select({
      ...getTableColumns(samples), orderNumber: orders.number,
      specimenCount: sql<number>`(select count(*)::int from ${specimens} where ${specimens.sampleId} = ${samples.id})`,
    }).from(samples).innerJoin(orders, eq(orders.id, samples.orderId)).where(where).$dynamic();
  }
}

/** S1, S2, …: one above the highest of the order, marks of another form left aside. */
async function nextMark(tx: Transaction, orderId: string): Promise<string> {
  const [row] = await tx.select({ highest: sql<number>`coalesce(max(substring(${samples.mark} from '^S([0-9]{1,6})$')::int), 0)` }).from(samples).where(eq(samples.orderId, orderId));
  return `S${(row?.highest ?? 0) + 1}`;
}

function answer({ createdAt: _, ...row }: SampleRow): Sample {
  return row;
}
