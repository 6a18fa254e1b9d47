/** Conformity, deviations, what the customer supplied, statements, and the proof of origin. */
import type { CertificateDocument, CertificateSnapshot } from '@strainwright/common/contract/certificates';
import type { Content } from 'pdfmake/interfaces';
import { issueName, momentOf, SYMBOLS } from '../wording';
import { facts, heading, INK, rule, ruledTable } from './style';

export function closing(snapshot: CertificateSnapshot): Content[] {
  return [...conformity(snapshot), heading('Deviations from the methods'), { text: snapshot.deviations === '' ? 'None.' : snapshot.deviations, fontSize: 8.5 }, ...supplied(snapshot), ...statements(snapshot)];
}

const RULES = {
  simple: 'simple acceptance: the value itself is compared with the limit; near a limit the risk of a wrong statement is up to 50 %',
  'guard band': 'guard band of the expanded uncertainty: risk of false acceptance at most 2.5 %',
  'one-sided 5 %': 'guard band of 1.645 standard uncertainties: risk of false acceptance at most 5 %',
} as const;

function conformity(snapshot: CertificateSnapshot): Content[] {
  if (snapshot.conformity.length === 0) return [];
  const rules = [...new Set(snapshot.conformity.map((c) => c.rule))];
  return [
    heading('Conformity to the customer’s limits'),
    ruledTable(
      [{ head: 'Specimen', width: 78 }, { head: 'Constant', width: 62 }, { head: 'Decision', width: 88 }, { head: 'Statement', width: '*' }, { head: 'Probability of conformity', width: 62, number: true, right: true }],
      snapshot.conformity.map((c) => [
        { text: c.specimenMark, style: 'number' }, `${SYMBOLS[c.constant]}, ${c.basis}`, { text: c.conforms ? '● conforms' : '○ does not conform', bold: true }, c.statement, probabilityText(c.probability),
      ]),
    ),
    { style: 'note', text: `Decision rules: ${rules.map((r) => `${r}: ${RULES[r]}`).join('; ')}.` },
  ];
}

function probabilityText(p: number): string {
  if (p > 0.9995) return '> 99.9 %';
  return p < 0.0005 ? '< 0.1 %' : `${(100 * p).toFixed(1)} %`;
}

function supplied(snapshot: CertificateSnapshot): Content[] {
  const { order } = snapshot;
  return [
    heading('Data supplied by the customer'),
    { text: [{ text: 'Description of the material: ', style: 'label' }, order.materialDescription], fontSize: 8.5 },
    ...(order.customerReference === '' ? [] : [{ text: [{ text: 'Customer’s reference: ', style: 'label' }, order.customerReference], fontSize: 8.5, margin: [0, 2, 0, 0] as [number, number, number, number] }]),
    { style: 'note', text: 'These, the sampling dates and samplers marked †, and any limits, were supplied by the customer. They can affect the validity of the results, and the laboratory does not answer for them.' },
  ];
}

function statements(snapshot: CertificateSnapshot): Content[] {
  return [heading('Statements'), { ul: snapshot.statements.map((text) => ({ text, margin: [0, 0, 0, 2] })), fontSize: 8.5, markerColor: INK }];
}

/** Signature, digest and QR code; kept together on one page. */
export function proof(document: CertificateDocument): Content {
  const { snapshot, sha256, signature } = document;
  return {
    unbreakable: true,
    stack: [
      heading('Released'),
      facts([['Released by', snapshot.releasedBy], ['On behalf of', snapshot.laboratory.name], ['At', `${momentOf(snapshot.issuedAt, snapshot.laboratory.timeZone)} (${snapshot.laboratory.timeZone})`]], 3),
      heading('Check this certificate'),
      {
        columnGap: 14,
        columns: [
          { width: 84, qr: verificationAddress(snapshot), fit: 84, foreground: INK, eccLevel: 'M' },
          {
            width: '*',
            stack: [
              { fontSize: 8.5, text: ['Scan, or open ', { text: snapshot.verification.url, font: 'RobotoMono', fontSize: 8 }, ' and type number and code; or hand in this file there.'] },
              { margin: [0, 4, 0, 4], text: [{ text: `${snapshot.number}   code `, font: 'RobotoMono', fontSize: 9 }, { text: snapshot.verification.code, font: 'RobotoMono', bold: true, fontSize: 11 }] },
              { style: 'proof', text: `SHA-256 of the content (RFC 8785)  ${sha256}` },
              { style: 'proof', text: `Ed25519 signature, key ${signature.keyId}` },
              { style: 'proof', text: signature.value },
            ],
          },
        ],
      },
      endMark(snapshot),
    ],
  };
}

/** Address in the QR code: the public page with number and code filled in. */
export function verificationAddress(snapshot: CertificateSnapshot): string {
  const { url, code } = snapshot.verification;
  return `${url}/${encodeURIComponent(snapshot.number)}?code=${encodeURIComponent(code)}`;
}

export function endMark(snapshot: CertificateSnapshot): Content {
  return { unbreakable: true, margin: [0, 14, 0, 0], stack: [rule(), { text: `End of certificate ${issueName(snapshot)}`, alignment: 'center', fontSize: 8, margin: [0, 4, 0, 0] }] };
}
