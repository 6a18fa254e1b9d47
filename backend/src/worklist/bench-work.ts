import { DIMENSIONS_OF_SHAPE, SHAPES, type RunKind } from '@strainwright/common/contract/vocabulary';
import { and, asc, eq, sql, type SQL } from 'drizzle-orm';
import type { Queries } from '../database/database';
import { orders, samples, specimens } from '../database/schema/orders';
import { customers } from '../database/schema/people';
import { readings } from '../database/schema/readings';
import { runs } from '../database/schema/runs';
import { MOST, type WorkItem } from './work-item';

/** The most urgent first: what is due soonest, then what has waited longest. */
const urgency = [sql`${orders.dueOn} asc nulls last`, asc(orders.createdAt)];

export async function ordersToOpen(db: Queries): Promise<WorkItem[]> {
  const rows = await db.select({ id: orders.id, number: orders.number, title: orders.title, customer: customers.name, since: orders.createdAt, dueOn: orders.dueOn })
    .from(orders).innerJoin(customers, eq(customers.id, orders.customerId)).where(eq(orders.state, 'requested')).orderBy(...urgency).limit(MOST);
  return rows.map((row) => ({ kind: 'order to open', id: row.id, label: `${row.number} ${row.title}`, detail: row.customer, path: `/orders/${row.id}`, since: row.since.toISOString(), dueOn: row.dueOn }));
}

/** The quantities that a specimen's shape asks for, and its mass, as an SQL array. */
const needed = sql`(case ${specimens.shape} ${sql.join(SHAPES.map((shape) => sql`when ${shape} then ${array([...DIMENSIONS_OF_SHAPE[shape], 'mass'])}`), sql` `)} end)`;
const read = sql`array(select distinct ${readings.quantity} from ${readings} where ${readings.specimenId} = ${specimens.id})`;

function array(texts: readonly string[]): SQL {
  return sql`array[${sql.join(texts.map((text) => sql`${text}::text`), sql`, `)}]`;
}

export async function specimensMissingReadings(db: Queries): Promise<WorkItem[]> {
  const missing = sql<string[]>`array(select unnest(${needed}) except select unnest(${read}) order by 1)`;
  const rows = await specimensOfOpenOrders(db, { missing }, sql`not (${needed} <@ ${read})`);
  return rows.map((row) => ({
    kind: 'specimen missing readings', id: row.id, label: `${row.mark}, order ${row.number}`, detail: `Missing ${row.missing.join(', ')}`, path: `/specimens/${row.id}`,
    since: row.since.toISOString(), dueOn: row.dueOn,
  }));
}

/** Kinds of run that the order asks for and the measured specimen has not had. */
export async function runsToMake(db: Queries): Promise<WorkItem[]> {
  const made = sql`array(select ${runs.kind} from ${runs} where ${runs.specimenId} = ${specimens.id} and ${runs.state} = 'recorded')`;
  const missing = sql<RunKind[]>`array(select unnest(${orders.kindsOfRun}) except select unnest(${made}) order by 1)`;
  const rows = await specimensOfOpenOrders(db, { missing }, and(sql`${needed} <@ ${read}`, sql`not (${orders.kindsOfRun} <@ ${made})`));
  return rows.map((row) => ({
    kind: 'run to make', id: row.id, label: `${row.mark}, order ${row.number}`, detail: row.missing.map((kind) => `${kind} run`).join(', '), path: `/specimens/${row.id}`,
    since: row.since.toISOString(), dueOn: row.dueOn,
  }));
}

function specimensOfOpenOrders<M>(db: Queries, { missing }: { missing: SQL<M> }, where: SQL | undefined) {
  return db.select({ id: specimens.id, mark: specimens.mark, number: orders.number, since: specimens.createdAt, dueOn: orders.dueOn, missing })
    .from(specimens).innerJoin(samples, eq(samples.id, specimens.sampleId)).innerJoin(orders, eq(orders.id, samples.orderId))
    .where(and(eq(orders.state, 'open'), where)).orderBy(sql`${orders.dueOn} asc nulls last`, asc(specimens.createdAt), asc(specimens.id)).limit(MOST);
}
