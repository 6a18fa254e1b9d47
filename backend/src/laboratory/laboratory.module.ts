import { Global, Module } from '@nestjs/common';
import { LaboratoryController } from './laboratory.controller';
import { LaboratoryService } from './laboratory.service';

/** Global: review and certificates ask whether duties are separated. */
@Global()
@Module({ controllers: [LaboratoryController], providers: [LaboratoryService], exports: [LaboratoryService] })
export class LaboratoryModule {}
