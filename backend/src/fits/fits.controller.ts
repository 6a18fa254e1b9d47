import { Controller, Get, HttpCode, Post } from '@nestjs/common';
import { fit, fitAnswer, newFit } from '@strainwright/common/contract/run-answers';
import type { z } from 'zod';
import { Answers, FromBody, FromId } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { FitsService } from './fits.service';

@Controller()
export class FitsController {
  constructor(private readonly fits: FitsService) {}

  @Post('runs/:id/fits')
  @HttpCode(202)
  @Action('fits.ask')
  @Answers(fitAnswer, 202)
  async ask(@FromId('run') id: string, @FromBody(newFit) body: z.infer<typeof newFit>, @CurrentPerson() caller: Caller) {
    return { fit: await this.fits.ask(id, body.settings, caller) };
  }

  @Get('fits/:id')
  @Action('fits.read')
  @Answers(fit)
  one(@FromId('fit') id: string) {
    return this.fits.one(id);
  }

  @Post('fits/:id/adopt')
  @HttpCode(200)
  @Action('fits.adopt')
  @Answers(fit)
  adopt(@FromId('fit') id: string, @CurrentPerson() caller: Caller) {
    return this.fits.adopt(id, caller);
  }
}
