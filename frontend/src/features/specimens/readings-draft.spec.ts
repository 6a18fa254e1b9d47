import { pastedValues, readingsToSend } from './readings-draft';

const first = () => 1;
const row = (values: string[], instrumentId = 'i1') => ({ length: { unit: 'mm', instrumentId, values } });

describe('pastedValues', () => {
  it('takes a column or a row of a spreadsheet', () => {
    expect(pastedValues('50.01\r\n50.02\r\n50.03\r\n')).toEqual(['50.01', '50.02', '50.03']);
    expect(pastedValues('1,5\t1,6')).toEqual(['1,5', '1,6']);
  });
});

describe('readingsToSend', () => {
  it('numbers stations from the first free one and leaves empty fields out', () => {
    const { readings, problems } = readingsToSend(row(['50.01', '', '50.03']), '.', () => 4);
    expect(problems).toEqual([]);
    expect(readings.map(({ station, value }) => [station, value])).toEqual([[4, 50.01], [6, 50.03]]);
  });

  it('asks about what could be read two ways, and never guesses', () => {
    expect(readingsToSend(row(['1,234']), '.', first).problems[0]?.message).toMatch(/two ways/);
    expect(readingsToSend(row(['1,234']), ',', first).readings[0]?.value).toBe(1.234);
  });

  it('wants an instrument for each reading', () => {
    expect(readingsToSend(row(['50'], ''), '.', first).problems[0]?.message).toMatch(/instrument/);
  });
});
