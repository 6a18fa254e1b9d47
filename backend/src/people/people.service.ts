import { Injectable } from '@nestjs/common';
import type { changeOwnPassword, changePerson, newPerson, ownSettings, Person } from '@strainwright/common/contract/people';
import type { ListQuery } from '@strainwright/common/contract/wire';
import { and, arrayContains, asc, count, desc, eq, ilike, ne, or, sql } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, isDuplicate, type Transaction } from '../database/database';
import { containing } from '../database/search';
import { customers, people } from '../database/schema/people';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { invalid, notFound, refused, stale } from '../platform/problem';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';
import { Passwords } from '../session/passwords';
import { SessionService } from '../session/session.service';

type PersonRow = typeof people.$inferSelect;

/** Accounts: who may sign in, in which roles, for which customer. */
@Injectable()
export class PeopleService {
  constructor(
    private readonly database: Database,
    private readonly passwords: Passwords,
    private readonly session: SessionService,
    private readonly record: RecordService,
    private readonly clock: Clock,
  ) {}

  async list(query: ListQuery): Promise<{ items: Person[]; total: number }> {
    const where = and(
      query.q === undefined || query.q === '' ? undefined : or(ilike(people.name, containing(query.q)), ilike(people.email, containing(query.q)), ilike(customers.name, containing(query.q))),
      query.state === 'active' ? eq(people.active, true) : query.state === 'inactive' ? eq(people.active, false) : undefined,
    );
    const column = query.sort?.endsWith('email') === true ? people.email : people.name;
    const order = query.sort?.startsWith('-') === true ? desc(column) : asc(column);
    const rows = await this.database.db.select({ person: people, customerName: customers.name }).from(people).leftJoin(customers, eq(customers.id, people.customerId)).where(where).orderBy(order, asc(people.id)).limit(query.pageSize).offset(query.page * query.pageSize);
    const [total] = await this.database.db.select({ n: count() }).from(people).leftJoin(customers, eq(customers.id, people.customerId)).where(where);
    return { items: rows.map((row) => asPerson(row.person, row.customerName)), total: total?.n ?? 0 };
  }

  async create(me: Caller, input: z.infer<typeof newPerson>): Promise<Person> {
    this.passwords.check(input.password, input, 'password');
    const { password, ...rest } = input;
    const row = { ...rest, id: newId(), passwordHash: await this.passwords.hash(password), createdAt: this.clock.now() };
    try {
      return await this.database.transaction(async (tx) => {
        const customerName = await this.customerName(tx, input.customerId);
        const [created] = await tx.insert(people).values(row).returning();
        if (created === undefined) throw notFound('person');
        await this.record.append(tx, { action: 'person.added', noun: 'person', nounId: row.id, person: me, details: { name: row.name, email: row.email, roles: row.roles, customerId: row.customerId } });
        return asPerson(created, customerName);
      });
    } catch (error) {
      if (isDuplicate(error)) throw invalid('email', 'There is an account with this e-mail address already', 'person.email-taken');
      throw error;
    }
  }

  /** A change of roles, customer, password or activity ends the person's sign-ins, so that it holds at once. */
  async change(me: Caller, id: string, input: z.infer<typeof changePerson>): Promise<Person> {
    const { password, version, ...wanted } = input;
    const passwordHash = password === undefined ? undefined : await this.passwords.hash(password);
    return this.database.transaction(async (tx) => {
      const before = await this.findOrFail(tx, id);
      if (before.version !== version) throw stale('person', { ...asPerson(before, null) });
      if (password !== undefined) this.passwords.check(password, before, 'password');
      await this.keepAnAdministrator(tx, before, wanted);
      const customerName = await this.customerName(tx, wanted.customerId);
      const [after] = await tx.update(people).set({ ...wanted, ...(passwordHash === undefined ? {} : { passwordHash }), version: version + 1 }).where(and(eq(people.id, id), eq(people.version, version))).returning();
      if (after === undefined) throw stale('person', { ...asPerson(await this.findOrFail(tx, id), null) });
      const rightsChanged = !after.active || password !== undefined || after.customerId !== before.customerId || [...after.roles].sort().join() !== [...before.roles].sort().join();
      if (rightsChanged) await this.session.revokeAll(tx, id, id === me.id ? me.familyId : undefined);
      await this.record.append(tx, { action: 'person.changed', noun: 'person', nounId: id, person: me, details: { ...wanted, passwordChanged: password !== undefined } });
      return asPerson(after, customerName);
    });
  }

  async changeOwnSettings(me: Caller, input: z.infer<typeof ownSettings>): Promise<void> {
    await this.database.transaction(async (tx) => {
      await tx.update(people).set({ ...input, version: sql`${people.version} + 1` }).where(eq(people.id, me.id));
      await this.record.append(tx, { action: 'person.own-settings-changed', noun: 'person', nounId: me.id, person: me, details: input });
    });
  }

  /** Ends the person's other sign-ins. */
  async changeOwnPassword(me: Caller, input: z.infer<typeof changeOwnPassword>): Promise<void> {
    await this.session.confirmPassword(me.id, input.password);
    this.passwords.check(input.newPassword, me, 'newPassword');
    const passwordHash = await this.passwords.hash(input.newPassword);
    await this.database.transaction(async (tx) => {
      await tx.update(people).set({ passwordHash, version: sql`${people.version} + 1` }).where(eq(people.id, me.id));
      await this.session.revokeAll(tx, me.id, me.familyId);
      await this.record.append(tx, { action: 'person.own-password-changed', noun: 'person', nounId: me.id, person: me });
    });
  }

  /** Somebody must be left who can undo this. */
  private async keepAnAdministrator(tx: Transaction, before: PersonRow, after: { roles: string[]; active: boolean }): Promise<void> {
    const loses = before.active && before.roles.includes('administrator') && !(after.active && after.roles.includes('administrator'));
    if (!loses) return;
    const [other] = await tx.select({ id: people.id }).from(people).where(and(ne(people.id, before.id), eq(people.active, true), arrayContains(people.roles, ['administrator']))).limit(1);
    if (other === undefined) throw refused('person.last-administrator', 'This is the last administrator. Make another one first.');
  }

  private async customerName(tx: Transaction, customerId: string | null): Promise<string | null> {
    if (customerId === null) return null;
    const [customer] = await tx.select({ name: customers.name }).from(customers).where(eq(customers.id, customerId));
    if (customer === undefined) throw invalid('customerId', 'There is no such customer', 'customer.unknown');
    return customer.name;
  }

  private async findOrFail(tx: Transaction, id: string): Promise<PersonRow> {
    const [row] = await tx.select().from(people).where(eq(people.id, id)).for('update');
    if (row === undefined) throw notFound('person');
    return row;
  }
}

function asPerson(row: PersonRow, customerName: string | null): Person {
  const { id, name, email, roles, customerId, active, lastSignInAt, version } = row;
  return { id, name, email, roles, customerId, customerName, active, lastSignInAt: lastSignInAt?.toISOString() ?? null, version };
}
