import { Injectable } from '@nestjs/common';
import type { NewOrder, Order, orderQuery, OrderSummary } from '@strainwright/common/contract/orders';
import { onlyOwn } from '@strainwright/common/contract/permissions';
import { mayStep, ORDER_STATES, ORDER_STEPS } from '@strainwright/common/contract/states';
import { and, count, eq, getTableColumns, sql, type SQL } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, type Queries } from '../database/database';
import { matching, sortedBy, stateAsked } from '../database/listing';
import { nextNumber } from '../database/number-series';
import { orders, samples, specimens } from '../database/schema/orders';
import { customers, people } from '../database/schema/people';
import { EventsService } from '../events/events.service';
import { laboratoryToday } from '../laboratory/laboratory-day';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { invalid, notFound, Problem, stale, wrongState } from '../platform/problem';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';
import { certificatesOfOrder } from './order-certificates';
import { progressOfSpecimens } from './order-progress';
import { visibleOrders } from './visible-orders';

type OrderRow = typeof orders.$inferSelect & { customerName: string; requestedBy: string; sampleCount: number; specimenCount: number };
const SORTS = { number: orders.number, title: orders.title, customerName: customers.name, state: orders.state, dueOn: orders.dueOn, createdAt: orders.createdAt };

@Injectable()
export class OrdersService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly events: EventsService, private readonly clock: Clock) {}

  async list(query: z.infer<typeof orderQuery>, caller: Caller): Promise<{ items: OrderSummary[]; total: number }> {
    const state = stateAsked(query, ORDER_STATES);
    const where = and(
      visibleOrders(caller, 'orders.read'),
      matching(query.q, orders.number, orders.title, orders.customerReference, customers.name),
      state === undefined ? undefined : eq(orders.state, state),
      query.customerId === undefined ? undefined : eq(orders.customerId, query.customerId),
    );
    const db = this.database.db;
    const rows = await this.select(db, where).orderBy(...sortedBy(query, SORTS, orders.id, '-createdAt')).limit(query.pageSize).offset(query.page * query.pageSize);
    const [counted] = await db.select({ total: count() }).from(orders).innerJoin(customers, eq(customers.id, orders.customerId)).where(where);
    return { items: rows.map(summary), total: counted?.total ?? 0 };
  }

  async one(id: string, caller: Caller): Promise<Order> {
    const row = await this.findOrFail(this.database.db, id, caller);
    const forCustomer = onlyOwn(caller.roles, 'orders.read');
    const progress = await progressOfSpecimens(this.database.db, id, forCustomer);
    const certificates = await certificatesOfOrder(this.database.db, id, forCustomer);
    const { customerReference, materialDescription, constantsWanted, kindsOfRun, limits, notes, requestedBy } = row;
    return { ...summary(row), customerReference, materialDescription, constantsWanted, kindsOfRun, limits, notes, requestedBy, specimens: progress, certificates };
  }

  async request(body: NewOrder, caller: Caller): Promise<Order> {
    const customerId = customerOf(body, caller);
    const id = newId();
    await this.database.transaction(async (tx) => {
      const [customer] = await tx.select({ id: customers.id }).from(customers).where(eq(customers.id, customerId));
      if (customer === undefined) throw invalid('customerId', 'There is no such customer');
      const year = (await laboratoryToday(tx, this.clock)).slice(0, 4);
      const number = `${year}-${String(await nextNumber(tx, `orders-${year}`)).padStart(4, '0')}`;
      const wanted = { ...body, customerId, constantsWanted: [...new Set(body.constantsWanted)], kindsOfRun: [...new Set(body.kindsOfRun)] };
      await tx.insert(orders).values({ ...wanted, id, number, state: 'requested', requestedById: caller.id, createdAt: this.clock.now() });
      await this.record.append(tx, { action: 'order.requested', noun: 'order', nounId: id, person: caller, details: { number, ...wanted } });
      await this.events.tell({ topic: 'order', id, orderId: id });
    });
    return this.one(id, caller);
  }

  /** One step of the order's states, as the contract has them. */
  async step(id: string, name: 'open' | 'close' | 'cancel', caller: Caller, { version, reason }: { version?: number; reason?: string }): Promise<Order> {
    const { from, to } = ORDER_STEPS[name];
    await this.database.transaction(async (tx) => {
      const row = await this.findOrFail(tx, id, caller, true);
      if (version !== undefined && version !== row.version) throw stale('order', { ...summary(row) });
      if (!mayStep({ action: ORDER_STEPS[name].action, from, to }, row.state)) throw wrongState('order', row.state, `${name} it`);
      await tx.update(orders).set({ state: to, version: row.version + 1 }).where(eq(orders.id, id));
      await this.record.append(tx, { action: `order.${DONE[name]}`, noun: 'order', nounId: id, person: caller, details: { number: row.number, from: row.state, to, reason } });
      await this.events.tell({ topic: 'order', id, orderId: id });
    });
    return this.one(id, caller);
  }

  /** Another customer's order is answered like none at all. */
  private async findOrFail(db: Queries, id: string, caller: Caller, lock = false): Promise<OrderRow> {
    const query = this.select(db, and(eq(orders.id, id), visibleOrders(caller, 'orders.read')));
    const [row] = await (lock ? query.for('update', { of: orders }) : query);
    if (row === undefined) throw notFound('order');
    return row;
  }

  private select(db: Queries, where: SQL | undefined) {
    return db.select({
      ...getTableColumns(orders), customerName: customers.name, requestedBy: people.name,
      sampleCount: sql<number>`(select count(*)::int from ${samples} where ${samples.orderId} = ${orders.id})`,
      specimenCount: sql<number>`(select count(*)::int from ${specimens} join ${samples} on ${samples.id} = ${specimens.sampleId} where ${samples.orderId} = ${orders.id})`,
    }).from(orders).innerJoin(customers, eq(customers.id, orders.customerId)).innerJoin(people, eq(people.id, orders.requestedById)).where(where).$dynamic();
  }
}

const DONE = { open: 'opened', close: 'closed', cancel: 'cancelled' } as const;

function summary(row: OrderRow): OrderSummary {
  const { id, number, title, customerId, customerName, state, dueOn, createdAt, sampleCount, specimenCount, version } = row;
  return { id, number, title, customerId, customerName, state, dueOn, createdAt: createdAt.toISOString(), sampleCount, specimenCount, version };
}

/** A customer orders for itself; the quality manager names the customer. */
function customerOf(body: NewOrder, caller: Caller): string {
  if (caller.customerId === null) {
    if (body.customerId === undefined) throw invalid('customerId', 'Choose the customer');
    return body.customerId;
  }
  if (body.customerId !== undefined && body.customerId !== caller.customerId) {
    const message = 'An order can only be requested for your own organisation';
    throw new Problem(403, 'action.forbidden', message, [{ path: 'customerId', message }]);
  }
  return caller.customerId;
}
