import { worklist } from '@strainwright/common/contract/worklist';
import { finishedWork } from '../testing/finished-work';
import { testLaboratory, type TestLaboratory } from '../testing/laboratory';
import type { TestPerson } from '../testing/app';

let lab: TestLaboratory;
let work: ReturnType<typeof finishedWork>;
beforeAll(async () => {
  lab = await testLaboratory();
  work = finishedWork(lab);
}, 60_000);
afterAll(() => lab.app.close());

/** Items of a kind that wait for a person, as the contract has them. */
async function waiting(person: TestPerson, kind: string) {
  const { items } = worklist.parse((await person.get('/api/worklist').expect(200)).body);
  return items.filter((item) => item.kind === kind);
}
const ids = async (person: TestPerson, kind: string) => (await waiting(person, kind)).map((item) => item.id);

describe('WorklistService for the technician', () => {
  it('has requested orders, the most urgent first', async () => {
    const later = await lab.order('requested', { dueOn: '2025-09-01' });
    const sooner = await lab.order('requested', { dueOn: '2025-07-01' });
    const whenever = await lab.order('requested');
    expect(await ids(lab.technician, 'order to open')).toEqual([sooner.id, later.id, whenever.id]);
    expect(await ids(lab.qualityManager, 'order to open')).toHaveLength(3);
    expect(await ids(lab.analyst, 'order to open')).toEqual([]);
    await lab.technician.post(`/api/orders/${sooner.id}/open`).expect(200);
    expect(await ids(lab.technician, 'order to open')).not.toContain(sooner.id);
  });

  it('has specimens from the missing readings to the missing run', async () => {
    const { id } = await lab.specimen();
    const [length] = lab.cylinderReadings();
    await lab.technician.post(`/api/specimens/${id}/readings`, [length ?? {}]).expect(201);
    expect((await waiting(lab.technician, 'specimen missing readings')).find((item) => item.id === id)).toMatchObject({ detail: 'Missing diameter, mass', path: `/specimens/${id}` });
    expect(await ids(lab.technician, 'run to make')).not.toContain(id);
    await lab.technician.post(`/api/specimens/${id}/readings`, lab.cylinderReadings().slice(1)).expect(201);
    expect(await ids(lab.technician, 'specimen missing readings')).not.toContain(id);
    expect((await waiting(lab.technician, 'run to make')).find((item) => item.id === id)).toMatchObject({ detail: 'pulse run' });
    await work.run(id);
    expect(await ids(lab.technician, 'run to make')).not.toContain(id);
  });

  it('asks nothing of cancelled orders', async () => {
    const { id, orderId } = await lab.specimen();
    expect(await ids(lab.technician, 'specimen missing readings')).toContain(id);
    await lab.qualityManager.post(`/api/orders/${orderId}/cancel`, { reason: 'The customer withdrew' }).expect(200);
    expect(await ids(lab.technician, 'specimen missing readings')).not.toContain(id);
  });
});

describe('WorklistService for the analyst', () => {
  it('has the last fit of a run until one is adopted', async () => {
    const { id } = await lab.specimen();
    const runId = await work.run(id);
    const first = await work.fit(runId, 1);
    expect(await ids(lab.analyst, 'fit to look at')).toContain(first);
    const second = await work.fit(runId, 2, 'queued');
    expect(await ids(lab.analyst, 'fit to look at')).not.toEqual(expect.arrayContaining([first]));
    expect(await ids(lab.analyst, 'fit to look at')).not.toContain(second);
    const third = await work.fit(runId, 3);
    expect(await waiting(lab.analyst, 'fit to look at')).toContainEqual(expect.objectContaining({ id: third, path: `/runs/${runId}` }));
    await work.adopt(runId, third);
    expect(await ids(lab.analyst, 'fit to look at')).not.toContain(third);
  });

  it('has drafts to submit and returned ones until they are composed anew', async () => {
    const { id } = await lab.specimen();
    const returned = await work.determination(id, 'returned');
    expect(await ids(lab.analyst, 'determination returned')).toContain(returned);
    const draft = await work.determination(id, 'draft', { number: 2 });
    expect(await ids(lab.analyst, 'determination returned')).not.toContain(returned);
    expect(await ids(lab.analyst, 'determination to submit')).toContain(draft);
    expect(await ids(lab.reviewer, 'determination to submit')).toEqual([]);
  });
});

describe('WorklistService for the reviewer', () => {
  it('has submitted determinations, but none that they worked on themselves', async () => {
    const { id } = await lab.specimen();
    const runId = await work.run(id);
    const fitId = await work.fit(runId);
    const both = await lab.app.person(['analyst', 'reviewer']);
    const adopter = await lab.app.person(['analyst', 'reviewer']);
    await work.adopt(runId, fitId, adopter.id);
    const submitted = await work.determination(id, 'submitted', { submittedById: both.id, fitIds: [fitId] });
    expect(await waiting(lab.reviewer, 'determination to review')).toContainEqual(expect.objectContaining({ id: submitted, path: `/reviews/${submitted}` }));
    expect(await ids(lab.qualityManager, 'determination to review')).toContain(submitted);
    expect(await ids(both, 'determination to review')).not.toContain(submitted);
    expect(await ids(adopter, 'determination to review')).not.toContain(submitted);
  });
});

describe('WorklistService for the quality manager', () => {
  it('has orders with accepted work that stands on no certificate, then the draft', async () => {
    const { id, orderId } = await lab.specimen();
    const determinationId = await work.determination(id, 'accepted');
    expect((await waiting(lab.qualityManager, 'certificate to draft')).find((item) => item.id === orderId)).toMatchObject({ detail: '1 accepted determination not certified' });
    const draft = await work.certificate(orderId, 'C-2025-0500', 'draft', [determinationId]);
    expect(await ids(lab.qualityManager, 'certificate to draft')).not.toContain(orderId);
    expect(await ids(lab.qualityManager, 'certificate to release')).toContain(draft);
  });

  it('has calibrations that lapse within the month or have, of instruments in service', async () => {
    const spec = { unit: 'mm', resolution: 0.01, expandedUncertainty: 0.02 };
    const lapsed = await lab.instrument('Lapsed', 'caliper', { ...spec, dueOn: '2025-05-01' });
    const soon = await lab.instrument('Soon', 'caliper', { ...spec, dueOn: '2025-06-20' });
    const retired = await lab.instrument('Retired', 'caliper', { ...spec, dueOn: '2025-04-01' });
    await lab.qualityManager.patch(`/api/instruments/${retired}`, { name: 'Retired', location: '', inService: false, version: 1 }).expect(200);
    expect((await waiting(lab.qualityManager, 'calibration about to lapse')).map((item) => [item.id, item.detail])).toEqual([[lapsed, 'Lapsed: was due on 2025-05-01'], [soon, 'Due on 2025-06-20']]);
  });

  it('has reference pieces whose last check was out of limits', async () => {
    const pulseUnit = await lab.instrument('Pulse unit 1', 'pulse unit', { unit: 'µs', resolution: 0.01, expandedUncertainty: 0.02 });
    const piece = { name: 'Bar A', quantity: 'transit time P', knownValue: 8.5, knownExpandedUncertainty: 0.03, unit: 'µs', instrumentId: pulseUnit };
    const { id } = (await lab.qualityManager.post('/api/reference-pieces', piece).expect(201)).body as { id: string };
    const check = (value: number, day: string) => lab.qualityManager.post(`/api/reference-pieces/${id}/checks`, { value, unit: 'µs', expandedUncertainty: 0.04, checkedAt: `${day}T09:00:00.000Z` }).expect(201);
    await check(8.6, '2025-05-01');
    expect(await waiting(lab.qualityManager, 'check out of limits')).toEqual([expect.objectContaining({ id, detail: 'E_n = 2.00, limit 1' })]);
    await check(8.5, '2025-05-02');
    expect(await waiting(lab.qualityManager, 'check out of limits')).toEqual([]);
  });

  it('is the laboratory’s alone', async () => {
    await lab.customer.get('/api/worklist').expect(403);
    await lab.administrator.get('/api/worklist').expect(403);
  });
});
