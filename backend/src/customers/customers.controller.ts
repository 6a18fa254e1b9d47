import { Controller, Get, Patch, Post } from '@nestjs/common';
import { changeCustomer, customer, newCustomer } from '@strainwright/common/contract/people';
import { listQuery, page, type ListQuery } from '@strainwright/common/contract/wire';
import type { z } from 'zod';
import { Answers, FromBody, FromId, FromQuery } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { CustomersService } from './customers.service';

@Controller('customers')
export class CustomersController {
  constructor(private readonly customers: CustomersService) {}

  @Get()
  @Action('customers.read')
  @Answers(page(customer))
  list(@FromQuery(listQuery) query: ListQuery) {
    return this.customers.list(query);
  }

  @Get(':id')
  @Action('customers.read')
  @Answers(customer)
  one(@FromId('customer') id: string) {
    return this.customers.one(id);
  }

  @Post()
  @Action('customers.change')
  @Answers(customer, 201)
  add(@FromBody(newCustomer) body: z.infer<typeof newCustomer>, @CurrentPerson() caller: Caller) {
    return this.customers.add(body, caller);
  }

  @Patch(':id')
  @Action('customers.change')
  @Answers(customer)
  change(@FromId('customer') id: string, @FromBody(changeCustomer) body: z.infer<typeof changeCustomer>, @CurrentPerson() caller: Caller) {
    return this.customers.change(id, body, caller);
  }
}
