import { Injectable } from '@nestjs/common';
import type { newReferenceCheck, newReferencePiece, ReferencePiece } from '@strainwright/common/contract/instruments';
import type { ListQuery } from '@strainwright/common/contract/wire';
import type { Dimension } from '@strainwright/common/quantities/units';
import { unit, unitsOf } from '@strainwright/common/quantities/units';
import { count, desc, eq, getTableColumns, inArray, lte, sql, type SQL } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, isDuplicate, type Queries } from '../database/database';
import { matching, sortedBy, stateAsked } from '../database/listing';
import { instruments, referenceChecks, referencePieces } from '../database/schema/instruments';
import { people } from '../database/schema/people';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { invalid, notFound, Problem } from '../platform/problem';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';
import { pieceAnswer } from './reference-piece';

type PieceRow = typeof referencePieces.$inferSelect & { instrumentName: string };

const DIMENSION_OF: Readonly<Record<PieceRow['quantity'], Dimension>> = { 'transit time P': 'time', 'transit time S': 'time', E: 'pressure' };
const SORTS = { name: referencePieces.name, quantity: referencePieces.quantity, instrumentName: instruments.name };
/** The latest checks of a piece that its control chart shows. */
const CHECKS_SHOWN = 200;

@Injectable()
export class ReferenceChecksService {
  constructor(private readonly database: Database, private readonly record: RecordService, private readonly clock: Clock) {}

  async list(query: ListQuery): Promise<{ items: ReferencePiece[]; total: number }> {
    stateAsked(query, []);
    const db = this.database.db;
    const where = matching(query.q, referencePieces.name, instruments.name);
    const rows = await this.select(db, where).orderBy(...sortedBy(query, SORTS, referencePieces.id, 'name')).limit(query.pageSize).offset(query.page * query.pageSize);
    const [counted] = await db.select({ total: count() }).from(referencePieces).innerJoin(instruments, eq(instruments.id, referencePieces.instrumentId)).where(where);
    return { items: await withChecks(db, rows), total: counted?.total ?? 0 };
  }

  one(id: string): Promise<ReferencePiece> {
    return this.answer(this.database.db, id);
  }

  async add(body: z.infer<typeof newReferencePiece>, caller: Caller): Promise<ReferencePiece> {
    const u = checkedUnit(body.quantity, body.unit);
    const row = { ...body, id: newId(), unit: u.symbol, knownValue: body.knownValue * u.factor, knownExpandedUncertainty: body.knownExpandedUncertainty * u.factor, createdAt: this.clock.now() };
    try {
      return await this.database.transaction(async (tx) => {
        const [instrument] = await tx.select({ id: instruments.id }).from(instruments).where(eq(instruments.id, body.instrumentId));
        if (instrument === undefined) throw invalid('instrumentId', 'There is no such instrument');
        await tx.insert(referencePieces).values(row);
        await this.record.append(tx, { action: 'reference-piece.added', noun: 'reference-piece', nounId: row.id, person: caller, details: body });
        return this.answer(tx, row.id);
      });
    } catch (error) {
      if (!isDuplicate(error, 'reference_pieces_name_unique')) throw error;
      const message = 'There is a reference piece of this name already';
      throw new Problem(409, 'reference-piece.name-taken', message, [{ path: 'name', message }]);
    }
  }

  async check(pieceId: string, body: z.infer<typeof newReferenceCheck>, caller: Caller): Promise<ReferencePiece> {
    const checkedAt = new Date(body.checkedAt);
    if (checkedAt > this.clock.now()) throw invalid('checkedAt', 'Lies in the future');
    return this.database.transaction(async (tx) => {
      const piece = await this.findOrFail(tx, pieceId);
      const u = checkedUnit(piece.quantity, body.unit);
      const id = newId();
      await tx.insert(referenceChecks).values({ id, pieceId, value: body.value * u.factor, expandedUncertainty: body.expandedUncertainty * u.factor, checkedAt, personId: caller.id });
      await this.record.append(tx, { action: 'reference-check.entered', noun: 'reference-piece', nounId: pieceId, person: caller, details: { id, name: piece.name, ...body } });
      return this.answer(tx, pieceId);
    });
  }

  private async findOrFail(db: Queries, id: string): Promise<PieceRow> {
    const [row] = await this.select(db, eq(referencePieces.id, id));
    if (row === undefined) throw notFound('reference-piece');
    return row;
  }

  private async answer(db: Queries, id: string): Promise<ReferencePiece> {
    const [answer] = await withChecks(db, [await this.findOrFail(db, id)]);
    if (answer === undefined) throw notFound('reference-piece');
    return answer;
  }

  private select(db: Queries, where: SQL | undefined) {
    return db.select({ ...getTableColumns(referencePieces), instrumentName: instruments.name }).from(referencePieces)
      .innerJoin(instruments, eq(instruments.id, referencePieces.instrumentId)).where(where).$dynamic();
  }
}

/** The latest checks of all the pieces in one statement. */
async function withChecks(db: Queries, pieces: readonly PieceRow[]): Promise<ReferencePiece[]> {
  if (pieces.length === 0) return [];
  const latest = db.select({ ...getTableColumns(referenceChecks), personName: sql<string>`${people.name}`.as('person_name'), place: sql<number>`row_number() over (partition by ${referenceChecks.pieceId} order by ${referenceChecks.checkedAt} desc, ${referenceChecks.id} desc)`.as('place') })
    .from(referenceChecks).innerJoin(people, eq(people.id, referenceChecks.personId)).where(inArray(referenceChecks.pieceId, pieces.map((piece) => piece.id))).as('latest');
  const checks = await db.select().from(latest).where(lte(latest.place, CHECKS_SHOWN)).orderBy(desc(latest.place));
  return pieces.map((piece) => pieceAnswer(piece, checks.filter((check) => check.pieceId === piece.id)));
}

/** @throws Problem 422 at `unit` */
function checkedUnit(quantity: PieceRow['quantity'], symbol: string) {
  const found = unit(symbol);
  if (found?.dimension === DIMENSION_OF[quantity]) return found;
  throw invalid('unit', `${quantity === 'E' ? 'E' : `A ${quantity}`} is given in ${unitsOf(DIMENSION_OF[quantity]).map((u) => u.symbol).join(', ')}`);
}
