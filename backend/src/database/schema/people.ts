import { boolean, index, integer, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { Role } from '@strainwright/common/contract/vocabulary';
import { id, instant, version } from './columns';

export const customers = pgTable('customers', {
  id: id(),
  name: text('name').notNull().unique(),
  address: text('address').notNull(),
  contactEmail: text('contact_email').notNull(),
  createdAt: instant('created_at').notNull(),
  version: version(),
});

export const people = pgTable('people', {
  id: id(),
  email: text('email').notNull().unique(),
  name: text('name').notNull(),
  passwordHash: text('password_hash').notNull(),
  roles: text('roles').array().notNull().$type<Role[]>(),
  customerId: uuid('customer_id').references(() => customers.id),
  active: boolean('active').notNull().default(true),
  decimalStyle: text('decimal_style').notNull().default('.').$type<'.' | ','>(),
  lastSignInAt: instant('last_sign_in_at'),
  createdAt: instant('created_at').notNull(),
  version: version(),
});

/** Refresh tokens: a family is one sign-in; each use rotates the token, and a second use of one revokes its family. */
export const sessions = pgTable('sessions', {
  id: id(),
  personId: uuid('person_id').notNull().references(() => people.id),
  familyId: uuid('family_id').notNull(),
  tokenHash: text('token_hash').notNull(),
  createdAt: instant('created_at').notNull(),
  expiresAt: instant('expires_at').notNull(),
  usedAt: instant('used_at'),
  revokedAt: instant('revoked_at'),
}, (t) => [uniqueIndex('sessions_token').on(t.tokenHash), index('sessions_family').on(t.familyId), index('sessions_person').on(t.personId)]);

/** One row. */
export const laboratory = pgTable('laboratory', {
  id: integer('id').primaryKey(),
  name: text('name').notNull(),
  address: text('address').notNull(),
  timeZone: text('time_zone').notNull(),
  separationOfDuties: boolean('separation_of_duties').notNull().default(true),
  version: version(),
});

/** Last number given, by kind and year: orders, certificates. */
export const numberSeries = pgTable('number_series', {
  series: text('series').primaryKey(),
  last: integer('last').notNull(),
});
