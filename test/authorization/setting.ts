/** A laboratory with one thing of every kind in it, and people of every role, over HTTP on a port of its own. */
import type { AddressInfo } from 'node:net';
import { certificate } from '@strainwright/common/contract/certificates';
import type { Run } from '@strainwright/common/contract/run-answers';
import { ROLES, type Role } from '@strainwright/common/contract/vocabulary';
import { acceptedOrder, type AcceptedOrder } from '../../backend/src/certificates/testing/accepted-order';
import { testApp, type TestApp, type TestPerson } from '../../backend/src/testing/app';
import { recordText } from '../faults/record-text';
import { form } from '../services/client';

/** A value for every parameter in a route's path, by the path up to it. */
export type PathIds = Readonly<Record<string, string>>;

export interface OwnThings {
  order: AcceptedOrder;
  orderNumber: string;
  certificateId: string;
}

export interface Setting {
  app: TestApp;
  url: string;
  people: Readonly<Record<Role, TestPerson>>;
  /** Things that belong to the customer whose person `people.customer` is. */
  ids: PathIds;
  /** A customer with an order and a released certificate of their own, and none of the first's. */
  stranger: TestPerson;
  theirs: OwnThings;
  strangers: OwnThings;
}

async function certified(app: TestApp, people: Readonly<Record<Role, TestPerson>>, customerId: string): Promise<OwnThings & { number: string; determinationId: string }> {
  const order = await acceptedOrder(app, { technicianId: people.technician.id, analystId: people.analyst.id, reviewerId: people.reviewer.id }, { customerId });
  const manager = people['quality manager'];
  const determinationId = await order.determine('dynamic');
  const drafted = certificate.parse((await manager.post(`/api/orders/${order.orderId}/certificates`, { determinationIds: [determinationId] }).expect(201)).body);
  await manager.post(`/api/certificates/${drafted.id}/release`, { password: manager.password }).expect(200);
  const { body } = await manager.get(`/api/orders/${order.orderId}`).expect(200);
  return { order, orderNumber: (body as { number: string }).number, certificateId: drafted.id, number: drafted.number, determinationId };
}

async function withUpload(url: string, people: Readonly<Record<Role, TestPerson>>, order: AcceptedOrder): Promise<{ run: Run; reading: string }> {
  const manager = people['quality manager'];
  const { body: method } = await manager.post('/api/methods', { code: 'S-1', name: 'Tension', kind: 'stress-strain', standard: 'As written', description: '', cautions: '' }).expect(201);
  const part = {
    methodId: (method as { id: string }).id, performedAt: '2026-03-09T09:00:00.000Z', instruments: {},
    record: { kind: 'stress-strain', axialGaugeLength: null, transverseGaugeLength: null, compressive: false }, files: [{ purpose: 'record' }],
  };
  const answer = await fetch(`${url}/api/specimens/${order.specimenId}/runs`, {
    method: 'POST', headers: { authorization: `Bearer ${people.technician.token}` }, body: form({ name: 'run', json: part }, [{ name: 'record.csv', bytes: recordText(200) }]),
  });
  if (answer.status !== 201) throw new Error(`The run was not recorded: ${answer.status} ${await answer.text()}`);
  const { body: specimen } = await people.technician.get(`/api/specimens/${order.specimenId}`).expect(200);
  const [reading] = (specimen as { readings: { id: string }[] }).readings;
  // Its own contract is tested where runs are.
  return { run: (await answer.json()) as Run, reading: reading?.id ?? '' };
}

export async function setUp(): Promise<Setting> {
  const app = await testApp();
  app.clock.set('2026-03-10T09:00:00Z');
  await app.nest.listen(0, '127.0.0.1');
  const url = `http://127.0.0.1:${(app.nest.getHttpServer().address() as AddressInfo).port}`;
  const [customerId, strangerId] = [await app.customer('Tarn Quarries'), await app.customer('Elm Castings')];
  const made: Partial<Record<Role, TestPerson>> = {};
  for (const role of ROLES) made[role] = await app.person(role, role === 'customer' ? customerId : undefined);
  const people = made as Record<Role, TestPerson>;
  const manager = people['quality manager'];
  const theirs = await certified(app, people, customerId);
  const strangers = await certified(app, people, strangerId);
  const { run, reading } = await withUpload(url, people, theirs.order);
  const { body: asked } = await people.analyst.post(`/api/runs/${run.id}/fits`, { settings: { kind: 'stress-strain', region: { by: 'automatic' } } }).expect(202);
  const { body: piece } = await manager.post('/api/reference-pieces', {
    name: 'Steel block', quantity: 'E', knownValue: 200e9, knownExpandedUncertainty: 2e9, unit: 'Pa', instrumentId: theirs.order.instrumentId,
  }).expect(201);
  return {
    app, url, people, stranger: await app.person('customer', strangerId), theirs, strangers,
    ids: {
      '/orders/:id': theirs.order.orderId, '/samples/:id': theirs.order.sampleId, '/specimens/:id': theirs.order.specimenId, '/readings/:id': reading,
      '/runs/:id': run.id, '/runs/:id/files/:fileId': run.files[0]?.id ?? '', '/fits/:id': (asked as { fit: { id: string } }).fit.id,
      '/determinations/:id': theirs.determinationId, '/certificates/:id': theirs.certificateId, '/instruments/:id': theirs.order.instrumentId,
      '/methods/:id': theirs.order.methodId, '/customers/:id': customerId, '/people/:id': people.analyst.id, '/verify/:number': theirs.number,
      '/reference-pieces/:id': (piece as { id: string }).id, '/docs/:file': 'swagger-ui.css',
    },
  };
}
