import { Controller, Get, Post } from '@nestjs/common';
import { newReferenceCheck, newReferencePiece, referencePiece } from '@strainwright/common/contract/instruments';
import { listQuery, page, type ListQuery } from '@strainwright/common/contract/wire';
import type { z } from 'zod';
import { Answers, FromBody, FromId, FromQuery } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { ReferenceChecksService } from './reference-checks.service';

@Controller('reference-pieces')
export class ReferenceChecksController {
  constructor(private readonly checks: ReferenceChecksService) {}

  @Get()
  @Action('reference-checks.read')
  @Answers(page(referencePiece))
  list(@FromQuery(listQuery) query: ListQuery) {
    return this.checks.list(query);
  }

  @Get(':id')
  @Action('reference-checks.read')
  @Answers(referencePiece)
  one(@FromId('reference-piece') id: string) {
    return this.checks.one(id);
  }

  @Post()
  @Action('reference-checks.enter')
  @Answers(referencePiece, 201)
  add(@FromBody(newReferencePiece) body: z.infer<typeof newReferencePiece>, @CurrentPerson() caller: Caller) {
    return this.checks.add(body, caller);
  }

  @Post(':id/checks')
  @Action('reference-checks.enter')
  @Answers(referencePiece, 201)
  check(@FromId('reference-piece') id: string, @FromBody(newReferenceCheck) body: z.infer<typeof newReferenceCheck>, @CurrentPerson() caller: Caller) {
    return this.checks.check(id, body, caller);
  }
}
