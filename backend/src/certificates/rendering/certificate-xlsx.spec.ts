import { generateKeyPairSync } from 'node:crypto';
import JSZip from 'jszip';
import { exampleSnapshot } from '../testing/example-snapshot';
import { certificateXlsx } from './certificate-xlsx';
import { signSnapshot } from './signing';
import { harmless } from './xlsx/sheet';

const key = { keyId: 'ab12cd34ef56ab12', ...generateKeyPairSync('ed25519') };

interface ReadCell { text: string | null; number: number | null; formula: string | null }

/** Reads cells from the XML itself (ECMA-376 part 1, 18.3.1.4), so that the writer does not check itself. */
async function readWorkbook(bytes: Buffer): Promise<Map<string, Map<string, ReadCell>>> {
  const zip = await JSZip.loadAsync(bytes);
  const xml = async (path: string) => (await zip.file(path)?.async('string')) ?? '';
  const plain = (s: string) => s.replace(/<[^>]*>/g, '').replace(/&lt;/g, '<').replace(/&gt;/g, '>').replace(/&quot;/g, '"').replace(/&apos;/g, "'").replace(/&amp;/g, '&');
  const shared = [...(await xml('xl/sharedStrings.xml')).matchAll(/<si>(.*?)<\/si>/gs)].map((m) => plain(m[1] ?? ''));
  const sheets = new Map<string, Map<string, ReadCell>>();
  const names = [...(await xml('xl/workbook.xml')).matchAll(/<sheet [^>]*name="([^"]+)"/g)].map((m) => m[1] ?? '');
  for (const [i, name] of names.entries()) {
    const cells = new Map<string, ReadCell>();
    for (const [, reference = '', attributes = '', body = ''] of (await xml(`xl/worksheets/sheet${i + 1}.xml`)).matchAll(/<c r="([A-Z]+\d+)"([^>]*?)(?:\/>|>(.*?)<\/c>)/gs)) {
      const value = /<v>(.*?)<\/v>/s.exec(body)?.[1] ?? null;
      const isText = attributes.includes('t="s"');
      cells.set(reference, { formula: /<f>(.*?)<\/f>/s.exec(body)?.[1] ?? null, text: isText && value !== null ? (shared[Number(value)] ?? null) : null, number: !isText && value !== null ? Number(value) : null });
    }
    sheets.set(name, cells);
  }
  return sheets;
}

describe('certificateXlsx', () => {
  const snapshot = exampleSnapshot(['S1-01', 'S1-02']);
  const document = signSnapshot(snapshot, key);
  let sheets: Map<string, Map<string, ReadCell>>;
  beforeAll(async () => {
    sheets = await readWorkbook(await certificateXlsx(document));
  });
  const cell = (sheet: string, reference: string): ReadCell | undefined => sheets.get(sheet)?.get(reference);
  const texts = (sheet: string): (string | null)[] => [...(sheets.get(sheet)?.values() ?? [])].map((c) => c.text);

  it('has its six sheets', () => {
    expect([...sheets.keys()]).toEqual(['Certificate', 'Results', 'Budget', 'Instruments', 'Raw files', 'Verification']);
  });

  it('gives the same bytes for the same document', async () => {
    const [a, b] = [await certificateXlsx(document), await certificateXlsx(document)];
    expect(a.equals(b)).toBe(true);
  });

  it('holds the constants as numbers, unrounded, their unit beside', () => {
    expect(cell('Results', 'E2')).toEqual({ number: 70.312, text: null, formula: null });
    expect(cell('Results', 'F2')?.text).toBe('GPa');
    expect(cell('Results', 'G2')?.number).toBeCloseTo(0.91304, 12);
    expect(cell('Results', 'H2')?.number).toBe(2.02);
    expect(cell('Results', 'E3')?.number).toBe(0.3417);
  });

  it('computes G and K again from the cells of E and ν, and keeps what they are now', () => {
    for (const [i] of snapshot.results.entries()) {
      const [e, nu, g, k] = [2, 3, 4, 5].map((row) => row + 4 * i);
      const [E, n] = [cell('Results', `E${e}`)?.number ?? NaN, cell('Results', `E${nu}`)?.number ?? NaN];
      expect(cell('Results', `O${g}`)).toMatchObject({ formula: `E${e}/(2*(1+E${nu}))` });
      expect(cell('Results', `O${k}`)).toMatchObject({ formula: `E${e}/(3*(1-2*E${nu}))` });
      expect(cell('Results', `O${g}`)?.number).toBeCloseTo(E / (2 * (1 + n)), 12);
      expect(cell('Results', `O${k}`)?.number).toBeCloseTo(E / (3 * (1 - 2 * n)), 12);
    }
  });

  it('carries the budget, the raw files’ digests and the proof', () => {
    expect(texts('Budget')).toContain('zero time of P');
    expect(cell('Budget', 'E2')?.text).toBe('m');
    expect(cell('Budget', 'O2')?.number).toBe(12);
    expect(texts('Raw files')).toContain('c'.repeat(64));
    expect(texts('Verification')).toEqual(expect.arrayContaining([document.sha256, `base64 ${document.signature.value}`, '7K3M-Q8RD-0V5T']));
  });

  it('never starts a cell with what a spreadsheet program would run', async () => {
    const attack = '=HYPERLINK("http://evil.example","x")';
    const hostile = exampleSnapshot(['-7+1']);
    hostile.customer = { name: attack, address: '+44' };
    hostile.order = { number: '2026-0001', customerReference: '@SUM(A1)', materialDescription: '\t=1+1' };
    hostile.results[0]?.runs[0]?.files.push({ name: '  =cmd.csv', sha256: 'd'.repeat(64), size: 1 });
    const read = await readWorkbook(await certificateXlsx(signSnapshot(hostile, key)));
    const all = [...read.values()].flatMap((cells) => [...cells.values()]);
    expect(all.some((c) => c.text === `'${attack}`)).toBe(true);
    for (const { text } of all) expect(text ?? '').not.toMatch(/^\s*[=+\-@]/);
  });
});

describe('harmless', () => {
  it.each(['=1', '+1', '-1', '@a', '\t1', '\r1', ' =1', '＝1'])('puts an apostrophe before %j', (text) => expect(harmless(text)).toBe(`'${text}`));
  it.each(['S1-01', '70.3', '−3', 'a=b', ''])('leaves %j alone', (text) => expect(harmless(text)).toBe(text));
});
