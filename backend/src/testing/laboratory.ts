import type { OrderSummary, Sample, SpecimenSummary } from '@strainwright/common/contract/orders';
import type { NewReading } from '@strainwright/common/contract/specimens';
import type { InstrumentKind } from '@strainwright/common/contract/vocabulary';
import { testApp, type TestApp, type TestPerson } from './app';

interface InstrumentOptions { unit: string; resolution: number; expandedUncertainty: number; calibratedOn?: string; dueOn?: string; correction?: number; relative?: boolean }

/** A laboratory as it is on 2 June 2025: people of every role, two customers, instruments in calibration; made through the API. */
export interface TestLaboratory {
  app: TestApp;
  technician: TestPerson;
  analyst: TestPerson;
  reviewer: TestPerson;
  qualityManager: TestPerson;
  administrator: TestPerson;
  customerId: string;
  customer: TestPerson;
  otherCustomerId: string;
  otherCustomer: TestPerson;
  caliper: string;
  balance: string;
  thermometer: string;
  instrument(name: string, kind: InstrumentKind, options: InstrumentOptions): Promise<string>;
  order(state?: 'requested' | 'open', change?: object): Promise<OrderSummary>;
  sample(change?: object): Promise<Sample>;
  specimen(change?: object): Promise<SpecimenSummary>;
  /** Readings of a cylinder of 50 mm × 25 mm and 66 g at three stations: 2689 kg/m³. */
  cylinderReadings(): NewReading[];
}

export const NOW = '2025-06-02T09:00:00.000Z';
export const orderBody = { title: 'Elastic constants of rods', materialDescription: 'Aluminium alloy rods', constantsWanted: ['E', 'nu'], kindsOfRun: ['pulse'] };

export async function testLaboratory(): Promise<TestLaboratory> {
  const app = await testApp();
  app.clock.set(NOW);
  const [customerId, otherCustomerId] = [await app.customer('Tarn Quarries'), await app.customer('Elm Castings')];
  const people = {
    technician: await app.person('technician'), analyst: await app.person('analyst'), reviewer: await app.person('reviewer'), qualityManager: await app.person('quality manager'),
    administrator: await app.person('administrator'), customer: await app.person('customer', customerId), otherCustomer: await app.person('customer', otherCustomerId),
  };
  const { technician, qualityManager, customer } = people;

  const instrument: TestLaboratory['instrument'] = async (name, kind, { unit, resolution, ...calibration }) => {
    const { body } = await qualityManager.post('/api/instruments', { name, kind, serial: `SN ${name}`, unit, resolution, rangeLow: null, rangeHigh: null }).expect(201);
    const { id } = body as { id: string };
    await qualityManager.post(`/api/instruments/${id}/calibrations`, {
      calibratedOn: '2025-01-10', dueOn: '2026-01-10', certificate: `CAL ${name}`, laboratory: 'Calibration room', relative: false, coverageFactor: 2, correction: 0, ...calibration,
    }).expect(201);
    return id;
  };
  const instruments = {
    caliper: await instrument('Caliper 1', 'caliper', { unit: 'mm', resolution: 0.01, expandedUncertainty: 0.02 }),
    balance: await instrument('Balance 1', 'balance', { unit: 'g', resolution: 0.01, expandedUncertainty: 0.04 }),
    thermometer: await instrument('Thermometer 1', 'thermometer', { unit: '°C', resolution: 0.1, expandedUncertainty: 0.2 }),
  };

  const order: TestLaboratory['order'] = async (state = 'open', change = {}) => {
    const { body } = await customer.post('/api/orders', { ...orderBody, ...change }).expect(201);
    const made = body as OrderSummary;
    return state === 'requested' ? made : ((await technician.post(`/api/orders/${made.id}/open`).expect(200)).body as OrderSummary);
  };
  const sample: TestLaboratory['sample'] = async (change = {}) => {
    const { id } = await order();
    return (await technician.post(`/api/orders/${id}/samples`, { material: 'aluminium alloy', materialClass: 'metal', receivedOn: '2025-06-01', ...change }).expect(201)).body as Sample;
  };
  const specimen: TestLaboratory['specimen'] = async (change = {}) => {
    const { id } = await sample();
    const { items } = (await technician.post(`/api/samples/${id}/specimens`, { shape: 'cylinder', ...change }).expect(201)).body as { items: SpecimenSummary[] };
    const [first] = items;
    if (first === undefined) throw new Error('No specimen was logged');
    return first;
  };
  const cylinderReadings = (): NewReading[] => {
    const at = (quantity: 'length' | 'diameter', values: number[]): NewReading[] => values.map((value, i) => ({ quantity, station: i + 1, value, unit: 'mm', instrumentId: instruments.caliper }));
    return [...at('length', [50.01, 50, 49.99]), ...at('diameter', [25.01, 25, 24.99]), { quantity: 'mass', station: 1, value: 66, unit: 'g', instrumentId: instruments.balance }];
  };
  return { app, ...people, customerId, otherCustomerId, ...instruments, instrument, order, sample, specimen, cylinderReadings };
}
