import { Controller, Get, HttpCode, Patch, Post } from '@nestjs/common';
import { changeOwnPassword, changePerson, newPerson, ownSettings, person } from '@strainwright/common/contract/people';
import { listQuery, page, type ListQuery } from '@strainwright/common/contract/wire';
import type { z } from 'zod';
import { Answers, FromBody, FromId, FromQuery } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { PeopleService } from './people.service';

@Controller('people')
export class PeopleController {
  constructor(private readonly people: PeopleService) {}

  @Get()
  @Action('people.read')
  @Answers(page(person))
  list(@FromQuery(listQuery) query: ListQuery) {
    return this.people.list(query);
  }

  @Post()
  @Action('people.change')
  @Answers(person, 201)
  create(@CurrentPerson() me: Caller, @FromBody(newPerson) body: z.infer<typeof newPerson>) {
    return this.people.create(me, body);
  }

  @Patch('me')
  @HttpCode(204)
  @Action('people.change-own')
  changeOwnSettings(@CurrentPerson() me: Caller, @FromBody(ownSettings) body: z.infer<typeof ownSettings>) {
    return this.people.changeOwnSettings(me, body);
  }

  @Post('me/password')
  @HttpCode(204)
  @Action('people.change-own')
  changeOwnPassword(@CurrentPerson() me: Caller, @FromBody(changeOwnPassword) body: z.infer<typeof changeOwnPassword>) {
    return this.people.changeOwnPassword(me, body);
  }

  @Patch(':id')
  @Action('people.change')
  @Answers(person)
  change(@CurrentPerson() me: Caller, @FromId('person') id: string, @FromBody(changePerson) body: z.infer<typeof changePerson>) {
    return this.people.change(me, id, body);
  }
}
