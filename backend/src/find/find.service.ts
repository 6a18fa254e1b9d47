import { Injectable } from '@nestjs/common';
import type { Found } from '@strainwright/common/contract/wire';
import { onlyOwn } from '@strainwright/common/contract/permissions';
import { and, desc, eq, ilike, ne, or, sql, type AnyColumn } from 'drizzle-orm';
import { Database } from '../database/database';
import { containing } from '../database/search';
import { certificates } from '../database/schema/certificates';
import { instruments } from '../database/schema/instruments';
import { orders, samples, specimens } from '../database/schema/orders';
import { visibleOrders } from '../orders/visible-orders';
import type { Caller } from '../session/caller';

/** Of each kind. */
const MOST = 8;

/** Finds anything by its number, mark, title or name. Customers find their own orders and certificates, and nothing of the laboratory's. */
@Injectable()
export class FindService {
  constructor(private readonly database: Database) {}

  async find(q: string, caller: Caller): Promise<Found[]> {
    const text = q.trim();
    if (text === '') return [];
    const found = [...(await this.orders(text, caller)), ...(await this.certificates(text, caller))];
    if (onlyOwn(caller.roles, 'find.read')) return found;
    return [...found, ...(await this.samples(text)), ...(await this.specimens(text)), ...(await this.instruments(text))];
  }

  private async orders(text: string, caller: Caller): Promise<Found[]> {
    const rows = await this.database.db.select({ id: orders.id, number: orders.number, title: orders.title }).from(orders)
      .where(and(visibleOrders(caller, 'find.read'), or(...holds(text, orders.number, orders.title)))).orderBy(exactFirst(text, orders.number), desc(orders.createdAt)).limit(MOST);
    return rows.map((row) => ({ kind: 'order', label: `${row.number} ${row.title}`, path: `/${onlyOwn(caller.roles, 'find.read') ? 'my-orders' : 'orders'}/${row.id}` }));
  }

  private async samples(text: string): Promise<Found[]> {
    const rows = await this.database.db.select({ mark: samples.mark, material: samples.material, orderId: orders.id, number: orders.number }).from(samples)
      .innerJoin(orders, eq(orders.id, samples.orderId)).where(or(...holds(text, samples.mark, samples.material))).orderBy(exactFirst(text, samples.mark), desc(samples.createdAt)).limit(MOST);
    return rows.map((row) => ({ kind: 'sample', label: `${row.mark} ${row.material}, order ${row.number}`, path: `/orders/${row.orderId}` }));
  }

  private async specimens(text: string): Promise<Found[]> {
    const rows = await this.database.db.select({ id: specimens.id, mark: specimens.mark, material: samples.material, number: orders.number }).from(specimens)
      .innerJoin(samples, eq(samples.id, specimens.sampleId)).innerJoin(orders, eq(orders.id, samples.orderId))
      .where(or(...holds(text, specimens.mark))).orderBy(exactFirst(text, specimens.mark), desc(specimens.createdAt)).limit(MOST);
    return rows.map((row) => ({ kind: 'specimen', label: `${row.mark} ${row.material}, order ${row.number}`, path: `/specimens/${row.id}` }));
  }

  private async certificates(text: string, caller: Caller): Promise<Found[]> {
    const released = onlyOwn(caller.roles, 'find.read') ? ne(certificates.state, 'draft') : undefined;
    const rows = await this.database.db.select({ id: certificates.id, number: certificates.number, issue: certificates.issue, state: certificates.state }).from(certificates)
      .innerJoin(orders, eq(orders.id, certificates.orderId)).where(and(visibleOrders(caller, 'find.read'), released, or(...holds(text, certificates.number))))
      .orderBy(exactFirst(text, certificates.number), desc(certificates.number), desc(certificates.issue)).limit(MOST);
    return rows.map((row) => ({ kind: 'certificate', label: `${row.number} issue ${row.issue}, ${row.state}`, path: `/certificates/${row.id}` }));
  }

  private async instruments(text: string): Promise<Found[]> {
    const rows = await this.database.db.select({ id: instruments.id, name: instruments.name, serial: instruments.serial }).from(instruments)
      .where(or(...holds(text, instruments.name, instruments.serial))).orderBy(exactFirst(text, instruments.name), instruments.name).limit(MOST);
    return rows.map((row) => ({ kind: 'instrument', label: `${row.name} (${row.serial})`, path: `/instruments/${row.id}` }));
  }
}

const holds = (text: string, ...columns: AnyColumn[]) => columns.map((column) => ilike(column, containing(text)));
const exactFirst = (text: string, column: AnyColumn) => sql`lower(${column}) <> lower(${text})`;
