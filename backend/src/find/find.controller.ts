import { Controller, Get } from '@nestjs/common';
import { found } from '@strainwright/common/contract/wire';
import { z } from 'zod';
import { Answers, FromQuery } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { FindService } from './find.service';

const findQuery = z.strictObject({ q: z.string().max(120) });

@Controller('find')
export class FindController {
  constructor(private readonly finder: FindService) {}

  @Get()
  @Action('find.read')
  @Answers(z.object({ items: z.array(found) }))
  async find(@FromQuery(findQuery) { q }: z.infer<typeof findQuery>, @CurrentPerson() caller: Caller) {
    return { items: await this.finder.find(q, caller) };
  }
}
