/** The spreadsheet of a certificate: the same content, to compute with. Bytes depend on the document alone. */
import type { CertificateDocument, CertificateSnapshot } from '@strainwright/common/contract/certificates';
import { CONSTANTS } from '@strainwright/common/contract/vocabulary';
import { Workbook } from 'exceljs';
import JSZip from 'jszip';
import { canonicalBytes } from './signing';
import { dayOf, daysOfActivity, distinct, momentOf, SYMBOLS, type CertificateResult } from './wording';
import { dimensionText } from './pdf/items';
import { resultsSheet } from './xlsx/results-sheet';
import { factSheet, tableSheet, type Cell } from './xlsx/sheet';

export async function certificateXlsx(document: CertificateDocument): Promise<Buffer> {
  const { snapshot } = document;
  const issuedAt = new Date(snapshot.issuedAt);
  const workbook = new Workbook();
  Object.assign(workbook, { creator: 'Strainwright', lastModifiedBy: 'Strainwright', created: issuedAt, modified: issuedAt });
  factSheet(workbook, 'Certificate', facts(snapshot));
  resultsSheet(workbook, snapshot);
  budgetSheet(workbook, snapshot);
  instrumentSheet(workbook, snapshot);
  rawFileSheet(workbook, snapshot);
  factSheet(workbook, 'Verification', proof(document));
  return withFixedTimes(Buffer.from(await workbook.xlsx.writeBuffer()), issuedAt);
}

/** A ZIP keeps when each of its files was written; here that is when the certificate was issued. */
async function withFixedTimes(workbook: Buffer, issuedAt: Date): Promise<Buffer> {
  const zip = await JSZip.loadAsync(workbook);
  zip.forEach((_, file) => { file.date = issuedAt; });
  return zip.generateAsync({ type: 'nodebuffer', compression: 'DEFLATE', platform: 'UNIX' });
}

function facts(s: CertificateSnapshot): (readonly [string, Cell])[] {
  const { timeZone } = s.laboratory;
  return [
    ['Title', s.title], ['Number', s.number], ['Issue', s.issue], ['Issued', dayOf(s.issuedAt, timeZone)],
    ...(s.replaces === null ? [] : [['Replaces', `${s.replaces.number} issue ${s.replaces.issue} of ${dayOf(s.replaces.releasedAt, timeZone)}: ${s.replaces.reason}`] as const]),
    ['Laboratory', s.laboratory.name], ['Address', s.laboratory.address], ['Time zone of dates', timeZone], ['Customer', s.customer.name], ['Customer’s address', s.customer.address], ['Order', s.order.number],
    ['Customer’s reference (supplied by the customer)', s.order.customerReference], ['Material (supplied by the customer)', s.order.materialDescription], ['Tested', daysOfActivity(s)],
    ...s.specimens.map((p) => [`Specimen ${p.mark}`, `${p.material}; ${p.shape}; received ${p.receivedOn}; ${p.dimensions.map(dimensionText).join('; ')}`] as const),
    ...s.methods.map((m) => ['Method', `${m.code} version ${m.versionNumber}: ${m.name}. ${m.standard}`] as const),
    ['Deviations from the methods', s.deviations === '' ? 'None.' : s.deviations],
    ...s.conformity.map((c) => [`Conformity ${c.specimenMark} ${SYMBOLS[c.constant]} ${c.basis}`, `${c.conforms ? 'Conforms' : 'Does not conform'} (${c.rule}; probability ${c.probability.toFixed(3)}). ${c.statement}`] as const),
    ['Reviewed by', distinct(s.results.map((r) => r.reviewedBy)).join(', ')], ['Released by', s.releasedBy],
    ...(s.laboratory.separationOfDuties ? [] : [['Separation of duties', 'Switched off in this laboratory.'] as const]),
    ...s.statements.map((text) => ['Statement', text] as const),
  ];
}

/** SI throughout, so that the columns can be multiplied. */
function budgetSheet(workbook: Workbook, s: CertificateSnapshot): void {
  tableSheet(workbook, 'Budget', [
    { head: 'Specimen', width: 16 }, { head: 'Basis', width: 10 }, { head: 'Input', width: 44 }, { head: 'Value (SI)', width: 14 }, { head: 'Unit', width: 8 }, { head: 'Standard uncertainty (SI)', width: 24 },
    { head: 'Type', width: 6 }, { head: 'Distribution', width: 13 }, { head: 'Degrees of freedom', width: 18 }, { head: 'Source', width: 50 },
    ...CONSTANTS.map((c) => ({ head: `Sensitivity of ${SYMBOLS[c]} (SI)`, width: 20 })), ...CONSTANTS.map((c) => ({ head: `Share of u²(${SYMBOLS[c]}), %`, width: 16, format: '0.0' })),
  ], s.results.flatMap(budgetRows));
}

function budgetRows(r: CertificateResult): Cell[][] {
  return r.result.budget.map((line) => [
    r.specimenMark, r.basis, line.label, line.value, line.unit, line.standardUncertainty, line.type, line.distribution, line.degreesOfFreedom, line.source,
    ...CONSTANTS.map((c) => line.sensitivity[c]), ...CONSTANTS.map((c) => line.contribution[c]),
  ]);
}

function instrumentSheet(workbook: Workbook, s: CertificateSnapshot): void {
  tableSheet(workbook, 'Instruments', [
    { head: 'Instrument', width: 30 }, { head: 'Kind', width: 16 }, { head: 'Serial', width: 18 }, { head: 'Calibration certificate', width: 26 }, { head: 'Calibrated', width: 12 }, { head: 'Due', width: 12 }, { head: 'On the day of use', width: 22 },
  ], s.instruments.map((i) => [i.name, i.kind, i.serial, i.certificate, i.calibratedOn, i.dueOn, i.inCalibration ? 'in calibration' : 'OUT of calibration']));
}

function rawFileSheet(workbook: Workbook, s: CertificateSnapshot): void {
  tableSheet(workbook, 'Raw files', [
    { head: 'Specimen', width: 16 }, { head: 'Run', width: 6 }, { head: 'Kind', width: 14 }, { head: 'Tested', width: 18 }, { head: 'By', width: 20 }, { head: 'Settings', width: 40 }, { head: 'File', width: 36 }, { head: 'Bytes', width: 12 }, { head: 'SHA-256', width: 68 },
  ], s.results.flatMap((r) => r.runs.flatMap((run) => run.files.map((f): Cell[] => [
    r.specimenMark, run.number, run.kind, momentOf(run.performedAt, s.laboratory.timeZone), run.performedBy, run.settings, f.name, f.size, f.sha256,
  ]))));
}

function proof({ snapshot, sha256, signature }: CertificateDocument): (readonly [string, Cell])[] {
  return [
    ['Check it at', snapshot.verification.url], ['Number', snapshot.number], ['Code', snapshot.verification.code],
    ['SHA-256 of the content', sha256], ['Content', `RFC 8785 form of the certificate’s data, ${canonicalBytes(snapshot).length} bytes; in the data file under "snapshot"`],
    ['Signature', `base64 ${signature.value}`], ['Algorithm', signature.algorithm], ['Key', signature.keyId], ['Public key', signature.publicKey],
  ];
}
