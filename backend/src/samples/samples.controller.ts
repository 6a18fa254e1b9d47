import { Controller, Get, Post } from '@nestjs/common';
import { newSample, sample } from '@strainwright/common/contract/orders';
import { listQuery, page, type ListQuery } from '@strainwright/common/contract/wire';
import type { z } from 'zod';
import { Answers, FromBody, FromId, FromQuery } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { SamplesService } from './samples.service';

@Controller()
export class SamplesController {
  constructor(private readonly samples: SamplesService) {}

  @Get('orders/:id/samples')
  @Action('samples.read')
  @Answers(page(sample))
  list(@FromId('order') orderId: string, @FromQuery(listQuery) query: ListQuery) {
    return this.samples.list(orderId, query);
  }

  @Post('orders/:id/samples')
  @Action('samples.log')
  @Answers(sample, 201)
  log(@FromId('order') orderId: string, @FromBody(newSample) body: z.infer<typeof newSample>, @CurrentPerson() caller: Caller) {
    return this.samples.log(orderId, body, caller);
  }

  @Get('samples/:id')
  @Action('samples.read')
  @Answers(sample)
  one(@FromId('sample') id: string) {
    return this.samples.one(id);
  }
}
