/** Columns that many tables share. */
import { integer, timestamp, uuid } from 'drizzle-orm/pg-core';

/** UUIDv7 given by platform/ids. */
export const id = () => uuid('id').primaryKey();
export const instant = (name: string) => timestamp(name, { withTimezone: true, mode: 'date', precision: 3 });
/** Counts the changes of a row that people change; a write names the version it saw. */
export const version = () => integer('version').notNull().default(1);
