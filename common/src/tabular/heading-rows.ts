/** Which rows above the data hold headings and units, among titles, operators, rulers and channel numbers. */
import { roleOfHeading } from './heading-words';
import { splitHeading, unitCell } from './headings';
import { filledCells, type Row } from './dialect';
import { unit } from '../quantities/units';

export interface HeadingRows {
  readonly headingRow: number | null;
  readonly unitsRow: number | null;
}

/** Rows above the data that are looked at: headings, units, and a row of channel numbers or sensors between them. */
const LOOKED_AT = 3;

/** Units in at least half of its cells, and no word of the trade in the others: those are units that are not known. */
function isUnitsRow(row: Row): boolean {
  const cells = filledCells(row);
  const stated = cells.filter((c) => (unitCell(c) ?? '') !== '').length;
  return stated > 0 && stated * 2 >= cells.length && cells.every((c) => unitCell(c) !== null || roleOfHeading(c) === null);
}

/** How much a row speaks of channels; the number of a channel says little. */
function spoken(row: Row): number {
  return row.map(splitHeading).reduce((sum, { name, unitText }) => {
    const role = roleOfHeading(name);
    return sum + (unit(unitText) !== undefined || (role !== null && role !== 'trace') ? 1 : role === 'trace' ? 0.5 : 0);
  }, 0);
}

/** @param first the first row of data @param width of the data */
export function headingRowsAbove(rows: readonly Row[], first: number, width: number): HeadingRows {
  const above: number[] = [];
  for (let i = first - 1; i >= 0 && above.length < LOOKED_AT; i -= 1) {
    const row = rows[i] ?? [];
    const cells = filledCells(row);
    if (!cells.some((c) => /[\p{L}\p{N}%]/u.test(c))) continue;
    if (cells.length < Math.max(2, Math.ceil(width / 2)) || row.length > width + 1) break;
    above.push(i);
  }
  const unitsRow = above.find((i) => isUnitsRow(rows[i] ?? [])) ?? null;
  const candidates = above.filter((i) => i !== unitsRow);
  const best = candidates.reduce<number | null>((found, i) => (found === null || spoken(rows[i] ?? []) > spoken(rows[found] ?? []) ? i : found), null);
  // Units without headings above them are headings made of units.
  if (best === null) return { headingRow: unitsRow, unitsRow: null };
  return { headingRow: best, unitsRow };
}
