import { onlyOwn, type Action } from '@strainwright/common/contract/permissions';
import { eq, sql, type SQL } from 'drizzle-orm';
import { orders } from '../database/schema/orders';
import type { Caller } from '../session/caller';

/** The condition that keeps a customer's people within their customer's orders; undefined, which is no condition, for the laboratory. */
export function visibleOrders(caller: Caller, action: Action): SQL | undefined {
  if (!onlyOwn(caller.roles, action)) return undefined;
  return caller.customerId === null ? sql`false` : eq(orders.customerId, caller.customerId);
}
