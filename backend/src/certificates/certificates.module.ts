import { Module } from '@nestjs/common';
import { Compute } from '../platform/compute';
import { CertificatesController } from './certificates.controller';
import { CertificatesService } from './certificates.service';
import { DraftingService } from './drafting.service';
import { ReleaseService } from './release.service';
import { CertificateRenderer } from './renderer';

/** Has threads of its own, so that a certificate does not wait behind fits. */
@Module({ controllers: [CertificatesController], providers: [Compute, CertificateRenderer, CertificatesService, DraftingService, ReleaseService], exports: [DraftingService, ReleaseService] })
export class CertificatesModule {}
