import { Module } from '@nestjs/common';
import { InstrumentsModule } from '../instruments/instruments.module';
import { Compute } from '../platform/compute';
import { DeterminationsController } from './determinations.controller';
import { DeterminationsService } from './determinations.service';
import { ReviewFileService } from './review-file.service';

@Module({ imports: [InstrumentsModule], controllers: [DeterminationsController], providers: [DeterminationsService, ReviewFileService, Compute] })
export class DeterminationsModule {}
