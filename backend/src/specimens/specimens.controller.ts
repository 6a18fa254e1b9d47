import { Controller, Get, Post } from '@nestjs/common';
import { newSpecimens, specimenQuery, specimenSummary } from '@strainwright/common/contract/orders';
import { specimen } from '@strainwright/common/contract/specimens';
import { listQuery, page, type ListQuery } from '@strainwright/common/contract/wire';
import { z } from 'zod';
import { Answers, FromBody, FromId, FromQuery } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { SpecimensService } from './specimens.service';

@Controller()
export class SpecimensController {
  constructor(private readonly specimens: SpecimensService) {}

  @Get('specimens')
  @Action('specimens.read')
  @Answers(page(specimenSummary))
  list(@FromQuery(specimenQuery) query: z.infer<typeof specimenQuery>) {
    return this.specimens.list(query);
  }

  @Get('samples/:id/specimens')
  @Action('specimens.read')
  @Answers(page(specimenSummary))
  listOfSample(@FromId('sample') sampleId: string, @FromQuery(listQuery) query: ListQuery) {
    return this.specimens.listOfSample(sampleId, query);
  }

  @Post('samples/:id/specimens')
  @Action('specimens.log')
  @Answers(z.object({ items: z.array(specimenSummary) }), 201)
  log(@FromId('sample') sampleId: string, @FromBody(newSpecimens) body: z.infer<typeof newSpecimens>, @CurrentPerson() caller: Caller) {
    return this.specimens.log(sampleId, body, caller);
  }

  @Get('specimens/:id')
  @Action('specimens.read')
  @Answers(specimen)
  one(@FromId('specimen') id: string) {
    return this.specimens.one(id);
  }
}
