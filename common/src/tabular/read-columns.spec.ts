/** Raw bytes to columns: rows named that cannot be read, blocks and footers passed over, the same however the bytes are cut. */
import type { Layout } from '../contract/runs';
import { ColumnReader, readDelimited, type ReadColumns } from './read-columns';

const layout = (change: Partial<Layout> = {}): Layout => ({
  format: 'delimited', encoding: 'utf-8', delimiter: ';', decimal: ',', sheet: '', headingRow: 0, unitsRow: null, firstDataRow: 1,
  columns: [
    { column: 0, heading: 'Zeit', channel: 'time', unit: 's', sign: 1 },
    { column: 1, heading: 'Weg', channel: 'ignore', unit: 'mm', sign: 1 },
    { column: 2, heading: 'Kraft', channel: 'force', unit: 'kN', sign: -1 },
  ],
  ...change,
});

async function* inPieces(bytes: Uint8Array, size: number): AsyncGenerator<Uint8Array> {
  for (let i = 0; i < bytes.length; i += size) yield bytes.subarray(i, i + size);
}
const read = (text: string, change: Partial<Layout> = {}, size = 1 << 16): Promise<ReadColumns> => readDelimited(inPieces(new TextEncoder().encode(text), size), layout(change));
const valuesOf = ({ columns }: ReadColumns) => columns.map((c) => [...c.values]);

describe('columns of a text', () => {
  const text = 'Zeit;Weg;Kraft\r\n0,0;1;-1,5\r\n0,1;2;-2,25\r\n0,2;3;-3e-3\r\n';

  it('are the mapped ones, as the file has them: neither unit nor sign applied', async () => {
    const found = await read(text);
    expect(valuesOf(found)).toEqual([[0, 0.1, 0.2], [-1.5, -2.25, -0.003]]);
    expect(found).toMatchObject({ rows: 3, problemCount: 0, skippedRows: 0 });
  });

  it.each([1, 2, 3, 5, 7, 64])('are the same from pieces of %d bytes', async (size) => {
    expect(valuesOf(await read(text, {}, size))).toEqual(valuesOf(await read(text)));
  });

  it.each(['\n', '\r\n', '\r'])('are the same with line ends %j', async (end) => {
    expect(valuesOf(await read(text.replaceAll('\r\n', end), {}, 4))).toEqual(valuesOf(await read(text)));
  });

  it.each(['utf-16le', 'utf-16be'] as const)('are the same in %s, cut within characters', async (encoding) => {
    const bytes = Buffer.from(`\ufeff${text}`, 'utf16le');
    const found = await readDelimited(inPieces(encoding === 'utf-16le' ? bytes : bytes.swap16(), 3), layout({ encoding }));
    expect(valuesOf(found)).toEqual([[0, 0.1, 0.2], [-1.5, -2.25, -0.003]]);
  });

  it('are read from quoted cells', async () => {
    expect(valuesOf(await read('"Zeit";"Weg";"Kraft"\n"0,5";"say ""2;3""";"7"\n'))).toEqual([[0.5], [7]]);
  });

  it('hold every digit that a double has', async () => {
    expect(valuesOf(await read('h\n0,1;;0,30000000000000004\n'))).toEqual([[0.1], [0.30000000000000004]]);
  });
});

describe('rows', () => {
  it('that repeat headings, are blank, or close the file are skipped and counted', async () => {
    const found = await read('Zeit;Weg;Kraft\n0;1;2\n\nBlock 2;;\nZeit;Weg;Kraft\ns;mm;kN\n------;------;------\n1;1;3\n\nEnd of test\n');
    expect(valuesOf(found)).toEqual([[0, 1], [2, 3]]);
    expect(found).toMatchObject({ problemCount: 0, skippedRows: 7 });
  });

  it('with letters in a number, an empty cell, NaN or an overload are named by the row an editor shows', async () => {
    const found = await read('Zeit;Weg;Kraft\n0;1;2\n1;1;2O\n2;1;\n3;1;NaN\nNaN;1;NaN\n5;;OVL\n6\n7;x;9\n');
    expect(valuesOf(found)).toEqual([[0, 7], [2, 9]]);
    expect(found.problems).toEqual([
      { row: 3, message: 'Kraft holds “2O”, not a number' },
      { row: 4, message: 'Kraft is empty' },
      { row: 5, message: 'Kraft holds “NaN”, not a number' },
      { row: 6, message: 'Kraft holds “NaN”, not a number' },
      { row: 7, message: 'Kraft holds “OVL”, not a number' },
      { row: 8, message: 'Kraft is empty' },
    ]);
  });

  it('written with another delimiter are named, not skipped', async () => {
    const found = await read('h\n0;1;2\n1,1,3\n2;1;4\n');
    expect(found).toMatchObject({ rows: 2, problemCount: 1, problems: [{ row: 3 }] });
  });

  it('beyond twenty are only counted', async () => {
    const found = await read(`h\n0;1;2\n${'1;1;x\n'.repeat(50)}`);
    expect(found.problems).toHaveLength(20);
    expect(found.problemCount).toBe(50);
  });
});

describe('time stamps', () => {
  const stamped = async (stamps: readonly string[]) => valuesOf(await read(`h\n${stamps.map((s) => `${s};1;2`).join('\n')}`, { decimal: '.' }))[0]?.map((t) => Math.round(t * 1000) / 1000);

  it.each<[string, string[], number[]]>([
    ['of the day', ['09:59:59.500', '10:00:00.250', '10:00:01.000'], [0, 0.75, 1.5]],
    ['with dates', ['2026-06-01T10:00:00.000Z', '2026-06-01T10:00:00.500Z'], [0, 0.5]],
    ['with dates and an offset', ['2026-06-01 10:00:00.000+02:00', '2026-06-01 10:00:00.500+02:00'], [0, 0.5]],
    ['with a date of the continent', ['01.06.2026 10:00:00,0', '01.06.2026 10:00:01,5'], [0, 1.5]],
    ['of twelve hours', ['11:59:59 AM', '12:00:01 PM', '1:00:00 PM'], [0, 2, 3601]],
    ['over midnight', ['23:59:59.5', '00:00:00.5'], [0, 1]],
    ['of a stopwatch', ['00:59.5', '01:00.0'], [0, 0.5]],
  ])('%s become seconds from the first', async (_, stamps, expected) => {
    expect(await stamped(stamps)).toEqual(expected);
  });

  it('in rows of numbers are no numbers', async () => {
    const found = await read('h\n0;1;2\n1;1;10:00:00\n');
    expect(found.problems).toEqual([{ row: 3, message: 'Kraft holds “10:00:00”, not a number' }]);
  });
});

describe('what cannot be read', () => {
  it('a line of more than 100 000 characters is refused', async () => {
    await expect(read(`h\n0;1;2\n${'9'.repeat(100_001)}`)).rejects.toMatchObject({ code: 'line-too-long' });
    await expect(read(`h\n${'9'.repeat(100_001)}\n0;1;2\n`, {}, 1000)).rejects.toMatchObject({ code: 'line-too-long' });
  });

  it('no readable row is refused, with the first fault named', async () => {
    await expect(read('h\n0;1;x\n1;1;y\n')).rejects.toMatchObject({ code: 'no-numbers', message: expect.stringContaining('Row 2: Kraft holds “x”') });
  });

  it('a layout that maps nothing is refused', () => {
    expect(() => new ColumnReader(layout({ columns: [{ column: 0, heading: '', channel: 'ignore', unit: '', sign: 1 }] }))).toThrow(expect.objectContaining({ code: 'column-missing' }));
  });
});
