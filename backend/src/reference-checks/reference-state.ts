import type { Finding } from '@strainwright/common/contract/result';
import type { ReferencePiece } from '@strainwright/common/contract/instruments';
import { finding } from '@strainwright/common/findings/findings';
import { isSatisfactory, normalizedError } from '@strainwright/common/statistics/normalized-error';
import { asc, eq, inArray } from 'drizzle-orm';
import type { Queries } from '../database/database';
import { instruments, referenceChecks, referencePieces } from '../database/schema/instruments';
import { differenceFromSI, storedUnit } from '../instruments/instrument-units';

type PieceRow = typeof referencePieces.$inferSelect;
type CheckRow = typeof referenceChecks.$inferSelect;

/** E_n of a check against the piece's known value. */
export function enOf(piece: Pick<PieceRow, 'knownValue' | 'knownExpandedUncertainty'>, check: Pick<CheckRow, 'value' | 'expandedUncertainty'>): number {
  return normalizedError(check, { value: piece.knownValue, expandedUncertainty: piece.knownExpandedUncertainty });
}

/** A piece as people see it, in its own unit; its checks oldest first. A piece that was never checked is within limits. */
export function pieceAnswer(piece: PieceRow & { instrumentName: string }, checks: readonly (CheckRow & { personName: string })[]): ReferencePiece {
  const own = (si: number) => Number(differenceFromSI(si, storedUnit(piece.unit)).toPrecision(14));
  const told = checks.map((check) => {
    const en = enOf(piece, check);
    return { id: check.id, value: own(check.value), expandedUncertainty: own(check.expandedUncertainty), checkedAt: check.checkedAt.toISOString(), personName: check.personName, en, withinLimits: isSatisfactory(en) };
  });
  return {
    id: piece.id, name: piece.name, quantity: piece.quantity, knownValue: own(piece.knownValue), knownExpandedUncertainty: own(piece.knownExpandedUncertainty), unit: piece.unit,
    instrumentId: piece.instrumentId, instrumentName: piece.instrumentName, checks: told, withinLimits: told.at(-1)?.withinLimits ?? true,
  };
}

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
