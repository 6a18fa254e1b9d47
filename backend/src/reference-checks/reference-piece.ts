import type { ReferencePiece } from '@strainwright/common/contract/instruments';
import { isSatisfactory, normalizedError } from '@strainwright/common/statistics/normalized-error';
import type { referenceChecks, referencePieces } from '../database/schema/instruments';
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
