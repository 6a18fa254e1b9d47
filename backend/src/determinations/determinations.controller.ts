import { Controller, Get, HttpCode, Post } from '@nestjs/common';
import { acceptDetermination, determination, determinationQuery, determinationSummary, newDetermination, returnDetermination, reviewFile, submitDetermination } from '@strainwright/common/contract/determinations';
import { page } from '@strainwright/common/contract/wire';
import type { z } from 'zod';
import { Answers, FromBody, FromId, FromQuery } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { DeterminationsService } from './determinations.service';
import { ReviewFileService } from './review-file.service';

@Controller()
export class DeterminationsController {
  constructor(private readonly determinations: DeterminationsService, private readonly reviewFiles: ReviewFileService) {}

  @Get('determinations')
  @Action('determinations.read')
  @Answers(page(determinationSummary))
  list(@FromQuery(determinationQuery) query: z.infer<typeof determinationQuery>) {
    return this.determinations.list(query);
  }

  @Get('determinations/:id')
  @Action('determinations.read')
  @Answers(determination)
  one(@FromId('determination') id: string, @CurrentPerson() caller: Caller) {
    return this.determinations.one(id, caller);
  }

  @Get('determinations/:id/review')
  @Action('determinations.read')
  @Answers(reviewFile)
  reviewFile(@FromId('determination') id: string, @CurrentPerson() caller: Caller) {
    return this.reviewFiles.of(id, caller);
  }

  @Post('specimens/:id/determinations')
  @Action('determinations.compose')
  @Answers(determination, 201)
  compose(@FromId('specimen') id: string, @FromBody(newDetermination) body: z.infer<typeof newDetermination>, @CurrentPerson() caller: Caller) {
    return this.determinations.compose(id, body.basis, caller);
  }

  @Post('determinations/:id/submit')
  @HttpCode(200)
  @Action('determinations.submit')
  @Answers(determination)
  submit(@FromId('determination') id: string, @FromBody(submitDetermination) body: z.infer<typeof submitDetermination>, @CurrentPerson() caller: Caller) {
    return this.determinations.submit(id, body, caller);
  }

  @Post('determinations/:id/accept')
  @HttpCode(200)
  @Action('determinations.review')
  @Answers(determination)
  accept(@FromId('determination') id: string, @FromBody(acceptDetermination) body: z.infer<typeof acceptDetermination>, @CurrentPerson() caller: Caller) {
    return this.determinations.accept(id, body.comment, body.version, caller);
  }

  @Post('determinations/:id/return')
  @HttpCode(200)
  @Action('determinations.review')
  @Answers(determination)
  return(@FromId('determination') id: string, @FromBody(returnDetermination) body: z.infer<typeof returnDetermination>, @CurrentPerson() caller: Caller) {
    return this.determinations.return(id, body.reason, body.version, caller);
  }
}
