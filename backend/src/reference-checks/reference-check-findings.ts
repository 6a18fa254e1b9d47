import type { Finding } from '@strainwright/common/contract/result';
import { finding } from '@strainwright/common/findings/findings';
import { isSatisfactory } from '@strainwright/common/statistics/normalized-error';
import { asc, eq, inArray } from 'drizzle-orm';
import type { Queries } from '../database/database';
import { instruments, referenceChecks, referencePieces } from '../database/schema/instruments';
import { enOf } from './reference-piece';

type PieceRow = typeof referencePieces.$inferSelect;
type CheckRow = typeof referenceChecks.$inferSelect;

/**
 * What the reference checks say of instruments used at an instant. A use is in doubt when the check before it was out of limits, or
 * the first one after it: the instrument may have drifted at any time since its last good check.
 */
export async function referenceCheckFindings(db: Queries, instrumentIds: readonly string[], usedAt: Date): Promise<Finding[]> {
  if (instrumentIds.length === 0) return [];
  const pieces = await db.select({ piece: referencePieces, instrumentName: instruments.name }).from(referencePieces)
    .innerJoin(instruments, eq(instruments.id, referencePieces.instrumentId)).where(inArray(referencePieces.instrumentId, [...instrumentIds])).orderBy(asc(referencePieces.name));
  if (pieces.length === 0) return [];
  const checks = await db.select().from(referenceChecks).where(inArray(referenceChecks.pieceId, pieces.map(({ piece }) => piece.id))).orderBy(asc(referenceChecks.checkedAt), asc(referenceChecks.id));
  return pieces.flatMap(({ piece, instrumentName }) => {
    const seen = doubt(piece, checks.filter((check) => check.pieceId === piece.id), usedAt);
    return seen === undefined ? [] : [finding('REFERENCE_CHECK_OUT_OF_LIMITS', instrumentName, `${instrumentName} on ${piece.name}: ${seen}`)];
  });
}

/** Why a use lies in doubt, in words; undefined when it does not. `checks` oldest first. */
function doubt(piece: PieceRow, checks: readonly CheckRow[], usedAt: Date): string | undefined {
  const judged = checks.map((check) => ({ at: check.checkedAt, en: enOf(piece, check) }));
  const before = judged.filter((check) => check.at <= usedAt).at(-1);
  const after = judged.find((check) => check.at > usedAt);
  const bad = [before, after].find((check) => check !== undefined && !isSatisfactory(check.en));
  if (bad === undefined) return undefined;
  const good = judged.filter((check) => check.at < bad.at && isSatisfactory(check.en)).at(-1);
  const day = (at: Date) => at.toISOString().slice(0, 10);
  return `E_n = ${bad.en.toFixed(2)} on ${day(bad.at)} (limit 1), ${good === undefined ? 'no good check before' : `last good check on ${day(good.at)}`}`;
}
