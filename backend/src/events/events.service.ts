import { Injectable, Logger, OnModuleInit } from '@nestjs/common';
import { changeEvent, type ChangeEvent } from '@strainwright/common/contract/wire';
import { mayDo, onlyOwn } from '@strainwright/common/contract/permissions';
import { eq } from 'drizzle-orm';
import { concatMap, EMPTY, interval, map, merge, Observable, of, Subject } from 'rxjs';
import { Database } from '../database/database';
import { orders } from '../database/schema/orders';
import { RedisConnections } from '../platform/redis';
import type { Caller } from '../session/caller';
import { errorText } from '../platform/error-text';

const CHANNEL = 'strainwright:changes';
const HEARTBEAT_MS = 20_000;
/** Orders whose customer is remembered; an order never changes its customer. */
const REMEMBERED = 5_000;

/** What of an order a customer follows; fits and runs come too often, and say nothing to them. */
const FOR_CUSTOMERS: ReadonlySet<ChangeEvent['topic']> = new Set(['order', 'specimen', 'determination', 'certificate']);

export interface Message {
  type?: string;
  data: string | object;
}

/** Tells open pages which rows to look at again. An event carries ids only, and never decides anything. */
@Injectable()
export class EventsService implements OnModuleInit {
  private readonly logger = new Logger('Events');
  private readonly changes = new Subject<ChangeEvent>();
  private readonly customerOfOrder = new Map<string, string>();

  constructor(private readonly redis: RedisConnections, private readonly database: Database) {}

  async onModuleInit(): Promise<void> {
    this.redis.subscriber.on('message', (_channel, message) => {
      const event = changeEvent.safeParse(JSON.parse(message));
      if (event.success) this.changes.next(event.data);
    });
    await this.redis.subscriber.subscribe(CHANNEL);
  }

  /** Inside a transaction, the event waits for the commit. */
  async tell(event: ChangeEvent): Promise<void> {
    await this.database.afterCommit(() => this.redis.commands.publish(CHANNEL, JSON.stringify(event)));
  }

  /** The stream of one caller: a heartbeat, and the changes they may see. */
  stream(caller: Caller): Observable<Message> {
    const ready: Message = { type: 'ready', data: {} };
    const beats = interval(HEARTBEAT_MS).pipe(map((): Message => ({ type: 'beat', data: {} })));
    const seen = this.changes.pipe(concatMap(async (event) => this.asSeenBy(caller, event)), concatMap((event) => (event === undefined ? EMPTY : of<Message>({ type: 'change', data: event }))));
    return merge(of(ready), beats, seen);
  }

  /** A customer is told only that one of their own orders changed. */
  private async asSeenBy(caller: Caller, event: ChangeEvent): Promise<ChangeEvent | undefined> {
    if (!mayDo(caller.roles, 'events.read')) return undefined;
    if (!onlyOwn(caller.roles, 'events.read')) return mayDo(caller.roles, 'worklist.read') ? event : undefined;
    if (event.orderId === null || !FOR_CUSTOMERS.has(event.topic)) return undefined;
    const customerId = await this.customerOf(event.orderId);
    return customerId !== undefined && customerId === caller.customerId ? { topic: 'order', id: event.orderId, orderId: event.orderId } : undefined;
  }

  private async customerOf(orderId: string): Promise<string | undefined> {
    const known = this.customerOfOrder.get(orderId);
    if (known !== undefined) return known;
    try {
      const [order] = await this.database.db.select({ customerId: orders.customerId }).from(orders).where(eq(orders.id, orderId));
      if (order === undefined) return undefined;
      if (this.customerOfOrder.size >= REMEMBERED) this.customerOfOrder.clear();
      this.customerOfOrder.set(orderId, order.customerId);
      return order.customerId;
    } catch (error) {
      this.logger.warn(`An event was not passed on: ${errorText(error)}`);
      return undefined;
    }
  }
}
