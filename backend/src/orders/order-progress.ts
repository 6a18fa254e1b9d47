import type { SpecimenProgress } from '@strainwright/common/contract/orders';
import type { ConstantResult, PerConstant } from '@strainwright/common/contract/result';
import type { DeterminationState } from '@strainwright/common/contract/states';
import { BASIS_OF_RUN, DIMENSIONS_OF_SHAPE, type Basis, type ReadingQuantity, type RunKind, type Shape } from '@strainwright/common/contract/vocabulary';
import { and, asc, eq, exists, inArray, sql, type SQL } from 'drizzle-orm';
import type { Queries } from '../database/database';
import { certificates } from '../database/schema/certificates';
import { determinations } from '../database/schema/determinations';
import { samples, specimens } from '../database/schema/orders';
import { readings } from '../database/schema/readings';
import { fits, runs } from '../database/schema/runs';

interface TestedRow { specimenId: string; kind: RunKind; fitted: boolean }
interface DeterminationRow { id: string; specimenId: string; basis: Basis; state: DeterminationState; constants: PerConstant<ConstantResult | null> | null }

/** Whether all readings are there that the shape asks for, and the mass. */
export function isMeasured(shape: Shape, read: readonly ReadingQuantity[]): boolean {
  return [...DIMENSIONS_OF_SHAPE[shape], 'mass' as const].every((quantity) => read.includes(quantity));
}

/**
 * How far each specimen of an order is, in as many statements whatever their number. To a customer, no determination is told, and
 * constants only once a certificate that carries them has been released.
 */
export async function progressOfSpecimens(db: Queries, orderId: string, forCustomer: boolean): Promise<SpecimenProgress[]> {
  const rows = await db.select({ id: specimens.id, mark: specimens.mark, sampleMark: samples.mark, shape: specimens.shape })
    .from(specimens).innerJoin(samples, eq(samples.id, specimens.sampleId)).where(eq(samples.orderId, orderId)).orderBy(asc(samples.mark), asc(specimens.mark));
  if (rows.length === 0) return [];
  const ofOrder = inArray(specimens.id, rows.map((row) => row.id));
  const read = by(await quantitiesRead(db, ofOrder));
  const tested = by(await kindsTested(db, ofOrder));
  const determined = by(await determinationsOf(db, ofOrder, forCustomer));
  return rows.map((row) => ({
    ...row,
    received: true,
    measured: isMeasured(row.shape, (read.get(row.id) ?? []).map((r) => r.quantity)),
    tested: (tested.get(row.id) ?? []).map((r) => r.kind),
    fitted: (tested.get(row.id) ?? []).filter((r) => r.fitted).map((r) => BASIS_OF_RUN[r.kind]),
    determinations: forCustomer ? [] : (determined.get(row.id) ?? []).map(({ id, basis, state }) => ({ id, basis, state })),
    constants: latestOfEachBasis(determined.get(row.id) ?? []),
  }));
}

async function quantitiesRead(db: Queries, which: SQL): Promise<{ specimenId: string; quantity: ReadingQuantity }[]> {
  return db.selectDistinct({ specimenId: readings.specimenId, quantity: readings.quantity }).from(readings).innerJoin(specimens, eq(specimens.id, readings.specimenId)).where(which);
}

/** Kinds of run recorded on each specimen, and whether a fit of one of them is done. */
async function kindsTested(db: Queries, which: SQL): Promise<TestedRow[]> {
  return db.select({ specimenId: runs.specimenId, kind: runs.kind, fitted: sql<boolean>`bool_or(${exists(db.select({ one: sql`1` }).from(fits).where(and(eq(fits.runId, runs.id), eq(fits.state, 'done'))))})` })
    .from(runs).innerJoin(specimens, eq(specimens.id, runs.specimenId)).where(and(which, eq(runs.state, 'recorded'))).groupBy(runs.specimenId, runs.kind).orderBy(asc(runs.kind));
}

/** Determinations oldest first. Constants only of those that may be shown. */
async function determinationsOf(db: Queries, which: SQL, forCustomer: boolean): Promise<DeterminationRow[]> {
  const released = exists(db.select({ one: sql`1` }).from(certificates).where(and(eq(certificates.state, 'released'), sql`${determinations.id} = any(${certificates.determinationIds})`)));
  const counts = forCustomer ? released : eq(determinations.state, 'accepted');
  return db.select({
    id: determinations.id, specimenId: determinations.specimenId, basis: determinations.basis, state: determinations.state,
    constants: sql<PerConstant<ConstantResult | null> | null>`case when ${counts} then ${determinations.result} -> 'constants' end`,
  }).from(determinations).innerJoin(specimens, eq(specimens.id, determinations.specimenId))
    .where(and(which, forCustomer ? released : undefined)).orderBy(asc(determinations.basis), asc(determinations.number));
}

function latestOfEachBasis(rows: readonly DeterminationRow[]): SpecimenProgress['constants'] {
  const latest = new Map<Basis, SpecimenProgress['constants'][number]>();
  for (const { basis, constants } of rows) if (constants !== null) latest.set(basis, { basis, ...constants });
  return [...latest.values()];
}

function by<R extends { specimenId: string }>(rows: readonly R[]): Map<string, R[]> {
  const found = new Map<string, R[]>();
  for (const row of rows) {
    const group = found.get(row.specimenId);
    if (group === undefined) found.set(row.specimenId, [row]);
    else group.push(row);
  }
  return found;
}
