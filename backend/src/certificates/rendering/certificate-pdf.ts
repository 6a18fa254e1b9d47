/** The printed certificate. Bytes depend on the document alone. */
import type { CertificateDocument, CertificateSnapshot } from '@strainwright/common/contract/certificates';
import type { Content, TDocumentDefinitions } from 'pdfmake/interfaces';
import { issueName } from './wording';
import { closing, endMark, proof } from './pdf/closing';
import { items } from './pdf/items';
import { openingPage } from './pdf/opening';
import { results } from './pdf/results';
import { HAIRLINE, INK, PAGE_MARGINS, preparePrinter, QUIET, STOP, STYLES } from './pdf/style';
import { rawFiles, testing } from './pdf/testing';

/** @returns the PDF of a released certificate, with its digest, signature and QR code */
export function certificatePdf(document: CertificateDocument): Promise<Buffer> {
  return print(document.snapshot, proof(document), {});
}

/** @returns the PDF of a draft: watermarked, without proof of origin */
export function draftPdf(snapshot: CertificateSnapshot): Promise<Buffer> {
  return print(snapshot, endMark(snapshot), { watermark: { text: 'DRAFT — not a certificate', color: STOP, opacity: 0.13, bold: true, angle: -45 } });
}

function print(snapshot: CertificateSnapshot, end: Content, extra: Partial<TDocumentDefinitions>): Promise<Buffer> {
  const issuedAt = new Date(snapshot.issuedAt);
  const definition: TDocumentDefinitions = {
    ...extra,
    pageSize: 'A4',
    pageMargins: PAGE_MARGINS,
    info: { title: `${snapshot.title} ${issueName(snapshot)}`, author: snapshot.laboratory.name, creator: 'Strainwright', producer: 'Strainwright', creationDate: issuedAt, modDate: issuedAt },
    language: 'en-GB',
    defaultStyle: { font: 'Roboto', fontSize: 9, color: INK, lineHeight: 1.12 },
    styles: STYLES,
    header: () => pageHeader(snapshot),
    footer: (page, pages) => pageFooter(snapshot, page, pages),
    /** A heading keeps the first rows of what it heads. */
    pageBreakBefore: (node) => node.headlineLevel === 1 && node.startPosition.top > 690,
    content: [...openingPage(snapshot), ...items(snapshot), ...testing(snapshot), ...results(snapshot), ...closing(snapshot), ...rawFiles(snapshot), end],
  };
  return preparePrinter().createPdf(definition).getBuffer();
}

function pageHeader(snapshot: CertificateSnapshot): Content {
  return {
    margin: [51, 26, 51, 0], fontSize: 7.5, color: QUIET,
    columns: [{ text: snapshot.laboratory.name }, { text: issueName(snapshot), font: 'RobotoMono', alignment: 'right' }],
  };
}

function pageFooter(snapshot: CertificateSnapshot, page: number, pages: number): Content {
  return {
    margin: [51, 14, 51, 0],
    stack: [
      { canvas: [{ type: 'line', x1: 0, y1: 0, x2: 493.28, y2: 0, lineWidth: 0.4, lineColor: HAIRLINE }] },
      {
        margin: [0, 5, 0, 0], fontSize: 7.5, color: QUIET,
        columns: [{ width: '*', text: 'Not to be reproduced except in full without the laboratory’s written approval.' }, { width: 190, text: `${issueName(snapshot)} · page ${page} of ${pages}`, alignment: 'right' }],
      },
    ],
  };
}
