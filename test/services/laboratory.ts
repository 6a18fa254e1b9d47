/** A laboratory with a person of each role, calibrated instruments and two methods, made through the API as its people would. */
import type { Fit, Run } from '@strainwright/common/contract/run-answers';
import type { NewReading } from '@strainwright/common/contract/specimens';
import type { Role } from '@strainwright/common/contract/vocabulary';
import { Client } from './client';
import { ADMINISTRATOR } from './server';

const PASSWORD = 'slow river over stones';
interface HasId { id: string }

export interface Laboratory {
  readonly url: string;
  readonly administrator: Client;
  readonly technician: Client;
  readonly analyst: Client;
  readonly reviewer: Client;
  readonly qualityManager: Client;
  readonly customer: Client;
  readonly otherCustomer: Client;
  readonly customerId: string;
  readonly otherCustomerId: string;
  readonly instruments: Readonly<Record<'caliper' | 'balance' | 'pulseUnit' | 'loadCell' | 'extensometer' | 'transverse', string>>;
  readonly methods: { readonly pulse: string; readonly stressStrain: string };
}

async function person(administrator: Client, url: string, name: string, roles: Role[], customerId: string | null = null): Promise<Client> {
  const email = `${name.toLowerCase().replace(/\s/g, '.')}@example.org`;
  await administrator.post('/api/people', { name, email, roles, customerId, password: PASSWORD });
  return Client.signIn(url, email, PASSWORD);
}

interface InstrumentSpec { name: string; kind: string; unit: string; resolution: number; U: number; relative?: boolean }

async function instrument(manager: Client, spec: InstrumentSpec): Promise<string> {
  const { id } = await manager.post<HasId>('/api/instruments', {
    name: spec.name, kind: spec.kind, serial: `SN-${spec.name}`, unit: spec.unit, resolution: spec.resolution, rangeLow: null, rangeHigh: null,
  });
  const year = new Date().getUTCFullYear();
  await manager.post(`/api/instruments/${id}/calibrations`, {
    calibratedOn: `${year - 1}-01-10`, dueOn: `${year + 2}-01-10`, certificate: `CAL-${spec.name}`, laboratory: 'Calibration Room', relative: spec.relative ?? false,
    expandedUncertainty: spec.U, coverageFactor: 2, correction: 0,
  });
  return id;
}

export async function setUpLaboratory(url: string): Promise<Laboratory> {
  const administrator = await Client.signIn(url, ADMINISTRATOR.email, ADMINISTRATOR.password);
  const customer = await administrator.post<HasId>('/api/customers', { name: 'Tarn Quarries', address: '1 Quarry Road', contactEmail: 'office@tarn.example' });
  const other = await administrator.post<HasId>('/api/customers', { name: 'Elm Castings', address: '2 Foundry Lane', contactEmail: 'office@elm.example' });
  const [qualityManager, technician, analyst, reviewer, customerPerson, otherPerson] = await Promise.all([
    person(administrator, url, 'Quinn Manager', ['quality manager']),
    person(administrator, url, 'Terry Technician', ['technician']),
    person(administrator, url, 'Ana Analyst', ['analyst']),
    person(administrator, url, 'Robin Reviewer', ['reviewer']),
    person(administrator, url, 'Casey Customer', ['customer'], customer.id),
    person(administrator, url, 'Otis Other', ['customer'], other.id),
  ]);
  const instruments = {
    caliper: await instrument(qualityManager, { name: 'Caliper 1', kind: 'caliper', unit: 'mm', resolution: 0.01, U: 0.02 }),
    balance: await instrument(qualityManager, { name: 'Balance 1', kind: 'balance', unit: 'g', resolution: 0.01, U: 0.04 }),
    pulseUnit: await instrument(qualityManager, { name: 'Pulse unit 1', kind: 'pulse unit', unit: 'µs', resolution: 0.01, U: 0.0005, relative: true }),
    loadCell: await instrument(qualityManager, { name: 'Load cell 1', kind: 'load cell', unit: 'kN', resolution: 0.001, U: 0.005, relative: true }),
    extensometer: await instrument(qualityManager, { name: 'Extensometer 1', kind: 'extensometer', unit: 'mm', resolution: 0.0001, U: 0.005, relative: true }),
    transverse: await instrument(qualityManager, { name: 'Transverse gauge 1', kind: 'extensometer', unit: 'mm', resolution: 0.0001, U: 0.005, relative: true }),
  };
  const method = async (code: string, kind: string) =>
    (await qualityManager.post<HasId>('/api/methods', { code, name: `${kind} test`, kind, standard: 'Laboratory procedure', description: 'As written', cautions: 'Wear eye protection' })).id;
  return {
    url, administrator, technician, analyst, reviewer, qualityManager, customer: customerPerson, otherCustomer: otherPerson,
    customerId: customer.id, otherCustomerId: other.id, instruments,
    methods: { pulse: await method('CB-P1', 'pulse'), stressStrain: await method('CB-S1', 'stress-strain') },
  };
}

export interface LoggedSpecimen { orderId: string; sampleId: string; specimenId: string }

/** An order of the customer, opened, with one sample and one specimen (a cylinder unless told otherwise). */
export async function logSpecimen(lab: Laboratory, options: { shape?: string; materialClass?: string } = {}): Promise<LoggedSpecimen> {
  const order = await lab.customer.post<HasId>('/api/orders', {
    title: 'Elastic constants', materialDescription: 'As delivered', constantsWanted: ['E', 'nu', 'G', 'K'], kindsOfRun: ['pulse', 'stress-strain'],
  });
  await lab.technician.post(`/api/orders/${order.id}/open`);
  const sample = await lab.technician.post<HasId>(`/api/orders/${order.id}/samples`, {
    material: 'aluminium alloy', materialClass: options.materialClass ?? 'metal', receivedOn: new Date().toISOString().slice(0, 10),
  });
  const { items } = await lab.technician.post<{ items: HasId[] }>(`/api/samples/${sample.id}/specimens`, { shape: options.shape ?? 'cylinder' });
  const specimen = items[0];
  if (specimen === undefined) throw new Error('no specimen was logged');
  return { orderId: order.id, sampleId: sample.id, specimenId: specimen.id };
}

/** Readings of a cylinder at three stations with a mass; mm and g. */
export function cylinderReadings(lab: Laboratory, size: { length: number; diameter: number; mass: number }): NewReading[] {
  const at = (quantity: NewReading['quantity'], value: number, unit: string, instrumentId: string): NewReading[] =>
    [1, 2, 3].map((station) => ({ quantity, station, value, unit, instrumentId }));
  return [
    ...at('length', size.length, 'mm', lab.instruments.caliper),
    ...at('diameter', size.diameter, 'mm', lab.instruments.caliper),
    { quantity: 'mass', station: 1, value: size.mass, unit: 'g', instrumentId: lab.instruments.balance },
  ];
}

export function pulseRun(lab: Laboratory, times: { P: number[]; S: number[]; zeroP: number[]; zeroS: number[] }) {
  const wave = (readings: number[], zero: number[]) => ({ readings, zero: { by: 'face to face' as const, readings: zero } });
  return {
    methodId: lab.methods.pulse,
    performedAt: new Date().toISOString(),
    instruments: { time: lab.instruments.pulseUnit },
    record: { kind: 'pulse' as const, frequency: 1e6, timeResolution: 1e-8, zeroDeterminedAt: new Date().toISOString(), P: wave(times.P, times.zeroP), S: wave(times.S, times.zeroS) },
  };
}

export function stressStrainRun(lab: Laboratory, files: readonly { purpose: 'record' }[], record: { compressive?: boolean; axialGaugeLength?: number | null } = {}) {
  return {
    methodId: lab.methods.stressStrain,
    performedAt: new Date().toISOString(),
    instruments: { force: lab.instruments.loadCell, axial: lab.instruments.extensometer, transverse: lab.instruments.transverse },
    record: { kind: 'stress-strain' as const, axialGaugeLength: record.axialGaugeLength ?? null, transverseGaugeLength: null, compressive: record.compressive ?? false },
    files,
  };
}

export async function recordRun(by: Client, specimenId: string, run: unknown, files: readonly { name: string; bytes: Uint8Array | string }[] = []): Promise<Run> {
  return by.upload<Run>(`/api/specimens/${specimenId}/runs`, { name: 'run', json: run }, files);
}

/** Waits until the fit has ended; the row is what counts, never an event. */
export async function fitEnded(by: Client, fitId: string, withinMs = 60_000): Promise<Fit> {
  const deadline = Date.now() + withinMs;
  for (;;) {
    const fit = await by.get<Fit>(`/api/fits/${fitId}`);
    if (fit.state === 'done' || fit.state === 'failed') return fit;
    if (Date.now() > deadline) throw new Error(`fit ${fitId} is still ${fit.state} at ${fit.progress}`);
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}
