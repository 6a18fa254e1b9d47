import { Controller, Get } from '@nestjs/common';
import { recordEntry, recordQuery, recordVerification } from '@strainwright/common/contract/record';
import { page } from '@strainwright/common/contract/wire';
import type { z } from 'zod';
import { Answers, FromQuery } from '../platform/contract/from';
import { Action } from '../session/caller';
import { RecordReader } from './record.reader';

@Controller('record')
@Action('record.read')
export class RecordController {
  constructor(private readonly record: RecordReader) {}

  @Get()
  @Answers(page(recordEntry))
  list(@FromQuery(recordQuery) query: z.infer<typeof recordQuery>) {
    return this.record.list(query);
  }

  @Get('verify')
  @Answers(recordVerification)
  verify() {
    return this.record.verify();
  }
}
