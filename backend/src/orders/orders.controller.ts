import { Controller, Get, HttpCode, Post } from '@nestjs/common';
import { cancelOrder, changeState, newOrder, order, orderQuery, orderSummary } from '@strainwright/common/contract/orders';
import { page } from '@strainwright/common/contract/wire';
import type { z } from 'zod';
import { Answers, FromBody, FromId, FromQuery } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { OrdersService } from './orders.service';

@Controller('orders')
export class OrdersController {
  constructor(private readonly orders: OrdersService) {}

  @Get()
  @Action('orders.read')
  @Answers(page(orderSummary))
  list(@FromQuery(orderQuery) query: z.infer<typeof orderQuery>, @CurrentPerson() caller: Caller) {
    return this.orders.list(query, caller);
  }

  @Get(':id')
  @Action('orders.read')
  @Answers(order)
  one(@FromId('order') id: string, @CurrentPerson() caller: Caller) {
    return this.orders.one(id, caller);
  }

  @Post()
  @Action('orders.request')
  @Answers(order, 201)
  request(@FromBody(newOrder) body: z.infer<typeof newOrder>, @CurrentPerson() caller: Caller) {
    return this.orders.request(body, caller);
  }

  @Post(':id/open')
  @HttpCode(200)
  @Action('orders.open')
  @Answers(order)
  open(@FromId('order') id: string, @FromBody(changeState) body: z.infer<typeof changeState>, @CurrentPerson() caller: Caller) {
    return this.orders.step(id, 'open', caller, body);
  }

  @Post(':id/close')
  @HttpCode(200)
  @Action('orders.close')
  @Answers(order)
  close(@FromId('order') id: string, @FromBody(changeState) body: z.infer<typeof changeState>, @CurrentPerson() caller: Caller) {
    return this.orders.step(id, 'close', caller, body);
  }

  @Post(':id/cancel')
  @HttpCode(200)
  @Action('orders.cancel')
  @Answers(order)
  cancel(@FromId('order') id: string, @FromBody(cancelOrder) body: z.infer<typeof cancelOrder>, @CurrentPerson() caller: Caller) {
    return this.orders.step(id, 'cancel', caller, body);
  }
}
