/** Renders documents in a worker thread, so that the event loop stays free. */
import { Injectable } from '@nestjs/common';
import type { CertificateDocument, CertificateSnapshot } from '@strainwright/common/contract/certificates';
import { Compute } from '../platform/compute';
import type { RenderedDocuments, RenderJob } from './render.task';

const LONGEST_MS = 120_000;
const TASK = require.resolve('./render.task');

@Injectable()
export class CertificateRenderer {
  constructor(private readonly compute: Compute) {}

  /** PDF, spreadsheet and data file of a released certificate. */
  async documents(document: CertificateDocument): Promise<RenderedDocuments> {
    return this.run<RenderedDocuments>({ kind: 'released', document });
  }

  /** The watermarked PDF of a draft. */
  async draft(snapshot: CertificateSnapshot): Promise<Uint8Array> {
    return this.run<Uint8Array>({ kind: 'draft', snapshot });
  }

  private run<Result>(job: RenderJob): Promise<Result> {
    return this.compute.run<Result>(TASK, job, () => undefined, LONGEST_MS);
  }
}
