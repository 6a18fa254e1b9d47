import type { OrderState } from '@strainwright/common/contract/states';
import { eq } from 'drizzle-orm';
import type { Transaction } from '../database/database';
import { orders } from '../database/schema/orders';
import { notFound, refused } from '../platform/problem';

/** Material is logged on open orders only. */
export const MAY_BE_LOGGED_ON: readonly OrderState[] = ['open'];
/** Readings and runs also on reported ones: an amendment may need them. */
export const MAY_BE_WORKED_ON: readonly OrderState[] = ['open', 'reported'];

/**
 * The order, locked until the transaction ends, so that its marks are given one at a time and it is not closed meanwhile.
 * @throws Problem 404, or 409 when its state does not allow the work
 */
export async function lockedOrder(tx: Transaction, orderId: string, states: readonly OrderState[]): Promise<{ id: string; number: string }> {
  const [order] = await tx.select({ id: orders.id, number: orders.number, state: orders.state }).from(orders).where(eq(orders.id, orderId)).for('update');
  if (order === undefined) throw notFound('order');
  refuseUnless(states, order);
  return order;
}

/** @throws Problem 409 saying what to do when the order's state does not allow the work */
export function refuseUnless(states: readonly OrderState[], order: { number: string; state: OrderState }): void {
  if (states.includes(order.state)) return;
  if (order.state === 'requested') throw refused('order.not-open', `Order ${order.number} is requested, not open yet. Open it first.`);
  throw refused('order.not-open', `Order ${order.number} is ${order.state}. Nothing more can be added to it.`);
}
