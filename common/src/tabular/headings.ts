/** Headings as test frames write them: the unit in brackets, behind a slash, or in a row of its own. */
import { unit } from '../quantities/units';

export interface Heading {
  readonly name: string;
  readonly unitText: string;
}

const BRACKETED = /^(.*?)\s*[[({]\s*([^\])}]+?)\s*[\])}]\s*$/;
const BEHIND = /^(.*?)(?:\s*[/,]\s*|[_ ]+(?:in )?)([^\s/,_]+)$/;

export function splitHeading(text: string): Heading {
  const heading = text.trim().replace(/^\ufeff/, '');
  const bracketed = BRACKETED.exec(heading);
  if (bracketed !== null) return { name: (bracketed[1] ?? '').trim(), unitText: (bracketed[2] ?? '').trim() };
  const behind = BEHIND.exec(heading);
  const symbol = behind?.[2] ?? '';
  if (behind !== null && symbol.length > 1 && unit(symbol) !== undefined && (behind[1] ?? '') !== '') return { name: (behind[1] ?? '').trim(), unitText: symbol };
  if (behind !== null && ['N', 's', 'm', '%', 'V'].includes(symbol)) return { name: (behind[1] ?? '').trim(), unitText: symbol };
  return { name: heading, unitText: '' };
}

/** A cell of a units row: a unit, in brackets or not, or a dash for none. */
export function unitCell(text: string): string | null {
  const bare = text.trim().replace(/^[[({]\s*|\s*[\])}]$/g, '').trim();
  if (bare === '' || bare === '-' || bare === '–' || bare === '--' || bare === '1') return '';
  return unit(bare) === undefined ? null : bare;
}

/** What tells one layout of headings and units from another, so that a confirmed one is remembered for its instrument. */
export function layoutSignature(format: string, headings: readonly string[], units: readonly string[]): string {
  const plain = (cells: readonly string[]) => cells.map((c) => c.trim().toLowerCase().replace(/\s+/g, ' ')).join('|');
  return units.length === 0 ? `${format}|${plain(headings)}` : `${format}|${plain(headings)}|${plain(units)}`;
}
