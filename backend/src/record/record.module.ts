import { Global, Module } from '@nestjs/common';
import { RecordController } from './record.controller';
import { RecordReader } from './record.reader';
import { RecordService } from './record.service';

/** Global: every change writes the record. */
@Global()
@Module({ controllers: [RecordController], providers: [RecordService, RecordReader], exports: [RecordService] })
export class RecordModule {}
