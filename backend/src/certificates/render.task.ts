/** Runs in a worker thread: pure rendering, no database, no network. */
import type { CertificateDocument, CertificateSnapshot } from '@strainwright/common/contract/certificates';
import { certificatePdf, draftPdf } from './rendering/certificate-pdf';
import { certificateXlsx } from './rendering/certificate-xlsx';
import { certificateJson } from './rendering/signing';

export type RenderJob = { kind: 'released'; document: CertificateDocument } | { kind: 'draft'; snapshot: CertificateSnapshot };
export type RenderedDocuments = Record<'pdf' | 'xlsx' | 'json', Uint8Array>;

export default async function render({ job }: { job: RenderJob }): Promise<RenderedDocuments | Uint8Array> {
  if (job.kind === 'draft') return draftPdf(job.snapshot);
  return { pdf: await certificatePdf(job.document), xlsx: await certificateXlsx(job.document), json: certificateJson(job.document) };
}
