import { Injectable } from '@nestjs/common';
import type { changeCustomer, Customer, newCustomer } from '@strainwright/common/contract/people';
import type { ListQuery } from '@strainwright/common/contract/wire';
import { and, count, eq } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, isDuplicate, type Queries } from '../database/database';
import { matching, sortedBy, stateAsked } from '../database/listing';
import { customers } from '../database/schema/people';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { notFound, Problem, stale } from '../platform/problem';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';

const SORTS = { name: customers.name, contactEmail: customers.contactEmail };
const answered = { id: customers.id, name: customers.name, address: customers.address, contactEmail: customers.contactEmail, version: customers.version };

@Injectable()
export class CustomersService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly clock: Clock) {}

  async list(query: ListQuery): Promise<{ items: Customer[]; total: number }> {
    stateAsked(query, []);
    const where = matching(query.q, customers.name, customers.contactEmail, customers.address);
    const items = await this.database.db.select(answered).from(customers).where(where)
      .orderBy(...sortedBy(query, SORTS, customers.id, 'name')).limit(query.pageSize).offset(query.page * query.pageSize);
    const [counted] = await this.database.db.select({ total: count() }).from(customers).where(where);
    return { items, total: counted?.total ?? 0 };
  }

  one(id: string): Promise<Customer> {
    return this.findOrFail(this.database.db, id);
  }

  async add(body: z.infer<typeof newCustomer>, caller: Caller): Promise<Customer> {
    return this.unlessNameTaken(() => this.database.transaction(async (tx) => {
      const id = newId();
      await tx.insert(customers).values({ ...body, id, createdAt: this.clock.now() });
      await this.record.append(tx, { action: 'customer.added', noun: 'customer', nounId: id, person: caller, details: body });
      return this.findOrFail(tx, id);
    }));
  }

  async change(id: string, { version, ...change }: z.infer<typeof changeCustomer>, caller: Caller): Promise<Customer> {
    return this.unlessNameTaken(() => this.database.transaction(async (tx) => {
      const [changed] = await tx.update(customers).set({ ...change, version: version + 1 }).where(and(eq(customers.id, id), eq(customers.version, version))).returning(answered);
      if (changed === undefined) throw stale('customer', await this.findOrFail(tx, id));
      await this.record.append(tx, { action: 'customer.changed', noun: 'customer', nounId: id, person: caller, details: change });
      return changed;
    }));
  }

  private async findOrFail(db: Queries, id: string): Promise<Customer> {
    const [row] = await db.select(answered).from(customers).where(eq(customers.id, id));
    if (row === undefined) throw notFound('customer');
    return row;
  }

  private async unlessNameTaken<T>(work: () => Promise<T>): Promise<T> {
    try {
      return await work();
    } catch (error) {
      if (!isDuplicate(error, 'customers_name_unique')) throw error;
      const message = 'There is a customer of this name already';
      throw new Problem(409, 'customer.name-taken', message, [{ path: 'name', message }]);
    }
  }
}
