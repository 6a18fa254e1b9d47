import type { Found } from '@strainwright/common/contract/wire';
import { finishedWork } from '../testing/finished-work';
import { testLaboratory, type TestLaboratory } from '../testing/laboratory';

let lab: TestLaboratory;
beforeAll(async () => {
  lab = await testLaboratory();
}, 60_000);
afterAll(() => lab.app.close());

const find = async (q: string, by = lab.technician) => ((await by.get(`/api/find?q=${encodeURIComponent(q)}`).expect(200)).body as { items: Found[] }).items;

describe('FindService.find', () => {
  it('finds by number, title, mark, certificate and instrument', async () => {
    const { id, orderId, orderNumber } = await lab.specimen({ mark: 'Q7-X' });
    const certificateId = await finishedWork(lab).certificate(orderId, 'C-2025-0777', 'released', []);
    expect(await find(orderNumber)).toContainEqual({ kind: 'order', label: `${orderNumber} Elastic constants of rods`, path: `/orders/${orderId}` });
    expect(await find('q7-x')).toEqual([{ kind: 'specimen', label: `Q7-X aluminium alloy, order ${orderNumber}`, path: `/specimens/${id}` }]);
    expect(await find('c-2025-0777')).toEqual([{ kind: 'certificate', label: 'C-2025-0777 issue 1, released', path: `/certificates/${certificateId}` }]);
    expect(await find('Caliper 1')).toEqual([{ kind: 'instrument', label: 'Caliper 1 (SN Caliper 1)', path: `/instruments/${lab.caliper}` }]);
    expect((await find('S1')).some((f) => f.kind === 'sample')).toBe(true);
  });

  it('shows what is meant exactly first, and takes wildcards literally', async () => {
    for (const mark of ['K-10', 'K-1', 'K-100']) await lab.specimen({ mark });
    expect((await find('k-1'))[0]?.label).toMatch(/^K-1 /);
    expect(await find('%')).toEqual([]);
    expect(await find('  ')).toEqual([]);
  });

  it('finds a customer their own orders and released certificates, and nothing else', async () => {
    const { orderId, orderNumber } = await lab.specimen({ mark: 'R9-Y' });
    const work = finishedWork(lab);
    await work.certificate(orderId, 'C-2025-0801', 'draft', []);
    await work.certificate(orderId, 'C-2025-0802', 'released', []);
    expect(await find(orderNumber, lab.customer)).toEqual([expect.objectContaining({ kind: 'order', path: `/my-orders/${orderId}` })]);
    expect((await find('C-2025-08', lab.customer)).map((f) => f.label)).toEqual(['C-2025-0802 issue 1, released']);
    for (const q of ['R9-Y', 'Caliper', 'S1']) expect(await find(q, lab.customer)).toEqual([]);
    expect(await find(orderNumber, lab.otherCustomer)).toEqual([]);
    expect(await find('C-2025-08', lab.otherCustomer)).toEqual([]);
  });

  it('needs a question', async () => {
    await lab.technician.get('/api/find').expect(400);
    await lab.administrator.get('/api/find?q=a').expect(403);
  });
});
