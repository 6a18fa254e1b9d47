import { EventEmitter } from 'node:events';
import type { PGlite } from '@electric-sql/pglite';

export interface PgResult<R> {
  rows: R[];
  rowCount: number | null;
}

/** The part of a pg.Pool that BullMQ's PostgreSQL backend uses; a real pg.Pool fits. */
export interface PgPool {
  query<R extends object>(text: string, values?: unknown[]): Promise<PgResult<R>>;
  connect(): Promise<PgPoolClient>;
  end(): Promise<void>;
  on(event: 'error', listener: (error: Error) => void): unknown;
}
export interface PgPoolClient {
  query<R extends object>(text: string, values?: unknown[]): Promise<PgResult<R>>;
  release(destroy?: boolean): void;
}

/** BullMQ's SQL files begin with comments: without taking them off, a LISTEN would be missed and its worker wait for the next poll. */
const withoutLeadingComments = (sql: string): string => sql.replace(/^(\s+|--[^\n]*\n?|\/\*[\s\S]*?\*\/)+/, '');

/** PGlite in the clothes of a pg.Pool. It has one session, so every client is that session. */
export class PglitePool extends EventEmitter implements PgPool {
  /** BullMQ asks for this: a connection inside the process cannot drop silently. */
  readonly options = { keepAlive: true };

  constructor(private readonly pglite: PGlite) {
    super();
  }

  async query<R extends object>(text: string, values?: unknown[]): Promise<PgResult<R>> {
    return run<R>(this.pglite, text, values);
  }

  async connect(): Promise<PgliteClient> {
    return new PgliteClient(this.pglite);
  }

  /** The database outlives its pools. */
  async end(): Promise<void> {}
}

class PgliteClient extends EventEmitter implements PgPoolClient {
  private readonly unlisten = new Map<string, () => Promise<void>>();

  constructor(private readonly pglite: PGlite) {
    super();
  }

  async query<R extends object>(text: string, values?: unknown[]): Promise<PgResult<R>> {
    const listen = /^(UN)?LISTEN\s+("(?:[^"]|"")+"|\w+|\*)/i.exec(withoutLeadingComments(text));
    if (listen === null) return run<R>(this.pglite, text, values);
    const channel = (listen[2] ?? '').replace(/^"|"$/g, '').replaceAll('""', '"');
    await (listen[1] === undefined ? this.listen(channel) : this.stop(channel));
    return { rows: [], rowCount: 0 };
  }

  release(): void {
    for (const channel of [...this.unlisten.keys()]) void this.stop(channel);
  }

  private async listen(channel: string): Promise<void> {
    if (this.unlisten.has(channel)) return;
    this.unlisten.set(channel, async () => {});
    this.unlisten.set(channel, await this.pglite.listen(`"${channel}"`, (payload) => this.emit('notification', { channel, payload })));
  }

  private async stop(channel: string): Promise<void> {
    const channels = channel === '*' ? [...this.unlisten.keys()] : [channel];
    for (const name of channels) {
      const end = this.unlisten.get(name);
      this.unlisten.delete(name);
      if (end !== undefined && !this.pglite.closed) await end();
    }
  }
}

async function run<R extends object>(pglite: PGlite, text: string, values?: unknown[]): Promise<PgResult<R>> {
  if (values === undefined || values.length === 0) {
    const last = (await pglite.exec(text)).at(-1);
    return { rows: (last?.rows ?? []) as R[], rowCount: last?.affectedRows || (last?.rows.length ?? 0) };
  }
  const result = await pglite.query<R>(text, values);
  return { rows: result.rows, rowCount: result.affectedRows || result.rows.length };
}
