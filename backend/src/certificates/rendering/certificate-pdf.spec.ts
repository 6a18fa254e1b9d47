import { generateKeyPairSync } from 'node:crypto';
import { extractText, getDocumentProxy, getMeta } from 'unpdf';
import { exampleResult, exampleSnapshot } from '../testing/example-snapshot';
import { certificatePdf, draftPdf } from './certificate-pdf';
import { verificationAddress } from './pdf/closing';
import { plateSvg } from './pdf/plate';
import { signSnapshot } from './signing';

const key = { keyId: 'ab12cd34ef56ab12', ...generateKeyPairSync('ed25519') };

/** Read back by PDF.js, which shares nothing with the writer. */
async function pagesOf(pdf: Buffer): Promise<string[]> {
  const { text } = await extractText(await getDocumentProxy(new Uint8Array(pdf)), { mergePages: false });
  return text.map((page) => page.replace(/\s+/g, ' '));
}

describe('certificatePdf', () => {
  const document = signSnapshot(exampleSnapshot(), key);
  let pdf: Buffer;
  let pages: string[];
  beforeAll(async () => {
    pdf = await certificatePdf(document);
    pages = await pagesOf(pdf);
  });

  it('gives the same bytes for the same document', async () => {
    expect((await certificatePdf(document)).equals(pdf)).toBe(true);
  });

  it('says on every page which certificate it is, and page x of y', () => {
    pages.forEach((text, i) => expect(text).toContain(`C-2026-0042 issue 1 · page ${i + 1} of ${pages.length}`));
  });

  it.each([
    'Certificate of elastic constants', 'Corrie Bank Materials Laboratory', '4 Kiln Row, Corrie Bank', 'Fennick Rotors', 'Unit 9, Tarn Works', '2026-0147', 'FR/88-A',
    'Aluminium alloy AL-7 (metal)', 'cylinder, axis along rolling direction', 'length 50.0210 ± 0.0019 mm (4)', 'mass 137.412 ± 0.014 g (2)', '2699.70 ± 0.72 kg/m³',
    'CB-UP-1 version 3', 'Settings after ASTM E494', '22.5 °C; 41 % relative humidity', 'Tamsin Oake', 'Idris Vale', 'Maren Holt', 'Odile Brandt',
    'CAL-2025-117', 'OUT of calibration', 'picker AIC; software 0.1.0', 'None.', 'Two bars of rolled aluminium alloy, batch AL-7',
    'The results relate only to the items tested.', 'conforms', 'at most 2.5 %', 'End of certificate C-2026-0042 issue 1',
  ])('prints %s', (text) => expect(pages.join(' ')).toContain(text));

  it('prints each constant with its uncertainty, k, degrees of freedom and Monte Carlo interval, digits following the uncertainty', () => {
    const text = pages.join(' ');
    expect(text).toContain('70.31 ± 0.91 GPa 0.45 GPa 2.02 41 69.41 to 71.22 GPa derived');
    expect(text).toContain('0.3417 ± 0.0048 0.0024 2.00 ∞ 0.3369 to 0.3465 measured');
    expect(text).toContain('−0.412');
  });

  it('prints days as the laboratory’s clock shows them', () => {
    // 23:30 UTC on 20 February is half past midnight on the 21st in Berlin.
    expect(pages[0]).toContain('2026-02-21 00:30');
  });

  it('prints digest, signature, key and code', () => {
    const proof = pages.at(-1)?.replace(/ /g, '');
    for (const part of [document.sha256, document.signature.value, document.signature.keyId, document.snapshot.verification.code]) expect(proof).toContain(part);
  });

  it('embeds its fonts and takes its dates from the certificate', async () => {
    const { info } = await getMeta(await getDocumentProxy(new Uint8Array(pdf)));
    expect(info.CreationDate).toBe('D:20260225140500Z');
    expect(pdf.toString('latin1').match(/\/FontFile2/g)?.length).toBeGreaterThanOrEqual(3);
  });

  it('names the issue that it replaces and why, and a laboratory without separation of duties', async () => {
    const amended = exampleSnapshot();
    amended.issue = 2;
    amended.replaces = { number: amended.number, issue: 1, releasedAt: '2026-02-10T10:00:00.000Z', reason: 'Wrong mass of S1-01.' };
    amended.laboratory.separationOfDuties = false;
    const [first] = await pagesOf(await certificatePdf(signSnapshot(amended, key)));
    expect(first).toContain('issue 2 replaces certificate C-2026-0042 issue 1 of 2026-02-10. Reason: Wrong mass of S1-01.');
    expect(first).toContain('Separation of duties is switched off');
  });

  it('states the Monte Carlo interval, and says so, where the first order is not validated', async () => {
    const snapshot = exampleSnapshot();
    for (const r of snapshot.results) r.result = exampleResult(r.basis, 'K');
    const text = (await pagesOf(await certificatePdf(signSnapshot(snapshot, key)))).join(' ');
    expect(text).toContain('74.0 (72.4 to 75.7) GPa ‡');
    expect(text).toContain('‡ Stated as the shortest 95 % interval of a Monte Carlo evaluation');
    expect(text).not.toContain('74.0 ± 1.7 GPa');
  });

  it('prints findings with the reasons for which they were accepted', async () => {
    const snapshot = exampleSnapshot();
    const [result] = snapshot.results;
    result?.result.findings.push({ code: 'X', severity: 'warn', subject: 'Balance B-1', seen: 'Balance B-1 was due on 2026-01-20', why: 'Not traceable.', action: 'Calibrate it.' });
    result?.acknowledgements.push({ code: 'X', subject: 'Balance B-1', reason: 'Checked against a reference mass' });
    const text = (await pagesOf(await certificatePdf(signSnapshot(snapshot, key)))).join(' ');
    expect(text).toContain('warn Balance B-1 was due on 2026-01-20 Not traceable. Checked against a reference mass');
  });

  it('keeps ten specimens tested both ways, and the longest names, inside the page', async () => {
    const marks = Array.from({ length: 9 }, (_, i) => `S1-0${i + 1}`);
    const snapshot = exampleSnapshot([...marks, 'W'.repeat(120)], 'W'.repeat(120));
    snapshot.customer.name = 'Q'.repeat(120);
    const proxy = await getDocumentProxy(new Uint8Array(await certificatePdf(signSnapshot(snapshot, key))));
    for (let n = 1; n <= proxy.numPages; n += 1) {
      const { items } = await (await proxy.getPage(n)).getTextContent();
      for (const item of items) {
        if (!('transform' in item)) continue;
        const [left, bottom] = [Number(item.transform[4]), Number(item.transform[5])];
        expect(left).toBeGreaterThanOrEqual(50);
        expect(left + item.width).toBeLessThanOrEqual(595.28 - 50);
        expect(bottom).toBeGreaterThan(20);
      }
    }
  }, 60_000);
});

describe('draftPdf', () => {
  it('is watermarked and carries no proof of origin', async () => {
    const text = (await pagesOf(await draftPdf(exampleSnapshot()))).join(' ');
    expect(text).toContain('DRAFT — not a certificate');
    expect(text).not.toContain('Ed25519');
    expect(text).not.toContain('7K3M');
  });
});

describe('plateSvg', () => {
  it('fills the corners that were measured and outlines those that were derived', () => {
    const fills = [...plateSvg(exampleResult('static')).matchAll(/<rect [^>]*fill="(#\w+)"/g)].map((m) => m[1]);
    expect(fills).toEqual(['#1C2430', '#1C2430', '#FFFFFF', '#FFFFFF']);
  });
});

describe('verificationAddress', () => {
  it('leads to the public page with number and code', () => {
    expect(verificationAddress(exampleSnapshot())).toBe('https://lab.example/verify/C-2026-0042?code=7K3M-Q8RD-0V5T');
  });
});
