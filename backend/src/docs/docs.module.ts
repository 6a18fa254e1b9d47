import { Module } from '@nestjs/common';
import { ApiDocument } from './api-document';
import { DocsController } from './docs.controller';

@Module({ controllers: [DocsController], providers: [ApiDocument] })
export class DocsModule {}
