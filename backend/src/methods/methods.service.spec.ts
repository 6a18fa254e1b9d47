import type { Method } from '@strainwright/common/contract/instruments';
import type { Problem } from '@strainwright/common/contract/wire';
import { eq } from 'drizzle-orm';
import { methods } from '../database/schema/instruments';
import { newId } from '../platform/ids';
import { testLaboratory, type TestLaboratory } from '../testing/laboratory';

let lab: TestLaboratory;
beforeAll(async () => {
  lab = await testLaboratory();
}, 60_000);
afterAll(() => lab.app.close());

const version = { name: 'Pulse test', kind: 'pulse', standard: 'Laboratory procedure', description: 'As written', cautions: 'Couplant is slippery' };
const write = async (code: string) => (await lab.qualityManager.post('/api/methods', { code, ...version }).expect(201)).body as Method;
const revise = async (id: string, change: object = {}) => (await lab.qualityManager.post(`/api/methods/${id}/versions`, { ...version, ...change }).expect(201)).body as Method;

describe('MethodsService', () => {
  it('writes version 1, and each revision as a row of its own', async () => {
    const first = await write('P-1');
    expect(first).toMatchObject({ code: 'P-1', versionNumber: 1, current: true, createdBy: lab.qualityManager.name });
    const second = await revise(first.id, { description: 'Written anew' });
    expect(second).toMatchObject({ code: 'P-1', versionNumber: 2, current: true, description: 'Written anew' });
    expect((await lab.technician.get(`/api/methods/${first.id}`).expect(200)).body as Method).toMatchObject({ versionNumber: 1, current: false, description: 'As written' });
    expect((await revise(first.id)).versionNumber).toBe(3);
  });

  it('lists the current ones alone when asked', async () => {
    const { id } = await write('P-2');
    await revise(id);
    const list = async (query: string) => ((await lab.technician.get(`/api/methods?q=P-2&${query}`).expect(200)).body as { items: Method[] }).items.map((m) => [m.versionNumber, m.current]);
    expect(await list('sort=createdAt')).toEqual(expect.arrayContaining([[1, false], [2, true]]));
    expect(await list('state=current')).toEqual([[2, true]]);
    expect(await list('state=replaced')).toEqual([[1, false]]);
  });

  it('refuses a code that is taken, and another kind of run in a revision', async () => {
    const { id } = await write('P-3');
    const taken = await lab.qualityManager.post('/api/methods', { code: 'P-3', ...version }).expect(409);
    expect(taken.body as Problem).toMatchObject({ code: 'method.code-taken', errors: [{ path: 'code' }] });
    const other = await lab.qualityManager.post(`/api/methods/${id}/versions`, { ...version, kind: 'stress-strain' }).expect(422);
    expect((other.body as Problem).errors?.map((e) => e.path)).toEqual(['kind']);
  });

  it('gives revisions that come at the same time different numbers, or refuses the second', async () => {
    const { id } = await write('P-4');
    const answers = await Promise.all([1, 2].map(() => lab.qualityManager.post(`/api/methods/${id}/versions`, version)));
    const numbers = answers.filter((a) => a.status === 201).map((a) => (a.body as Method).versionNumber);
    expect(new Set(numbers).size).toBe(numbers.length);
    expect(answers.every((a) => a.status === 201 || a.status === 409)).toBe(true);
    expect(numbers.length).toBeGreaterThan(0);
  });

  it('never changes a version that was written', async () => {
    const { id } = await write('P-5');
    await expect(lab.app.database.db.update(methods).set({ name: 'Other' }).where(eq(methods.id, id))).rejects.toMatchObject({ cause: { message: expect.stringContaining('insert-only') } });
    await lab.qualityManager.patch(`/api/methods/${id}`, version).expect(404);
  });

  it('is changed by the quality manager alone, and not seen by customers', async () => {
    await lab.analyst.post('/api/methods', { code: 'P-6', ...version }).expect(403);
    await lab.customer.get('/api/methods').expect(403);
    await lab.technician.get(`/api/methods/${newId()}`).expect(404);
  });
});
