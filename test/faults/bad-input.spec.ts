/** Bad input of many kinds, at the door of the built program: each is refused clearly, at the right field, and nothing is half-saved. */
import { readFileSync } from 'node:fs';
import { deflateRawSync } from 'node:zlib';
import type { Order } from '@strainwright/common/contract/orders';
import type { Problem } from '@strainwright/common/contract/wire';
import { Client, form, type Answer } from '../services/client';
import { cylinderReadings, logSpecimen, pulseRun, setUpLaboratory, stressStrainRun, type Laboratory, type LoggedSpecimen } from '../services/laboratory';
import { removeFolder, startServer, type Server } from '../services/server';
import { zipBomb } from './zip-bomb';

jest.setTimeout(180_000);

let server: Server;
let lab: Laboratory;
let logged: LoggedSpecimen;

beforeAll(async () => {
  server = await startServer();
  lab = await setUpLaboratory(server.url);
  logged = await logSpecimen(lab);
});

afterAll(async () => {
  await server.stop();
  removeFolder(server.data);
});

interface Case {
  what: string;
  send: () => Promise<Answer>;
  status: number | number[];
  /** A field path that the answer must name; left out where no field is at fault. */
  field?: string;
}

const unknownId = '0190f3a0-0000-7000-8000-000000000000';
const readingsPath = () => `/api/specimens/${logged.specimenId}/readings`;
const reading = (change: Record<string, unknown>) => () =>
  lab.technician.raw('POST', readingsPath(), [{ quantity: 'length', station: 1, value: 50, unit: 'mm', instrumentId: lab.instruments.caliper, ...change }]);
const sample = (change: Record<string, unknown>) => () =>
  lab.technician.raw('POST', `/api/orders/${logged.orderId}/samples`, { material: 'steel', materialClass: 'metal', receivedOn: '2026-01-05', ...change });
const order = (change: Record<string, unknown>) => () =>
  lab.customer.raw('POST', '/api/orders', { title: 'T', materialDescription: 'M', constantsWanted: ['E'], kindsOfRun: ['pulse'], ...change });
const times = { P: [8.5e-6], S: [15.5e-6], zeroP: [0], zeroS: [0] };
const typedRun = (change: (run: ReturnType<typeof pulseRun>) => unknown) => () =>
  lab.technician.raw('POST', `/api/specimens/${logged.specimenId}/runs`, form({ name: 'run', json: change(pulseRun(lab, times)) }, []));
const fileRun = (name: string, bytes: Uint8Array | string) => () =>
  lab.technician.raw('POST', `/api/specimens/${logged.specimenId}/runs`, form({ name: 'run', json: stressStrainRun(lab, [{ purpose: 'record' }]) }, [{ name, bytes }]));

const readingCases: Case[] = [
  { what: 'an empty list of readings', send: () => lab.technician.raw('POST', readingsPath(), []), status: 422 },
  { what: 'readings that are no list', send: () => lab.technician.raw('POST', readingsPath(), { value: 1 }), status: 422 },
  { what: 'JSON cut short', send: () => lab.technician.raw('POST', readingsPath(), '[{"quantity":'), status: 400 },
  { what: 'a unit nobody knows', send: reading({ unit: 'furlong' }), status: 422, field: '0.unit' },
  { what: 'a mass unit for a length', send: reading({ unit: 'g' }), status: 422, field: '0.unit' },
  { what: 'a negative length', send: reading({ value: -50 }), status: 422, field: '0.value' },
  { what: 'a length of zero', send: reading({ value: 0 }), status: 422, field: '0.value' },
  { what: 'a mass of zero (density of zero)', send: () => reading({ quantity: 'mass', unit: 'g', value: 0, instrumentId: lab.instruments.balance })(), status: 422, field: '0.value' },
  { what: 'letters for a number', send: reading({ value: 'fifty' }), status: 422, field: '0.value' },
  { what: 'a null value (NaN on the wire)', send: reading({ value: null }), status: 422, field: '0.value' },
  { what: 'infinity', send: () => lab.technician.raw('POST', readingsPath(), `[{"quantity":"length","station":1,"value":1e999,"unit":"mm","instrumentId":"${lab.instruments.caliper}"}]`), status: 422, field: '0.value' },
  { what: 'an unknown instrument', send: reading({ instrumentId: unknownId }), status: 422, field: '0.instrumentId' },
  { what: 'an instrument id that is none', send: reading({ instrumentId: 'caliper' }), status: 422, field: '0.instrumentId' },
  { what: 'a balance for a length', send: () => reading({ instrumentId: lab.instruments.balance })(), status: 422, field: '0.instrumentId' },
  { what: 'a quantity nobody knows', send: reading({ quantity: 'girth' }), status: 422, field: '0.quantity' },
  { what: 'a diameter on station 0', send: reading({ quantity: 'diameter', station: 0 }), status: 422, field: '0.station' },
  { what: 'a station of 1.5', send: reading({ station: 1.5 }), status: 422, field: '0.station' },
  { what: 'a field nobody asked for', send: reading({ colour: 'blue' }), status: 422 },
  { what: 'one bad reading among good ones', send: () => lab.technician.raw('POST', readingsPath(), [...cylinderReadings(lab, { length: 50, diameter: 25, mass: 66 }), { quantity: 'length', station: 9, value: -1, unit: 'mm', instrumentId: lab.instruments.caliper }]), status: 422, field: '7.value' },
  { what: '501 readings at once', send: () => lab.technician.raw('POST', readingsPath(), Array.from({ length: 501 }, () => ({ quantity: 'length', station: 1, value: 50, unit: 'mm', instrumentId: lab.instruments.caliper }))), status: 422 },
  { what: 'a specimen that is not there', send: () => lab.technician.raw('POST', `/api/specimens/${unknownId}/readings`, cylinderReadings(lab, { length: 50, diameter: 25, mass: 66 })), status: 404 },
  { what: 'a specimen id that is none', send: () => lab.technician.raw('POST', '/api/specimens/7/readings', cylinderReadings(lab, { length: 50, diameter: 25, mass: 66 })), status: 404 },
];

const nounCases: Case[] = [
  { what: 'a mark of 10 000 characters', send: sample({ mark: 'M'.repeat(10_000) }), status: 422, field: 'mark' },
  { what: 'a mark with a line break', send: sample({ mark: 'A\nB' }), status: 422, field: 'mark' },
  { what: 'a day that is none', send: sample({ receivedOn: '2026-02-31' }), status: 422, field: 'receivedOn' },
  { what: 'a material class nobody knows', send: sample({ materialClass: 'cheese' }), status: 422, field: 'materialClass' },
  { what: 'an empty material', send: sample({ material: '   ' }), status: 422, field: 'material' },
  { what: 'a shape nobody knows', send: () => lab.technician.raw('POST', `/api/samples/${logged.sampleId}/specimens`, { shape: 'sphere' }), status: 422, field: 'shape' },
  { what: 'a thousand specimens at once', send: () => lab.technician.raw('POST', `/api/samples/${logged.sampleId}/specimens`, { shape: 'cube', count: 1000 }), status: 422, field: 'count' },
  { what: 'an order that wants no constant', send: order({ constantsWanted: [] }), status: 422, field: 'constantsWanted' },
  { what: 'a lower limit above the upper', send: order({ limits: [{ constant: 'E', lower: 2e9, upper: 1e9, rule: 'simple' }] }), status: 422, field: 'limits.0.upper' },
  { what: 'a limit that limits nothing', send: order({ limits: [{ constant: 'E', lower: null, upper: null, rule: 'simple' }] }), status: 422, field: 'limits.0.lower' },
  { what: 'an order on behalf of a customer that is not there', send: () => lab.qualityManager.raw('POST', '/api/orders', { customerId: unknownId, title: 'T', materialDescription: 'M', constantsWanted: ['E'], kindsOfRun: ['pulse'] }), status: 422, field: 'customerId' },
  { what: 'an order opened twice', send: () => lab.technician.raw('POST', `/api/orders/${logged.orderId}/open`, {}), status: 409 },
  { what: 'a stale version', send: () => lab.administrator.raw('PATCH', `/api/customers/${lab.customerId}`, { name: 'New name', version: 0 }), status: 409 },
  { what: 'a sort by a column that is none', send: () => lab.technician.raw('GET', '/api/specimens?sort=passwordHash'), status: 400, field: 'sort' },
  { what: 'a page of a million rows', send: () => lab.technician.raw('GET', '/api/specimens?pageSize=1000000'), status: 400, field: 'pageSize' },
  { what: 'a calibration due before it was made', send: () => lab.qualityManager.raw('POST', `/api/instruments/${lab.instruments.caliper}/calibrations`, { calibratedOn: '2026-05-01', dueOn: '2026-04-01', certificate: 'C', laboratory: 'L', relative: false, expandedUncertainty: 0.01, coverageFactor: 2, correction: 0 }), status: 422, field: 'dueOn' },
  { what: 'an e-mail address that is none', send: () => new Client(server.url).raw('POST', '/api/session', { email: 'nobody', password: 'x' }), status: 422, field: 'email' },
  { what: 'a short password', send: () => lab.administrator.raw('POST', '/api/people', { name: 'N', email: 'n@example.org', roles: ['analyst'], customerId: null, password: 'short' }), status: 422, field: 'password' },
  { what: 'a common password', send: () => lab.administrator.raw('POST', '/api/people', { name: 'N', email: 'n@example.org', roles: ['analyst'], customerId: null, password: 'passwordpassword' }), status: 422, field: 'password' },
];

const runCases: Case[] = [
  { what: 'a run by a method that is not there', send: typedRun((run) => ({ ...run, methodId: unknownId })), status: 422, field: 'methodId' },
  { what: 'a pulse run by a stress–strain method', send: typedRun((run) => ({ ...run, methodId: lab.methods.stressStrain })), status: 422, field: 'methodId' },
  { what: 'a transit time of zero', send: typedRun((run) => ({ ...run, record: { ...run.record, P: { ...run.record.P, readings: [0] } } })), status: 422, field: 'record.P.readings.0' },
  { what: 'transit times in µs sent as seconds', send: typedRun((run) => ({ ...run, record: { ...run.record, P: { ...run.record.P, readings: [8.5] } } })), status: 422, field: 'record.P.readings.0' },
  { what: 'a run without its JSON part', send: () => lab.technician.raw('POST', `/api/specimens/${logged.specimenId}/runs`, new FormData()), status: 400 },
  { what: 'a run whose JSON part is broken', send: () => { const data = new FormData(); data.set('run', '{'); return lab.technician.raw('POST', `/api/specimens/${logged.specimenId}/runs`, data); }, status: 400 },
  { what: 'a purpose named for a file that did not come', send: () => lab.technician.raw('POST', `/api/specimens/${logged.specimenId}/runs`, form({ name: 'run', json: stressStrainRun(lab, [{ purpose: 'record' }]) }, [])), status: 422 },
  { what: 'an empty file', send: fileRun('empty.csv', ''), status: 422, field: 'files.0' },
  { what: 'a picture', send: fileRun('photo.csv', new Uint8Array([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13, 0, 1, 2, 3, 0xff, 0xfe])), status: 422, field: 'files.0' },
  { what: 'a file of one column', send: fileRun('one.csv', `strain\n${Array.from({ length: 50 }, (_, i) => i).join('\n')}\n`), status: 422, field: 'files.0' },
  { what: 'a file whose numbers are all NaN', send: fileRun('nan.csv', `time (s),force (kN),strain (%)\n${'NaN,NaN,NaN\n'.repeat(50)}`), status: 422, field: 'files.0' },
  { what: 'a file of letters where numbers belong', send: fileRun('letters.csv', `time (s),force (kN),strain (%)\n${'1.O,2l.5,O.3\n'.repeat(50)}`), status: 422, field: 'files.0' },
  { what: 'a file of headings only', send: fileRun('headings.csv', 'time,force,strain\ns,kN,%\n'), status: 422, field: 'files.0' },
  { what: 'a file with thousands separators', send: fileRun('thousands.csv', `Load (N);Strain (%)\n${Array.from({ length: 50 }, (_, i) => `${i};${i}.5`).join('\n')}\n1,234.5;51.5\n`), status: 422, field: 'files.0' },
  { what: 'a file whose commas part columns and decimals', send: fileRun('commas.csv', `Time (s),Load (kN),Strain (%)\n${Array.from({ length: 50 }, (_, i) => `${i},5,${i},25,0,${i}`).join('\n')}\n`), status: 422, field: 'files.0' },
  { what: 'prose', send: fileRun('letter.txt', 'Dear laboratory,\nplease find no data here.\n'), status: 422, field: 'files.0' },
  { what: 'a zip bomb called XLSX', send: fileRun('bomb.xlsx', zipBomb(deflateRawSync)), status: [413, 422], field: 'files.0' },
  { what: 'a broken workbook', send: fileRun('broken.xlsx', new Uint8Array([0x50, 0x4b, 3, 4, 1, 2, 3, 4, 5, 6, 7, 8, 9])), status: 422, field: 'files.0' },
  { what: 'settings of the other kind', send: async () => {
    const run = await lab.technician.upload<{ id: string }>(`/api/specimens/${logged.specimenId}/runs`, { name: 'run', json: pulseRun(lab, times) }, []);
    return lab.analyst.raw('POST', `/api/runs/${run.id}/fits`, { settings: { kind: 'stress-strain', region: { by: 'automatic' } } });
  }, status: 422, field: 'settings.kind' },
  { what: 'a fit of a run that is not there', send: () => lab.analyst.raw('POST', `/api/runs/${unknownId}/fits`, { settings: { kind: 'pulse' } }), status: 404 },
];

describe('bad input', () => {
  const cases = [...readingCases, ...nounCases, ...runCases];

  it('comes in at least 40 kinds', () => {
    expect(cases.length).toBeGreaterThanOrEqual(40);
  });

  it.each(cases)('$what is refused clearly', async ({ send, status, field }) => {
    const answer = await send();
    expect([status].flat()).toContain(answer.status);
    // The status says that this is a problem document; its fields are what is checked.
    const problem = answer.body as Problem;
    expect(problem.code).toMatch(/^[a-z0-9]+([.-][a-z0-9]+)*$/);
    expect(problem.detail.length).toBeGreaterThan(5);
    expect(problem.detail).not.toMatch(/select |insert |at .*\.ts|ECONN|undefined/i);
    if (field !== undefined) expect(problem.errors?.map((e) => e.path)).toContain(field);
  });

  it('leaves nothing half-saved, and the program goes on', async () => {
    const before = await lab.technician.get<{ readings: unknown[] }>(`/api/specimens/${logged.specimenId}`);
    expect(before.readings).toHaveLength(0);
    expect((await lab.technician.get<Order>(`/api/orders/${logged.orderId}`)).specimens).toHaveLength(1);
    expect((await lab.reviewer.get<{ intact: boolean }>('/api/record/verify')).intact).toBe(true);
    expect((await new Client(server.url).raw('GET', '/api/health')).status).toBe(200);
  });

  it('keeps a formula in a customer’s name as text', async () => {
    const name = '=HYPERLINK("https://elsewhere.example";"Open")';
    const { id } = await lab.administrator.post<{ id: string }>('/api/customers', { name, address: '1 Row', contactEmail: 'a@row.example' });
    expect((await lab.administrator.get<{ name: string }>(`/api/customers/${id}`)).name).toBe(name);
  });

  it('keeps a script in a mark as text', async () => {
    const mark = '<script>alert(1)</script>';
    const { items } = await lab.technician.post<{ items: { mark: string }[] }>(`/api/samples/${logged.sampleId}/specimens`, { shape: 'cube', mark });
    expect(items[0]?.mark).toBe(mark);
  });

  it('stores a double submit once', async () => {
    const body = cylinderReadings(lab, { length: 50, diameter: 25, mass: 66 });
    const key = { 'idempotency-key': 'one-click-twice' };
    const path = readingsPath();
    const [first, second] = await Promise.all([lab.technician.raw('POST', path, body, key), lab.technician.raw('POST', path, body, key)]);
    expect([first.status, second.status].every((s) => s === 201 || s === 200 || s === 409)).toBe(true);
    const { readings } = await lab.technician.get<{ readings: unknown[] }>(`/api/specimens/${logged.specimenId}`);
    expect(readings).toHaveLength(body.length);
  });

  it('refuses a second correction of the same reading', async () => {
    const { readings } = await lab.technician.get<{ readings: { id: string; quantity: string }[] }>(`/api/specimens/${logged.specimenId}`);
    const target = readings.find((r) => r.quantity === 'length');
    const correction = { value: 50.02, unit: 'mm', instrumentId: lab.instruments.caliper, reason: 'Read the wrong end of the scale' };
    expect((await lab.technician.raw('POST', `/api/readings/${target?.id}/correct`, correction)).status).toBeLessThan(300);
    expect((await lab.technician.raw('POST', `/api/readings/${target?.id}/correct`, correction)).status).toBe(409);
  });

  it('refuses a file above 200 MB without reading it into memory', async () => {
    const size = 1_000_000_000;
    let sent = 0;
    const chunk = new Uint8Array(1 << 20).fill(49);
    const head = new TextEncoder().encode(`--edge\r\nContent-Disposition: form-data; name="run"\r\n\r\n${JSON.stringify(stressStrainRun(lab, [{ purpose: 'record' }]))}\r\n--edge\r\nContent-Disposition: form-data; name="files"; filename="huge.csv"\r\n\r\n`);
    const stream = new ReadableStream<Uint8Array>({
      start: (controller) => controller.enqueue(head),
      pull: (controller) => {
        if (sent >= size) return controller.close();
        sent += chunk.length;
        controller.enqueue(chunk);
      },
    });
    const init: RequestInit & { duplex: 'half' } = {
      method: 'POST', body: stream, duplex: 'half', headers: { authorization: `Bearer ${lab.technician.token}`, 'content-type': 'multipart/form-data; boundary=edge' },
    };
    const answer = await fetch(`${server.url}/api/specimens/${logged.specimenId}/runs`, init).then((r) => r.status, () => 'closed');
    expect([413, 'closed']).toContain(answer);
    const peak = Number(/^VmHWM:\s+(\d+) kB/m.exec(readFileSync(`/proc/${server.process.pid}/status`, 'utf8'))?.[1]) / 1024;
    expect(peak).toBeLessThan(900);
    expect((await new Client(server.url).raw('GET', '/api/health')).status).toBe(200);
  });
});
