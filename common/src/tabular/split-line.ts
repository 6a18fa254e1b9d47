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
