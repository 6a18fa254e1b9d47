import { Injectable } from '@nestjs/common';
import type { Method, newMethod, newMethodVersion } from '@strainwright/common/contract/instruments';
import type { ListQuery } from '@strainwright/common/contract/wire';
import { and, count, eq, max, sql, type SQL } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, isDuplicate, type Queries, type Transaction } from '../database/database';
import { matching, sortedBy, stateAsked } from '../database/listing';
import { methods } from '../database/schema/instruments';
import { people } from '../database/schema/people';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { invalid, notFound, Problem, refused } from '../platform/problem';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';

const SORTS = { code: methods.code, name: methods.name, kind: methods.kind, createdAt: methods.createdAt };

/** True for the highest version of its code. */
const isCurrent = sql<boolean>`not exists (select 1 from ${methods} later where later.code = ${methods.code} and later.version_number > ${methods.versionNumber})`;

/** Written procedures of the laboratory. Each version is a row that never changes. */
@Injectable()
export class MethodsService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly clock: Clock) {}

  async list(query: ListQuery): Promise<{ items: Method[]; total: number }> {
    const state = stateAsked(query, ['current', 'replaced']);
    const where = and(
      matching(query.q, methods.code, methods.name, methods.standard),
      state === undefined ? undefined : state === 'current' ? isCurrent : sql`not ${isCurrent}`,
    );
    const items = await this.select(this.database.db, where)
      .orderBy(...sortedBy(query, SORTS, methods.id, 'code')).limit(query.pageSize).offset(query.page * query.pageSize);
    const [counted] = await this.database.db.select({ total: count() }).from(methods).where(where);
    return { items: items.map(methodAnswer), total: counted?.total ?? 0 };
  }

  one(id: string): Promise<Method> {
    return this.findOrFail(this.database.db, id);
  }

  async write(body: z.infer<typeof newMethod>, caller: Caller): Promise<Method> {
    try {
      return await this.database.transaction((tx) => this.store(tx, body, 1, caller));
    } catch (error) {
      if (!isDuplicate(error, 'methods_version')) throw error;
      const message = 'There is a method of this code already; write a new version of it';
      throw new Problem(409, 'method.code-taken', message, [{ path: 'code', message }]);
    }
  }

  async revise(id: string, body: z.infer<typeof newMethodVersion>, caller: Caller): Promise<Method> {
    try {
      return await this.database.transaction(async (tx) => {
        const { code, kind } = await this.findOrFail(tx, id);
        if (body.kind !== kind) throw invalid('kind', `This method is for ${kind} runs; write a method of another code`);
        const [latest] = await tx.select({ number: max(methods.versionNumber) }).from(methods).where(eq(methods.code, code));
        return this.store(tx, { ...body, code }, (latest?.number ?? 0) + 1, caller);
      });
    } catch (error) {
      if (isDuplicate(error, 'methods_version')) throw refused('method.revised-meanwhile', 'Somebody wrote a new version of this method just now. Load it again.');
      throw error;
    }
  }

  private async store(tx: Transaction, body: z.infer<typeof newMethod>, versionNumber: number, caller: Caller): Promise<Method> {
    const row = { ...body, id: newId(), versionNumber, createdById: caller.id, createdAt: this.clock.now() };
    await tx.insert(methods).values(row);
    await this.record.append(tx, { action: 'method.written', noun: 'method', nounId: row.id, person: caller, details: { ...body, versionNumber } });
    return this.findOrFail(tx, row.id);
  }

  private async findOrFail(db: Queries, id: string): Promise<Method> {
    const [row] = await this.select(db, eq(methods.id, id));
    if (row === undefined) throw notFound('method');
    return methodAnswer(row);
  }

  private select(db: Queries, where: SQL | undefined) {
    return db.select({ method: methods, current: isCurrent, createdBy: people.name }).from(methods).innerJoin(people, eq(people.id, methods.createdById)).where(where).$dynamic();
  }
}

function methodAnswer({ method, current, createdBy }: { method: typeof methods.$inferSelect; current: boolean; createdBy: string }): Method {
  const { createdById: _, ...told } = method;
  return { ...told, createdAt: method.createdAt.toISOString(), createdBy, current };
}
