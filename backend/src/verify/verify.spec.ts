import { generateKeyPairSync } from 'node:crypto';
import { certificate, verification, type Certificate, type CertificateDocument, type Verification } from '@strainwright/common/contract/certificates';
import { signSnapshot } from '../certificates/rendering/signing';
import { acceptedOrder, type AcceptedOrder } from '../certificates/testing/accepted-order';
import { RedisConnections } from '../platform/redis';
import { testApp, type TestApp, type TestPerson } from '../testing/app';
import { CHECKS_PER_WINDOW } from './verify-limit.guard';

let app: TestApp;
let quality: TestPerson;
let order: AcceptedOrder;
let current: Certificate;
let superseded: Certificate;
let second: Certificate;
let withdrawn: Certificate;
const files = new Map<string, Buffer>();

async function release(id: string): Promise<Certificate> {
  return certificate.parse((await quality.post(`/api/certificates/${id}/release`, { password: quality.password }).expect(200)).body);
}
async function draft(ids: string[]): Promise<string> {
  return certificate.parse((await quality.post(`/api/orders/${order.orderId}/certificates`, { determinationIds: ids }).expect(201)).body).id;
}
async function fetchFile(id: string, format: string): Promise<Buffer> {
  const answer = await quality.get(`/api/certificates/${id}/certificate.${format}`).responseType('blob').expect(200);
  return answer.body as Buffer;
}

beforeAll(async () => {
  app = await testApp();
  app.clock.set('2026-03-10T09:00:00Z');
  quality = await app.person('quality manager');
  const others = { technicianId: (await app.person('technician')).id, analystId: (await app.person('analyst')).id, reviewerId: (await app.person('reviewer')).id };
  order = await acceptedOrder(app, others);
  current = await release(await draft([await order.determine('static')]));
  superseded = await release(await draft([await order.determine('dynamic')]));
  second = await release(certificate.parse((await quality.post(`/api/certificates/${superseded.id}/amend`, { reason: 'A better reason' })).body).id);
  withdrawn = await release(await draft([await order.determine('dynamic', { number: 9 })]));
  await quality.post(`/api/certificates/${withdrawn.id}/withdraw`, { reason: 'The specimens were mixed up' }).expect(200);
  for (const format of ['pdf', 'xlsx', 'json']) files.set(format, await fetchFile(current.id, format));
}, 120_000);
afterAll(() => app.close());
beforeEach(async () => {
  await app.nest.get<RedisConnections>(RedisConnections, { strict: false }).commands.flushall();
});

async function ask(path: string): Promise<Verification> {
  return verification.parse((await app.nobody.get(`/api/verify/${path}`).expect(200)).body);
}
async function handIn(file: Buffer, name = 'certificate.pdf'): Promise<Verification> {
  return verification.parse((await app.nobody.post('/api/verify').attach('file', file, name).expect(200)).body);
}
const fileOf = (format: string): Buffer => files.get(format) ?? Buffer.alloc(0);

describe('by number and code', () => {
  it('says genuine and current', async () => {
    expect(await ask(`${current.number}?code=${current.code}`)).toMatchObject({ verdict: 'genuine and current', number: current.number, issue: 1, sha256: current.sha256, replacedBy: null, withdrawal: null });
  });

  it('reads the code as people type it', async () => {
    const typed = (current.code ?? '').toLowerCase().replace(/-/g, ' ').replace(/0/g, 'o');
    expect((await ask(`${current.number.toLowerCase()}?code=${encodeURIComponent(typed)}`)).verdict).toBe('genuine and current');
  });

  it('says superseded, and by what', async () => {
    expect(await ask(`${superseded.number}?code=${superseded.code}`)).toMatchObject({ verdict: 'genuine but superseded', issue: 1, replacedBy: { number: superseded.number, issue: 2, releasedAt: second.releasedAt } });
    expect(await ask(`${second.number}?code=${second.code}`)).toMatchObject({ verdict: 'genuine and current', issue: 2 });
  });

  it('says withdrawn, and why', async () => {
    expect(await ask(`${withdrawn.number}?code=${withdrawn.code}`)).toMatchObject({ verdict: 'genuine but withdrawn', withdrawal: { reason: 'The specimens were mixed up' } });
  });

  it('tells the same nothing for a wrong code, another certificate’s code, another issue and a number that was never given', async () => {
    const answers = [
      await ask(`${current.number}?code=0000-0000-0000`), await ask(`${current.number}?code=${second.code}`),
      await ask(`${current.number}?code=${current.code}&issue=2`), await ask('C-2026-9999?code=0000-0000-0000'),
    ];
    for (const answer of answers) expect(answer).toEqual(answers[0]);
    expect(answers[0]).toMatchObject({ verdict: 'not ours', number: null, laboratory: null, sha256: null });
  });

  it('needs a code', async () => {
    await app.nobody.get(`/api/verify/${current.number}`).expect(400);
    await app.nobody.get(`/api/verify/${current.number}?code=`).expect(400);
  });

  it('does not know drafts', async () => {
    const id = await draft([await order.determine('dynamic', { number: 10 })]);
    const { number } = (await quality.get(`/api/certificates/${id}`)).body as Certificate;
    expect((await ask(`${number}?code=not%20released`)).verdict).toBe('not ours');
  });
});

describe('by file', () => {
  it.each(['pdf', 'xlsx', 'json'])('knows the %s that was issued', async (format) => {
    expect(await handIn(fileOf(format), `anything.${format}`)).toMatchObject({ verdict: 'genuine and current', number: current.number });
  });

  it.each(['pdf', 'xlsx', 'json'])('does not know a %s of which one byte was changed', async (format) => {
    const changed = Buffer.from(fileOf(format));
    const at = format === 'json' ? changed.indexOf('70312000000') : changed.length >> 1;
    changed[at] = (changed[at] ?? 0) ^ 1;
    expect((await handIn(changed)).verdict).toBe('not ours');
  });

  it('knows a data file that was only laid out differently', async () => {
    const pretty = Buffer.from(JSON.stringify(JSON.parse(fileOf('json').toString()), null, 2));
    expect(pretty.equals(fileOf('json'))).toBe(false);
    expect(await handIn(pretty)).toMatchObject({ verdict: 'genuine and current', sha256: current.sha256 });
  });

  it('does not know content that somebody else signed', async () => {
    const { snapshot } = JSON.parse(fileOf('json').toString()) as CertificateDocument;
    const forged = signSnapshot({ ...snapshot, deviations: 'none at all' }, { keyId: 'x', ...generateKeyPairSync('ed25519') });
    expect((await handIn(Buffer.from(JSON.stringify(forged)))).verdict).toBe('not ours');
    const resigned = signSnapshot(snapshot, { keyId: 'x', ...generateKeyPairSync('ed25519') });
    expect((await handIn(Buffer.from(JSON.stringify(resigned)))).verdict).toBe('not ours');
  });

  it.each([
    { what: 'an empty file', bytes: Buffer.alloc(0) }, { what: 'noise', bytes: Buffer.from([0, 255, 1, 2, 254]) }, { what: 'other JSON', bytes: Buffer.from('[1,2,3]') },
    { what: 'a signature that is none', bytes: Buffer.from('{"snapshot":{},"signature":{"algorithm":"Ed25519","keyId":"","publicKey":"","value":"%%%"}}') },
    { what: 'JSON nested without end', bytes: Buffer.from(`{"snapshot":{"a":${'['.repeat(200_000)}${']'.repeat(200_000)}},"signature":{"algorithm":"Ed25519","keyId":"","publicKey":"","value":""}}`) },
  ])('does not know $what', async ({ bytes }) => {
    expect((await handIn(bytes)).verdict).toBe('not ours');
  });

  it('says when there is no file', async () => {
    const answer = await app.nobody.post('/api/verify').field('file', 'text').expect(422);
    expect(answer.body).toMatchObject({ errors: [{ path: 'file' }] });
  });

  it('leaves no upload behind', async () => {
    const { readdirSync } = await import('node:fs');
    const { join } = await import('node:path');
    await handIn(fileOf('pdf'));
    expect(readdirSync(join(app.config.dataFolder, 'incoming'))).toEqual([]);
  });
});

describe('throttling', () => {
  it('stops an address that asks without end, and says for how long', async () => {
    for (let i = 0; i < CHECKS_PER_WINDOW; i += 1) await app.nobody.get(`/api/verify/${current.number}?code=0`).expect(200);
    const answer = await app.nobody.get(`/api/verify/${current.number}?code=${current.code}`).expect(429);
    expect(Number(answer.headers['retry-after'])).toBeGreaterThan(0);
    await app.nobody.post('/api/verify').attach('file', fileOf('json'), 'x.json').expect(429);
  });
});
