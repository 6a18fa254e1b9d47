import { AsyncLocalStorage } from 'node:async_hooks';
import { Logger } from '@nestjs/common';
import type { PgDatabase, PgQueryResultHKT } from 'drizzle-orm/pg-core';
import type { PgPool } from './pool';
import { errorText } from '../platform/error-text';

/** Drizzle over PGlite or over a PostgreSQL server: the same type, so that nothing else knows which. */
export type Queries = PgDatabase<PgQueryResultHKT>;
/** Queries inside a transaction. */
export type Transaction = Parameters<Parameters<Queries['transaction']>[0]>[0];

interface Open {
  open: boolean;
  afterCommit: (() => unknown)[];
}
const running = new AsyncLocalStorage<Open>();

/** True while the caller runs inside `Database.transaction`. */
export const insideTransaction = (): boolean => running.getStore()?.open === true;

/** Serialisation failures and deadlocks: the work may be done again from the start. */
const REPEATABLE = new Set(['40001', '40P01']);

export class Database {
  private readonly logger = new Logger('Database');

  constructor(
    readonly kind: 'embedded' | 'server',
    /** For single statements outside a transaction. */
    readonly db: Queries,
    /** What BullMQ's PostgreSQL backend talks to. */
    readonly pool: PgPool,
    private readonly closeAll: () => Promise<void>,
  ) {}

  /**
   * Runs work in one transaction: all of it is kept, or nothing. Inside, use `tx` only; on the embedded database any other
   * statement would wait for this transaction to end, for ever, so it is refused. The work may run again after a deadlock:
   * it must do nothing but talk to the database.
   */
  async transaction<T>(work: (tx: Transaction) => Promise<T>): Promise<T> {
    if (insideTransaction()) throw new Error('A transaction is open already: hand its `tx` on');
    for (let attempt = 1; ; attempt += 1) {
      const store: Open = { open: true, afterCommit: [] };
      try {
        const result = await running.run(store, () => this.db.transaction(work));
        store.open = false;
        await this.runAfterCommit(store);
        return result;
      } catch (error) {
        store.open = false;
        if (attempt < 4 && REPEATABLE.has(sqlState(error) ?? '')) continue;
        throw error;
      }
    }
  }

  /** Runs `task` when the transaction around the caller has been committed, or at once when there is none; its failure is logged. */
  async afterCommit(task: () => unknown): Promise<void> {
    const store = running.getStore();
    if (store?.open === true) store.afterCommit.push(task);
    else await this.attempt(task);
  }

  close(): Promise<void> {
    return this.closeAll();
  }

  private async runAfterCommit(store: Open): Promise<void> {
    for (const task of store.afterCommit) await this.attempt(task);
  }

  private async attempt(task: () => unknown): Promise<void> {
    try {
      await task();
    } catch (error) {
      this.logger.warn(`After a commit: ${errorText(error)}`);
    }
  }
}

/** The SQLSTATE of a database error, whichever driver and wrapper it came through. */
export function sqlState(error: unknown): string | undefined {
  for (let e: unknown = error; typeof e === 'object' && e !== null; e = (e as { cause?: unknown }).cause) {
    const code = (e as { code?: unknown }).code;
    if (typeof code === 'string' && /^[0-9A-Z]{5}$/.test(code)) return code;
  }
  return undefined;
}

/** True when the error says that a unique constraint (of that name, when given) would be broken. */
export function isDuplicate(error: unknown, constraint?: string): boolean {
  if (sqlState(error) !== '23505') return false;
  if (constraint === undefined) return true;
  for (let e: unknown = error; typeof e === 'object' && e !== null; e = (e as { cause?: unknown }).cause) {
    if ((e as { constraint?: unknown }).constraint === constraint) return true;
  }
  return false;
}

/** Rows of a raw `execute`, whose type the two drivers do not share. */
export function rowsOf<T>(result: unknown): T[] {
  return (result as { rows: T[] }).rows;
}
