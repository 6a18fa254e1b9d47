/** An open order with accepted determinations, written straight into the database: what certificates are drafted from. */
import type { ElasticResult } from '@strainwright/common/contract/result';
import type { Limit } from '@strainwright/common/contract/orders';
import type { Basis } from '@strainwright/common/contract/vocabulary';
import { determinations, reviews } from '../../database/schema/determinations';
import { calibrations, instruments, methods } from '../../database/schema/instruments';
import { orders, samples, specimens } from '../../database/schema/orders';
import { readings } from '../../database/schema/readings';
import { adoptions, fits, runFiles, runs } from '../../database/schema/runs';
import { newId } from '../../platform/ids';
import type { TestApp } from '../../testing/app';
import { exampleResult } from './example-snapshot';

export interface Workers {
  technicianId: string;
  analystId: string;
  reviewerId: string;
}

export interface AcceptedOrder {
  customerId: string;
  orderId: string;
  sampleId: string;
  specimenId: string;
  instrumentId: string;
  methodId: string;
  /** Adds an accepted determination of the one specimen. */
  determine(basis: Basis, more?: { state?: 'submitted' | 'accepted' | 'superseded'; result?: ElasticResult; number?: number }): Promise<string>;
}

let made = 0;

export async function acceptedOrder(app: TestApp, workers: Workers, options: { limits?: Limit[]; customerId?: string; calibrationDueOn?: string } = {}): Promise<AcceptedOrder> {
  const { db } = app.database;
  made += 1;
  const at = app.clock.now();
  const customerId = options.customerId ?? (await app.customer());
  const [orderId, sampleId, specimenId, instrumentId, methodId] = [newId(), newId(), newId(), newId(), newId()];
  await db.insert(orders).values({ id: orderId, number: `2026-${String(9000 + made)}`, customerId, title: 'Bars', state: 'open', customerReference: 'REF-1', materialDescription: 'Rolled bar, as the customer says', constantsWanted: ['E'], kindsOfRun: ['pulse'], limits: options.limits ?? [], notes: '', requestedById: workers.technicianId, createdAt: at });
  await db.insert(samples).values({ id: sampleId, orderId, mark: `S${made}`, material: 'Aluminium alloy', materialClass: 'metal', description: '', receivedOn: '2026-03-01', condition: 'clean', sampledOn: null, sampledBy: '', createdAt: at });
  await db.insert(specimens).values({ id: specimenId, sampleId, mark: `S${made}-01`, shape: 'cylinder', orientation: '', moisture: 'not applicable', notes: '', createdAt: at });
  await db.insert(instruments).values({ id: instrumentId, name: `Micrometer ${made}`, kind: 'micrometer', maker: '', model: '', serial: `M${made}`, location: '', unit: 'mm', resolution: 1e-6, rangeLow: 0, rangeHigh: 0.1, createdAt: at });
  await db.insert(calibrations).values({ id: newId(), instrumentId, calibratedOn: '2025-06-01', dueOn: options.calibrationDueOn ?? '2026-06-01', certificate: `CAL-${made}`, laboratory: 'Calibration house', relative: false, expandedUncertainty: 2e-6, coverageFactor: 2, correction: 0, enteredById: workers.technicianId, enteredAt: at });
  await db.insert(methods).values({ id: methodId, code: `M-${made}`, versionNumber: 1, name: 'Pulse velocities', kind: 'pulse', standard: 'Settings after ASTM E494', description: '', cautions: '', createdById: workers.technicianId, createdAt: at });
  const reading = (quantity: 'length' | 'diameter' | 'mass', station: number, value: number) => ({ id: newId(), specimenId, quantity, station, value, typedValue: value, unit: 'm', instrumentId, personId: workers.technicianId, readAt: at });
  await db.insert(readings).values([reading('length', 1, 0.05002), reading('length', 2, 0.05003), reading('diameter', 1, 0.02), reading('diameter', 2, 0.02001), reading('mass', 1, 0.0424)]);
  const order = { customerId, orderId, sampleId, specimenId, instrumentId, methodId };
  let determined = 0;
  const determine: AcceptedOrder['determine'] = async (basis, more = {}) => {
    determined += 1;
    return insertDetermination(app, workers, order, basis, more, determined);
  };
  return { ...order, determine };
}

async function insertDetermination(app: TestApp, workers: Workers, order: Omit<AcceptedOrder, 'determine'>, basis: Basis, more: { state?: 'submitted' | 'accepted' | 'superseded'; result?: ElasticResult; number?: number }, number: number): Promise<string> {
  const { db } = app.database;
  const at = app.clock.now();
  const [runId, fitId, id] = [newId(), newId(), newId()];
  const result = more.result ?? exampleResult(basis);
  await db.insert(runs).values({ id: runId, specimenId: order.specimenId, number, kind: 'pulse', state: 'recorded', methodId: order.methodId, performedById: workers.technicianId, performedAt: at, conditions: { temperature: 21, humidity: null, notes: '' }, instruments: { time: order.instrumentId }, record: { kind: 'pulse', frequency: null, timeResolution: 1e-8, zeroDeterminedAt: null, P: { readings: [], zero: null }, S: { readings: [], zero: null } }, createdAt: at });
  await db.insert(runFiles).values({ id: newId(), runId, position: 0, name: '=P.csv', purpose: 'waveform P', sha256: 'ab'.repeat(32), size: 1234, mediaType: 'text/csv', layout: { format: 'delimited', encoding: 'utf-8', delimiter: ',', decimal: '.', sheet: '', headingRow: 0, unitsRow: null, firstDataRow: 1, columns: [{ column: 0, heading: 't', channel: 'time', unit: 'µs', sign: 1 }] }, layoutOrigin: 'confirmed', confidence: 1, remarks: [], rowCount: 10 });
  await db.insert(fits).values({ id: fitId, runId, number: 1, state: 'done', progress: 1, settings: { kind: 'pulse', picker: 'AIC', arrivals: [] }, requestedById: workers.analystId, createdAt: at, startedAt: at, finishedAt: at, softwareVersion: '0.1.0', findingsWhenRefused: [] });
  await db.insert(adoptions).values({ id: newId(), runId, fitId, personId: workers.analystId, at });
  await db.insert(determinations).values({ id, specimenId: order.specimenId, basis, number: more.number ?? number, state: more.state ?? 'accepted', result, fitIds: [fitId], acknowledgements: [], composedById: workers.analystId, composedAt: at, submittedById: workers.analystId, submittedAt: at });
  await db.insert(reviews).values({ id: newId(), determinationId: id, decision: 'accept', reason: '', personId: workers.reviewerId, at });
  return id;
}
