import { Controller, Get, HttpCode, Post, StreamableFile } from '@nestjs/common';
import { amendCertificate, certificate, certificateQuery, certificateSummary, draftCertificate, releaseCertificate, withdrawCertificate } from '@strainwright/common/contract/certificates';
import { page } from '@strainwright/common/contract/wire';
import type { z } from 'zod';
import { Answers, FromBody, FromId, FromQuery } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { CertificatesService, type DocumentFormat } from './certificates.service';
import { DraftingService } from './drafting.service';
import { ReleaseService } from './release.service';

const MEDIA_TYPES: Readonly<Record<DocumentFormat, string>> = {
  pdf: 'application/pdf', xlsx: 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet', json: 'application/json',
};

@Controller()
export class CertificatesController {
  constructor(private readonly certificates: CertificatesService, private readonly drafting: DraftingService, private readonly releasing: ReleaseService) {}

  @Get('certificates')
  @Action('certificates.read')
  @Answers(page(certificateSummary))
  list(@FromQuery(certificateQuery) query: z.infer<typeof certificateQuery>, @CurrentPerson() me: Caller) {
    return this.certificates.list(query, me);
  }

  @Get('certificates/:id')
  @Action('certificates.read')
  @Answers(certificate)
  one(@FromId('certificate') id: string, @CurrentPerson() me: Caller) {
    return this.certificates.one(id, me);
  }

  @Get('certificates/:id/certificate.pdf')
  @Action('certificates.read')
  pdf(@FromId('certificate') id: string, @CurrentPerson() me: Caller) {
    return this.download(id, 'pdf', me);
  }

  @Get('certificates/:id/certificate.xlsx')
  @Action('certificates.read')
  xlsx(@FromId('certificate') id: string, @CurrentPerson() me: Caller) {
    return this.download(id, 'xlsx', me);
  }

  @Get('certificates/:id/certificate.json')
  @Action('certificates.read')
  json(@FromId('certificate') id: string, @CurrentPerson() me: Caller) {
    return this.download(id, 'json', me);
  }

  @Post('orders/:id/certificates')
  @Action('certificates.draft')
  @Answers(certificate, 201)
  async draft(@FromId('order') id: string, @FromBody(draftCertificate) body: z.infer<typeof draftCertificate>, @CurrentPerson() me: Caller) {
    return this.certificates.one(await this.drafting.draft(id, body, me), me);
  }

  @Post('certificates/:id/release')
  @HttpCode(200)
  @Action('certificates.release')
  @Answers(certificate)
  async release(@FromId('certificate') id: string, @FromBody(releaseCertificate) body: z.infer<typeof releaseCertificate>, @CurrentPerson() me: Caller) {
    await this.releasing.release(id, body, me);
    return this.certificates.one(id, me);
  }

  @Post('certificates/:id/amend')
  @Action('certificates.amend')
  @Answers(certificate, 201)
  async amend(@FromId('certificate') id: string, @FromBody(amendCertificate) body: z.infer<typeof amendCertificate>, @CurrentPerson() me: Caller) {
    return this.certificates.one(await this.drafting.amend(id, body, me), me);
  }

  @Post('certificates/:id/withdraw')
  @HttpCode(200)
  @Action('certificates.withdraw')
  @Answers(certificate)
  async withdraw(@FromId('certificate') id: string, @FromBody(withdrawCertificate) body: z.infer<typeof withdrawCertificate>, @CurrentPerson() me: Caller) {
    await this.releasing.withdraw(id, body, me);
    return this.certificates.one(id, me);
  }

  /** Always as an attachment, never shown inside the application's own origin. */
  private async download(id: string, format: DocumentFormat, me: Caller): Promise<StreamableFile> {
    const { name, bytes } = await this.certificates.document(id, format, me);
    return new StreamableFile(bytes, { type: MEDIA_TYPES[format], disposition: `attachment; filename="${name}"`, length: bytes.byteLength });
  }
}
