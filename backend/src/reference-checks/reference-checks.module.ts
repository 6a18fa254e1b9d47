import { Module } from '@nestjs/common';
import { ReferenceChecksController } from './reference-checks.controller';
import { ReferenceChecksService } from './reference-checks.service';

@Module({ controllers: [ReferenceChecksController], providers: [ReferenceChecksService] })
export class ReferenceChecksModule {}
