import { firstValueFrom, take, toArray } from 'rxjs';
import { filter } from 'rxjs/operators';
import type { ChangeEvent } from '@strainwright/common/contract/wire';
import type { Role } from '@strainwright/common/contract/vocabulary';
import { orders } from '../database/schema/orders';
import { newId } from '../platform/ids';
import type { Caller } from '../session/caller';
import { testApp, type TestApp } from '../testing/app';
import { EventsService, type Message } from './events.service';

describe('EventsService', () => {
  let app: TestApp;
  let own: string;
  let foreign: string;
  let customerId: string;
  beforeAll(async () => {
    app = await testApp();
    customerId = await app.customer();
    const requestedById = (await app.person('quality manager')).id;
    const order = async (of: string) => {
      const id = newId();
      await app.database.db.insert(orders).values({ id, number: id, customerId: of, title: 'x', state: 'open', customerReference: '', materialDescription: 'x', constantsWanted: ['E'], kindsOfRun: ['pulse'], limits: [], notes: '', requestedById, createdAt: new Date(0) });
      return id;
    };
    own = await order(customerId);
    foreign = await order(await app.customer());
  }, 60_000);
  afterAll(() => app.close());

  const caller = (roles: Role[], of: string | null = null): Caller => ({ id: newId(), name: 'x', email: 'x', roles, customerId: of, familyId: newId() });
  /** The next changes that a caller is sent. */
  const changesFor = (who: Caller, n: number): Promise<unknown[]> =>
    firstValueFrom(app.get(EventsService).stream(who).pipe(filter((m: Message) => m.type === 'change'), take(n), toArray())).then((messages) => messages.map((m) => m.data));
  const tell = (event: ChangeEvent) => app.get(EventsService).tell(event);

  it('sends the laboratory’s people every change', async () => {
    const seen = changesFor(caller(['technician']), 2);
    const fit: ChangeEvent = { topic: 'fit', id: newId(), orderId: foreign };
    const order: ChangeEvent = { topic: 'order', id: own, orderId: own };
    await tell(fit);
    await tell(order);
    expect(await seen).toEqual([fit, order]);
  });

  it('sends a customer’s people only that one of their own orders changed', async () => {
    const seen = changesFor(caller(['customer'], customerId), 1);
    await tell({ topic: 'order', id: foreign, orderId: foreign });
    await tell({ topic: 'determination', id: newId(), orderId: foreign });
    await tell({ topic: 'fit', id: newId(), orderId: own });
    await tell({ topic: 'order', id: newId(), orderId: null });
    await tell({ topic: 'certificate', id: newId(), orderId: own });
    expect(await seen).toEqual([{ topic: 'order', id: own, orderId: own }]);
  });

  it('waits for the commit, and sends nothing of what was rolled back', async () => {
    const seen = changesFor(caller(['analyst']), 1);
    await app.database.transaction(async () => {
      await tell({ topic: 'order', id: foreign, orderId: foreign });
      throw new Error('rolled back');
    }).catch(() => undefined);
    await app.database.transaction(() => tell({ topic: 'order', id: own, orderId: own }));
    expect(await seen).toEqual([{ topic: 'order', id: own, orderId: own }]);
  });

  it('is a stream of server-sent events, only for who is signed in', async () => {
    await app.nobody.get('/api/events').expect(401);
    const technician = await app.person('technician');
    await app.nest.listen(0, '127.0.0.1');
    const stopping = new AbortController();
    const answer = await fetch(`${await app.nest.getUrl()}/api/events`, { headers: { Authorization: `Bearer ${technician.token}` }, signal: stopping.signal });
    expect(answer.headers.get('content-type')).toContain('text/event-stream');
    const reader = answer.body?.getReader();
    let text = '';
    while (!text.includes('event: ready')) text += new TextDecoder().decode((await reader?.read())?.value);
    await tell({ topic: 'order', id: own, orderId: own });
    while (!text.includes('event: change')) text += new TextDecoder().decode((await reader?.read())?.value);
    expect(text).toContain(`"id":"${own}"`);
    stopping.abort();
  });
});
