import { Module } from '@nestjs/common';
import { FitsController } from './fits.controller';
import { FitsService } from './fits.service';

@Module({ controllers: [FitsController], providers: [FitsService] })
export class FitsModule {}
