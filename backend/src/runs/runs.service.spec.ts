import type { Method } from '@strainwright/common/contract/instruments';
import type { Run, RunChannels } from '@strainwright/common/contract/run-answers';
import type { LayoutProposal } from '@strainwright/common/contract/runs';
import type { Problem } from '@strainwright/common/contract/wire';
import { NOW, testLaboratory, type TestLaboratory } from '../testing/laboratory';

jest.setTimeout(60_000);

let lab: TestLaboratory;
let methodId: string;
let specimenId: string;
let frame: string;

beforeAll(async () => {
  lab = await testLaboratory();
  const { body } = await lab.qualityManager.post('/api/methods', { code: 'S-1', name: 'Tension', kind: 'stress-strain', standard: 'Own procedure', description: 'As written', cautions: 'Stand clear' }).expect(201);
  methodId = (body as Method).id;
  specimenId = (await lab.specimen()).id;
  frame = await lab.instrument('Frame 1', 'test frame', { unit: 'kN', resolution: 0.001, expandedUncertainty: 0.005, relative: true });
}, 60_000);
afterAll(() => lab.app.close());
beforeEach(() => lab.app.clock.set(NOW));

const rows = Array.from({ length: 60 }, (_, i) => `${i},${(i * 0.35).toFixed(3)},${i * 10},${(-i * 3.3).toFixed(1)}`);
const text = (headings = 'Time (s),Load (kN),Axial strain (µε),Transverse strain (µε)') => Buffer.from([headings, ...rows].join('\n'));
const body = (change: object = {}) => JSON.stringify({ methodId, performedAt: NOW, instruments: { frame }, record: { kind: 'stress-strain', axialGaugeLength: null, transverseGaugeLength: null, compressive: false }, files: [{ purpose: 'record' }], ...change });
const record = (file: Buffer, key?: string) => {
  const request = lab.technician.post(`/api/specimens/${specimenId}/runs`).field('run', body()).attach('files', file, 'record.csv');
  return key === undefined ? request : request.set('idempotency-key', key);
};

describe('RunsService.recordRun', () => {
  it('keeps the raw file as it came, by SHA-256, with a layout proposed', async () => {
    const run = (await record(text()).expect(201)).body as Run;
    const [file] = run.files;
    expect(file).toMatchObject({ name: 'record.csv', size: text().length, layoutOrigin: 'proposed', rowCount: 60 });
    expect(file?.layout.columns.map((c) => c.channel)).toEqual(['time', 'force', 'axial1', 'transverse1']);
    const raw = await lab.technician.get(`/api/runs/${run.id}/files/${file?.id}/content`).buffer(true).parse((response, done) => {
      const chunks: Buffer[] = [];
      response.on('data', (chunk: Buffer) => chunks.push(chunk));
      response.on('end', () => done(null, Buffer.concat(chunks)));
    }).expect(200);
    expect(raw.headers['content-disposition']).toMatch(/^attachment/);
    expect(Buffer.compare(raw.body as Buffer, text())).toBe(0);
  });

  it('records once what is sent twice under one key', async () => {
    lab.app.clock.set('2025-06-02T09:05:00.000Z');
    const [first, second] = [(await record(text(), 'key-1').expect(201)).body as Run, (await record(text(), 'key-1').expect(201)).body as Run];
    expect(second.id).toBe(first.id);
  });

  it('refuses a file that is no table at its place, and keeps nothing', async () => {
    const before = (await lab.technician.get(`/api/specimens/${specimenId}`).expect(200)).body as { runs: unknown[] };
    const { errors, code } = (await record(Buffer.from('nothing here')).expect(422)).body as Problem;
    expect(code).toBe('no-numbers');
    expect(errors?.[0]?.path).toBe('files.0');
    expect(((await lab.technician.get(`/api/specimens/${specimenId}`).expect(200)).body as { runs: unknown[] }).runs).toHaveLength(before.runs.length);
  });
});

describe('RunsService.confirmLayout', () => {
  it('remembers the confirmed layout for the instrument that wrote the file', async () => {
    const odd = 'A,B,C,D';
    const first = (await record(text(odd)).expect(201)).body as Run;
    const file = first.files[0];
    const proposal = (await lab.technician.get(`/api/runs/${first.id}/files/${file?.id}/preview`).expect(200)).body as LayoutProposal;
    expect(proposal.firstRows[0]).toEqual(['A', 'B', 'C', 'D']);
    const channels = [['time', 's'], ['force', 'kN'], ['axial1', 'µε'], ['transverse1', 'µε']];
    const layout = { ...proposal.layout, columns: proposal.layout.columns.map((c, i) => ({ ...c, channel: channels[i]?.[0], unit: channels[i]?.[1], sign: 1 })) };
    const confirmed = (await lab.technician.post(`/api/runs/${first.id}/files/${file?.id}/layout`, { layout }).expect(200)).body as Run;
    expect(confirmed.files[0]).toMatchObject({ layoutOrigin: 'confirmed', confirmedBy: lab.technician.name });
    const second = (await record(text(odd)).expect(201)).body as Run;
    expect(second.files[0]).toMatchObject({ layoutOrigin: 'remembered' });
    expect(second.files[0]?.layout.columns.map((c) => c.channel)).toEqual(channels.map(([channel]) => channel));
  });

  it('refuses a layout that the file cannot be read with', async () => {
    const run = (await record(text()).expect(201)).body as Run;
    const file = run.files[0];
    const layout = { ...file?.layout, columns: [{ column: 9, heading: 'none', channel: 'force', unit: 'kN', sign: 1 }] };
    expect(((await lab.technician.post(`/api/runs/${run.id}/files/${file?.id}/layout`, { layout }).expect(422)).body as Problem).errors?.[0]?.path).toBe('layout');
  });
});

describe('RunsService channels and void', () => {
  it('draws the channels in SI', async () => {
    const run = (await record(text()).expect(201)).body as Run;
    const { files } = (await lab.technician.get(`/api/runs/${run.id}/channels?points=100`).expect(200)).body as RunChannels;
    const force = files[0]?.series.find((s) => s.channel === 'force');
    expect(force).toMatchObject({ unit: 'N' });
    expect(force?.values.at(-1)).toBeCloseTo(59 * 350, 6);
  });

  it('voids a run with a reason, once', async () => {
    const run = (await record(text()).expect(201)).body as Run;
    expect((await lab.technician.post(`/api/runs/${run.id}/void`, { reason: 'Grips slipped' }).expect(200)).body as Run).toMatchObject({ state: 'void', voidReason: 'Grips slipped' });
    await lab.technician.post(`/api/runs/${run.id}/void`, { reason: 'Grips slipped' }).expect(409);
    expect(((await lab.analyst.post(`/api/runs/${run.id}/fits`, { settings: { kind: 'stress-strain' } }).expect(409)).body as Problem).code).toBe('run.wrong-state');
  });
});
