import { Controller, Get, Patch } from '@nestjs/common';
import { changeLaboratory, laboratory } from '@strainwright/common/contract/people';
import type { z } from 'zod';
import { Answers, FromBody } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { LaboratoryService } from './laboratory.service';

@Controller('laboratory')
export class LaboratoryController {
  constructor(private readonly laboratory: LaboratoryService) {}

  @Get()
  @Action('laboratory.read')
  @Answers(laboratory)
  read() {
    return this.laboratory.read();
  }

  @Patch()
  @Action('laboratory.change')
  @Answers(laboratory)
  change(@CurrentPerson() me: Caller, @FromBody(changeLaboratory) body: z.infer<typeof changeLaboratory>) {
    return this.laboratory.change(me, body);
  }
}
