/** One order of the demo from its request on: what was asked for, what arrived, what was certified. */
import { newOrder, newSample, newSpecimens } from '@strainwright/common/contract/orders';
import type { z } from 'zod';
import { DraftingService } from '../certificates/drafting.service';
import { ReleaseService } from '../certificates/release.service';
import { OrdersService } from '../orders/orders.service';
import { SamplesService } from '../samples/samples.service';
import { SpecimensService } from '../specimens/specimens.service';
import { dayBefore } from './calendar';
import type { Bench } from './bench';
import { DEMO_PASSWORD, type Cast } from './people';

type Asked = Omit<z.input<typeof newOrder>, 'dueOn'> & { dueInDays?: number };
type Received = Omit<z.input<typeof newSample>, 'receivedOn' | 'sampledOn'> & { sampledDaysBefore?: number };

export class Commission {
  private readonly orders: OrdersService;
  private readonly samples: SamplesService;
  private readonly specimensService: SpecimensService;
  private readonly drafting: DraftingService;
  private readonly releasing: ReleaseService;
  private orderId = '';
  /** In the order in which they were logged. */
  readonly specimenIds: string[] = [];

  constructor(private readonly bench: Bench, private readonly customer: keyof Cast) {
    const find = <T>(service: new (...args: never[]) => T): T => bench.app.get<T>(service, { strict: false });
    this.orders = find(OrdersService);
    this.samples = find(SamplesService);
    this.specimensService = find(SpecimensService);
    this.drafting = find(DraftingService);
    this.releasing = find(ReleaseService);
  }

  async request({ dueInDays, ...asked }: Asked): Promise<void> {
    const dueOn = dueInDays === undefined ? null : dayBefore(this.bench.clock.now(), -dueInDays);
    this.orderId = (await this.orders.request(newOrder.parse({ ...asked, dueOn }), this.bench.cast[this.customer])).id;
  }

  async open(): Promise<void> {
    await this.orders.step(this.orderId, 'open', this.bench.cast.technician, {});
  }

  async close(): Promise<void> {
    await this.orders.step(this.orderId, 'close', this.bench.cast.quality, {});
  }

  async cancel(reason: string): Promise<void> {
    await this.orders.step(this.orderId, 'cancel', this.bench.cast.quality, { reason });
  }

  /** Logs a sample received today with so many specimens. */
  async log({ sampledDaysBefore, ...received }: Received, specimens: z.input<typeof newSpecimens>): Promise<void> {
    const now = this.bench.clock.now();
    const sampledOn = sampledDaysBefore === undefined ? null : dayBefore(now, sampledDaysBefore);
    const { id } = await this.samples.log(this.orderId, newSample.parse({ ...received, receivedOn: dayBefore(now, 0), sampledOn }), this.bench.cast.technician);
    const { items } = await this.specimensService.log(id, newSpecimens.parse(specimens), this.bench.cast.technician);
    this.specimenIds.push(...items.map((item) => item.id));
  }

  /** @throws Error when it was not logged */
  specimen(i: number): string {
    const id = this.specimenIds[i];
    if (id === undefined) throw new Error(`The demo has no specimen ${i + 1}`);
    return id;
  }

  draft(determinationIds: string[]): Promise<string> {
    return this.drafting.draft(this.orderId, { determinationIds, deviations: '' }, this.bench.cast.quality);
  }

  amend(certificateId: string, reason: string): Promise<string> {
    return this.drafting.amend(certificateId, { reason }, this.bench.cast.quality);
  }

  async release(certificateId: string): Promise<void> {
    await this.releasing.release(certificateId, { password: DEMO_PASSWORD }, this.bench.cast.quality);
  }
}
