import { Controller, Get, Post } from '@nestjs/common';
import { method, newMethod, newMethodVersion } from '@strainwright/common/contract/instruments';
import { listQuery, page, type ListQuery } from '@strainwright/common/contract/wire';
import type { z } from 'zod';
import { Answers, FromBody, FromId, FromQuery } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { MethodsService } from './methods.service';

@Controller('methods')
export class MethodsController {
  constructor(private readonly methods: MethodsService) {}

  @Get()
  @Action('methods.read')
  @Answers(page(method))
  list(@FromQuery(listQuery) query: ListQuery) {
    return this.methods.list(query);
  }

  @Get(':id')
  @Action('methods.read')
  @Answers(method)
  one(@FromId('method') id: string) {
    return this.methods.one(id);
  }

  @Post()
  @Action('methods.change')
  @Answers(method, 201)
  write(@FromBody(newMethod) body: z.infer<typeof newMethod>, @CurrentPerson() caller: Caller) {
    return this.methods.write(body, caller);
  }

  @Post(':id/versions')
  @Action('methods.change')
  @Answers(method, 201)
  revise(@FromId('method') id: string, @FromBody(newMethodVersion) body: z.infer<typeof newMethodVersion>, @CurrentPerson() caller: Caller) {
    return this.methods.revise(id, body, caller);
  }
}
