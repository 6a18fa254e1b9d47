import { Module } from '@nestjs/common';
import { Compute } from '../platform/compute';
import { RunFilesService } from './run-files.service';
import { RunsController } from './runs.controller';
import { RunsService } from './runs.service';

@Module({ controllers: [RunsController], providers: [RunsService, RunFilesService, Compute] })
export class RunsModule {}
