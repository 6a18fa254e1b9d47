/** A PostgreSQL cluster of Debian's package, on a socket in a temporary folder; nothing listens on the network. */
import { existsSync, readdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { folderOf, ordinaryAccount, runToEnd, startUntil, stopped } from './debian';

const VERSIONS = '/usr/lib/postgresql';

/** The folder of the newest installed server's programs; undefined when there is none. */
export function postgresPrograms(): string | undefined {
  if (!existsSync(VERSIONS)) return undefined;
  const newest = readdirSync(VERSIONS).map(Number).filter(Number.isFinite).sort((a, b) => b - a)[0];
  return newest === undefined ? undefined : join(VERSIONS, String(newest), 'bin');
}

export interface Postgres {
  /** Of the database that is there from the start. */
  readonly url: string;
  /** Makes a database and answers with its address. */
  createDatabase(name: string): Promise<string>;
  stop(): Promise<void>;
}

export async function startPostgres(): Promise<Postgres> {
  const programs = postgresPrograms();
  if (programs === undefined) throw new Error(`There is no PostgreSQL server under ${VERSIONS}: install Debian's package postgresql`);
  const account = ordinaryAccount();
  const folder = folderOf(account);
  const cluster = join(folder, 'cluster');
  runToEnd(join(programs, 'initdb'), ['-D', cluster, '-U', 'strainwright', '--auth=trust', '--encoding=UTF8', '--locale=C', '--no-sync'], account, folder);
  const settings = { listen_addresses: '', unix_socket_directories: folder, max_connections: '200', fsync: 'off' };
  const args = Object.entries(settings).flatMap(([name, value]) => ['-c', `${name}=${value}`]);
  const server = await startUntil(join(programs, 'postgres'), ['-D', cluster, ...args], account, folder, /ready to accept connections/);
  const urlOf = (database: string) => `postgres://strainwright@localhost/${database}?host=${encodeURIComponent(folder)}`;
  return {
    url: urlOf('postgres'),
    createDatabase: async (name) => {
      runToEnd(join(programs, 'createdb'), ['-h', folder, '-U', 'strainwright', name], account, folder);
      return urlOf(name);
    },
    stop: async () => {
      await stopped(server, 'SIGINT');
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
