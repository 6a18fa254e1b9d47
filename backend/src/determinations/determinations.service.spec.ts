import type { Determination } from '@strainwright/common/contract/determinations';
import type { Fit, Run } from '@strainwright/common/contract/run-answers';
import type { Method } from '@strainwright/common/contract/instruments';
import type { Problem } from '@strainwright/common/contract/wire';
import { eq } from 'drizzle-orm';
import { fits } from '../database/schema/runs';
import { elasticResultOf } from '../testing/finished-work';
import { NOW, testLaboratory, type TestLaboratory } from '../testing/laboratory';
import type { FitResult } from '@strainwright/common/contract/result';

jest.setTimeout(60_000);

let lab: TestLaboratory;
let methodId: string;

beforeAll(async () => {
  lab = await testLaboratory();
  const { body } = await lab.qualityManager.post('/api/methods', { code: 'P-1', name: 'Pulse', kind: 'pulse', standard: 'Own procedure', description: 'As written', cautions: 'Couplant is slippery' }).expect(201);
  methodId = (body as Method).id;
}, 60_000);
afterAll(() => lab.app.close());
beforeEach(() => lab.app.clock.set(NOW));

const quantity = { value: 1, standardUncertainty: 0.01, degreesOfFreedom: null, unit: 'm' };
const wave = { transitTime: quantity, zeroTime: quantity, velocity: quantity, readings: [] };

/** A result with E as wished and findings; the fits of these tests are not computed. */
function result(E: number, findings: FitResult['findings'] = []): FitResult {
  return { ...elasticResultOf(E), basis: 'dynamic', findings, detail: { kind: 'pulse', length: quantity, density: quantity, P: wave, S: wave, velocityRatio: 1.9, wavelength: null, picks: [] } };
}

async function recordedRun(specimenId: string): Promise<Run> {
  const record = { kind: 'pulse', frequency: 1e6, timeResolution: 1e-8, zeroDeterminedAt: NOW, P: { readings: [8e-6], zero: null }, S: { readings: [15e-6], zero: null } };
  const { body } = await lab.technician.post(`/api/specimens/${specimenId}/runs`).field('run', JSON.stringify({ methodId, performedAt: NOW, record })).expect(201);
  return body as Run;
}

/** A fit asked for by the analyst, ended with a result, and adopted. */
async function adoptedFit(runId: string, E = 70e9, findings: FitResult['findings'] = []): Promise<Fit> {
  const { body } = await lab.analyst.post(`/api/runs/${runId}/fits`, { settings: { kind: 'pulse' } }).expect(202);
  const { fit } = body as { fit: Fit };
  await lab.app.database.db.update(fits).set({ state: 'done', progress: 1, result: result(E, findings), finishedAt: new Date(NOW) }).where(eq(fits.id, fit.id));
  return (await lab.analyst.post(`/api/fits/${fit.id}/adopt`).expect(200)).body as Fit;
}

async function draft(findings: FitResult['findings'] = []): Promise<Determination> {
  const { id } = await lab.specimen();
  await adoptedFit((await recordedRun(id)).id, 70e9, findings);
  return (await lab.analyst.post(`/api/specimens/${id}/determinations`, { basis: 'dynamic' }).expect(201)).body as Determination;
}

const submitted = async () => (await lab.analyst.post(`/api/determinations/${(await draft()).id}/submit`, {}).expect(200)).body as Determination;
const finding = (severity: 'warn' | 'stop') => ({ code: 'DENSITY_OUTSIDE_CLASS', severity, subject: 'density', seen: '26 890 kg/m³', why: 'too heavy', action: 'weigh again' });

describe('DeterminationsService.compose', () => {
  it('needs an adopted fit of the basis', async () => {
    const { id } = await lab.specimen();
    const { body } = await lab.analyst.post(`/api/specimens/${id}/determinations`, { basis: 'static' }).expect(409);
    expect((body as Problem).code).toBe('determination.no-adopted-fit');
  });

  it('makes a draft with the adopted fit’s constants, and composes the same draft anew', async () => {
    const first = await draft();
    expect(first).toMatchObject({ state: 'draft', number: 1, basis: 'dynamic', composedBy: lab.analyst.name });
    expect(first.result.constants.E?.value).toBe(70e9);
    const again = (await lab.analyst.post(`/api/specimens/${first.specimenId}/determinations`, { basis: 'dynamic' }).expect(201)).body as Determination;
    expect(again).toMatchObject({ id: first.id, version: first.version + 1 });
  });

  it('leaves the fits of void runs out', async () => {
    const { id } = await lab.specimen();
    const run = await recordedRun(id);
    await adoptedFit(run.id);
    await lab.technician.post(`/api/runs/${run.id}/void`, { reason: 'Wrong transducer' }).expect(200);
    await lab.analyst.post(`/api/specimens/${id}/determinations`, { basis: 'dynamic' }).expect(409);
  });
});

describe('DeterminationsService.submit', () => {
  it('is blocked by a stop', async () => {
    const { id } = await draft([finding('stop')]);
    const { body } = await lab.analyst.post(`/api/determinations/${id}/submit`, {}).expect(409);
    expect((body as Problem).code).toBe('determination.stopped');
  });

  it('wants a reason for each warning, and keeps it', async () => {
    const { id } = await draft([finding('warn')]);
    const { body } = await lab.analyst.post(`/api/determinations/${id}/submit`, {}).expect(422);
    expect((body as Problem).errors?.[0]?.path).toBe('acknowledgements.DENSITY_OUTSIDE_CLASS.density');
    const acknowledgements = [{ code: 'DENSITY_OUTSIDE_CLASS', subject: 'density', reason: 'Tungsten, weighed twice' }];
    const done = (await lab.analyst.post(`/api/determinations/${id}/submit`, { acknowledgements }).expect(200)).body as Determination;
    expect(done).toMatchObject({ state: 'submitted', acknowledgements, submittedBy: lab.analyst.name });
  });

  it('is refused when another fit has been adopted since', async () => {
    const made = await draft();
    await adoptedFit((await recordedRun(made.specimenId)).id, 71e9);
    expect(((await lab.analyst.post(`/api/determinations/${made.id}/submit`, {}).expect(409)).body as Problem).code).toBe('determination.outdated');
  });

  it('is refused with a stale version, and twice', async () => {
    const made = await draft();
    expect(((await lab.analyst.post(`/api/determinations/${made.id}/submit`, { version: made.version + 5 }).expect(409)).body as Problem).code).toBe('version.stale');
    await lab.analyst.post(`/api/determinations/${made.id}/submit`, { version: made.version }).expect(200);
    expect(((await lab.analyst.post(`/api/determinations/${made.id}/submit`, {}).expect(409)).body as Problem).code).toBe('determination.wrong-state');
  });
});

describe('DeterminationsService.accept and return', () => {
  it('are not for who did the work, whatever their roles', async () => {
    const both = await lab.app.person(['analyst', 'reviewer']);
    const { id } = await draft();
    await both.post(`/api/determinations/${id}/submit`, {}).expect(200);
    for (const decision of [() => both.post(`/api/determinations/${id}/accept`, {}), () => both.post(`/api/determinations/${id}/return`, { reason: 'Not good enough' })]) {
      expect(((await decision().expect(409)).body as Problem).code).toBe('review.own-work');
    }
    await lab.reviewer.post(`/api/determinations/${id}/accept`, {}).expect(200);
  });

  it('keeps the reason of a return, and the determination can be composed again', async () => {
    const { id, specimenId } = await submitted();
    const returned = (await lab.reviewer.post(`/api/determinations/${id}/return`, { reason: 'The S arrival is a cycle late' }).expect(200)).body as Determination;
    expect(returned).toMatchObject({ state: 'returned', reviews: [{ decision: 'return', reason: 'The S arrival is a cycle late', personName: lab.reviewer.name }] });
    const again = (await lab.analyst.post(`/api/specimens/${specimenId}/determinations`, { basis: 'dynamic' }).expect(201)).body as Determination;
    expect(again).toMatchObject({ id, state: 'draft' });
  });

  it('supersedes the accepted one by the next accepted', async () => {
    const first = await submitted();
    await lab.reviewer.post(`/api/determinations/${first.id}/accept`, {}).expect(200);
    const second = (await lab.analyst.post(`/api/specimens/${first.specimenId}/determinations`, { basis: 'dynamic' }).expect(201)).body as Determination;
    expect(second.number).toBe(2);
    await lab.analyst.post(`/api/determinations/${second.id}/submit`, {}).expect(200);
    await lab.reviewer.post(`/api/determinations/${second.id}/accept`, {}).expect(200);
    expect(((await lab.analyst.get(`/api/determinations/${first.id}`).expect(200)).body as Determination).state).toBe('superseded');
  });
});

describe('an ended fit', () => {
  it('is written once: the database refuses any change', async () => {
    const { id } = await lab.specimen();
    const fit = await adoptedFit((await recordedRun(id)).id);
    await expect(lab.app.database.db.update(fits).set({ state: 'failed' }).where(eq(fits.id, fit.id))).rejects.toThrow();
    expect(((await lab.analyst.get(`/api/fits/${fit.id}`).expect(200)).body as Fit).state).toBe('done');
  });
});
