import { Module } from '@nestjs/common';
import { WorklistController } from './worklist.controller';
import { WorklistService } from './worklist.service';

@Module({ controllers: [WorklistController], providers: [WorklistService] })
export class WorklistModule {}
