import { Controller, Headers, HttpCode, Post } from '@nestjs/common';
import { ApiHeader } from '@nestjs/swagger';
import { correctReading, newReadings, readingsAnswer } from '@strainwright/common/contract/specimens';
import type { z } from 'zod';
import { Answers, FromBody, FromId } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { idempotencyKey } from './answered-requests';
import { ReadingsService } from './readings.service';

@Controller()
export class ReadingsController {
  constructor(private readonly readings: ReadingsService) {}

  @Post('specimens/:id/readings')
  @Action('readings.enter')
  @ApiHeader({ name: 'Idempotency-Key', required: false, description: 'Of the caller’s own choosing; a burst sent again under its key is stored once.' })
  @Answers(readingsAnswer, 201)
  enter(@FromId('specimen') id: string, @FromBody(newReadings) body: z.infer<typeof newReadings>, @Headers('idempotency-key') key: string | undefined, @CurrentPerson() caller: Caller) {
    return this.readings.enter(id, body, idempotencyKey(key), caller);
  }

  @Post('readings/:id/correct')
  @HttpCode(200)
  @Action('readings.enter')
  @Answers(readingsAnswer)
  correct(@FromId('reading') id: string, @FromBody(correctReading) body: z.infer<typeof correctReading>, @CurrentPerson() caller: Caller) {
    return this.readings.correct(id, body, caller);
  }
}
