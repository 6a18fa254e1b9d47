/** One line to cells. Quotes are honoured; runs of spaces are one delimiter. */
export type Delimiter = ',' | ';' | '\t' | '|' | ' ';

export function splitLine(line: string, delimiter: Delimiter): string[] {
  if (delimiter === ' ') return line.trim() === '' ? [] : line.trim().split(/ +/);
  if (!line.includes('"')) return line.split(delimiter);
  const cells: string[] = [];
  let cell = '';
  let quoted = false;
  for (let i = 0; i < line.length; i += 1) {
    const c = line[i];
    if (c === '"') {
      if (quoted && line[i + 1] === '"') {
        cell += '"';
        i += 1;
      } else quoted = !quoted;
    } else if (c === delimiter && !quoted) {
      cells.push(cell);
      cell = '';
    } else cell += c;
  }
  cells.push(cell);
  return cells;
}

/** Headings that end in a bracketed unit each. */
const BRACKETED = /[^([{]+[([{][^)\]}]*[)\]}]/g;

/** A line of headings above a table parted by blanks, whose headings hold blanks themselves: at two blanks or more, or after each bracketed unit, where that gives the width. */
export function splitHeadingLine(line: string, width: number): string[] {
  const apart = line.trim().split(/\s{2,}/);
  if (apart.length === width) return apart;
  const bracketed = (line.match(BRACKETED) ?? []).map((h) => h.trim());
  return bracketed.length === width ? bracketed : splitLine(line, ' ');
}
