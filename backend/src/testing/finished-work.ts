import type { ConstantResult, ElasticResult } from '@strainwright/common/contract/result';
import type { CertificateState, DeterminationState } from '@strainwright/common/contract/states';
import { certificates } from '../database/schema/certificates';
import { determinations } from '../database/schema/determinations';
import { methods } from '../database/schema/instruments';
import { adoptions, fits, runs } from '../database/schema/runs';
import { newId } from '../platform/ids';
import { NOW, type TestLaboratory } from './laboratory';

const at = new Date(NOW);

/** 70 GPa ± 1 GPa and ν = 0.33 ± 0.01, as a determination carries them. */
export function elasticResultOf(E = 70e9): ElasticResult {
  const constant = (value: number, expandedUncertainty: number, unit: 'Pa' | '1'): ConstantResult => ({
    value, standardUncertainty: expandedUncertainty / 2, expandedUncertainty, coverageFactor: 2, degreesOfFreedom: null,
    interval: { low: value - expandedUncertainty, high: value + expandedUncertainty }, unit, origin: 'measured',
  });
  return {
    basis: 'dynamic', constants: { E: constant(E, 1e9, 'Pa'), nu: constant(0.33, 0.01, '1'), G: null, K: null }, correlation: [], budget: [],
    monteCarlo: { trials: 1, seed: 1, agrees: true, comparison: { E: null, nu: null, G: null, K: null } }, findings: [],
  };
}

/** Rows of work that other features make: what these tests need of them, written straight into the database. */
export function finishedWork(lab: TestLaboratory) {
  const { db } = lab.app.database;
  return {
    async run(specimenId: string, number = 1): Promise<string> {
      const [id, methodId] = [newId(), newId()];
      await db.insert(methods).values({ id: methodId, code: `M-${methodId}`, versionNumber: 1, name: 'Pulse test', kind: 'pulse', standard: 'As written', description: '', cautions: '', createdById: lab.qualityManager.id, createdAt: at });
      await db.insert(runs).values({
        id, specimenId, number, kind: 'pulse', state: 'recorded', methodId, performedById: lab.technician.id, performedAt: at, conditions: { temperature: null, humidity: null, notes: '' }, instruments: {},
        record: { kind: 'pulse', frequency: null, timeResolution: 0, zeroDeterminedAt: null, P: { readings: [8e-6], zero: null }, S: { readings: [15e-6], zero: null } }, createdAt: at,
      });
      return id;
    },
    async fit(runId: string, number = 1, state: 'done' | 'queued' = 'done'): Promise<string> {
      const id = newId();
      await db.insert(fits).values({ id, runId, number, state, settings: { kind: 'pulse', arrivals: [], picker: 'AIC' }, requestedById: lab.analyst.id, createdAt: at, finishedAt: state === 'done' ? at : null, softwareVersion: 'test' });
      return id;
    },
    async adopt(runId: string, fitId: string, personId = lab.analyst.id): Promise<void> {
      await db.insert(adoptions).values({ id: newId(), runId, fitId, personId, at });
    },
    async determination(specimenId: string, state: DeterminationState, change: Partial<typeof determinations.$inferInsert> = {}): Promise<string> {
      const id = newId();
      await db.insert(determinations).values({
        id, specimenId, basis: 'dynamic', number: 1, state, result: elasticResultOf(), fitIds: [], acknowledgements: [], composedById: lab.analyst.id, composedAt: at,
        submittedById: state === 'draft' ? null : lab.analyst.id, submittedAt: state === 'draft' ? null : at, ...change,
      });
      return id;
    },
    async certificate(orderId: string, number: string, state: CertificateState, determinationIds: string[], change: Partial<typeof certificates.$inferInsert> = {}): Promise<string> {
      const id = newId();
      await db.insert(certificates).values({ id, number, issue: 1, orderId, state, determinationIds, draftedById: lab.qualityManager.id, draftedAt: at, releasedAt: state === 'draft' ? null : at, ...change });
      return id;
    },
  };
}
