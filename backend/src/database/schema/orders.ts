import { date, index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { Limit, moistureState } from '@strainwright/common/contract/orders';
import type { OrderState } from '@strainwright/common/contract/states';
import type { ConstantName, MaterialClass, RunKind, Shape } from '@strainwright/common/contract/vocabulary';
import type { z } from 'zod';
import { id, instant, version } from './columns';
import { customers, people } from './people';

export const orders = pgTable('orders', {
  id: id(),
  number: text('number').notNull().unique(),
  customerId: uuid('customer_id').notNull().references(() => customers.id),
  title: text('title').notNull(),
  state: text('state').notNull().$type<OrderState>(),
  customerReference: text('customer_reference').notNull(),
  materialDescription: text('material_description').notNull(),
  constantsWanted: text('constants_wanted').array().notNull().$type<ConstantName[]>(),
  kindsOfRun: text('kinds_of_run').array().notNull().$type<RunKind[]>(),
  limits: jsonb('limits').notNull().$type<Limit[]>(),
  dueOn: date('due_on', { mode: 'string' }),
  notes: text('notes').notNull(),
  requestedById: uuid('requested_by_id').notNull().references(() => people.id),
  createdAt: instant('created_at').notNull(),
  version: version(),
}, (t) => [index('orders_customer').on(t.customerId), index('orders_state').on(t.state)]);

export const samples = pgTable('samples', {
  id: id(),
  orderId: uuid('order_id').notNull().references(() => orders.id),
  mark: text('mark').notNull(),
  material: text('material').notNull(),
  materialClass: text('material_class').notNull().$type<MaterialClass>(),
  description: text('description').notNull(),
  receivedOn: date('received_on', { mode: 'string' }).notNull(),
  condition: text('condition').notNull(),
  sampledOn: date('sampled_on', { mode: 'string' }),
  sampledBy: text('sampled_by').notNull(),
  createdAt: instant('created_at').notNull(),
  version: version(),
}, (t) => [uniqueIndex('samples_mark').on(t.orderId, t.mark)]);

export const specimens = pgTable('specimens', {
  id: id(),
  sampleId: uuid('sample_id').notNull().references(() => samples.id),
  mark: text('mark').notNull(),
  shape: text('shape').notNull().$type<Shape>(),
  orientation: text('orientation').notNull(),
  moisture: text('moisture').notNull().$type<z.infer<typeof moistureState>>(),
  notes: text('notes').notNull(),
  createdAt: instant('created_at').notNull(),
  version: version(),
}, (t) => [uniqueIndex('specimens_mark').on(t.sampleId, t.mark), index('specimens_created').on(t.createdAt)]);

/** Kept here so that a series of marks never repeats one: the last specimen number given in a sample. */
export const specimenMarks = pgTable('specimen_marks', {
  sampleId: uuid('sample_id').primaryKey().references(() => samples.id),
  last: integer('last').notNull(),
});
