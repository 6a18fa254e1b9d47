import { Controller, Get } from '@nestjs/common';
import { worklist } from '@strainwright/common/contract/worklist';
import { Answers } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { WorklistService } from './worklist.service';

@Controller('worklist')
export class WorklistController {
  constructor(private readonly worklist: WorklistService) {}

  @Get()
  @Action('worklist.read')
  @Answers(worklist)
  read(@CurrentPerson() caller: Caller) {
    return this.worklist.read(caller);
  }
}
