import JSZip from 'jszip';
import { certificate, certificateDocument, type Certificate, type CertificateDocument } from '@strainwright/common/contract/certificates';
import type { Problem } from '@strainwright/common/contract/wire';
import { and, eq } from 'drizzle-orm';
import { extractText, getDocumentProxy } from 'unpdf';
import { certificateDocuments, certificates } from '../database/schema/certificates';
import { determinations } from '../database/schema/determinations';
import { orders } from '../database/schema/orders';
import { laboratory } from '../database/schema/people';
import { readings } from '../database/schema/readings';
import { recordEntries } from '../database/schema/record';
import { sha256 } from '../platform/canonical';
import { newId } from '../platform/ids';
import { testApp, type TestApp, type TestPerson } from '../testing/app';
import { canonicalBytes, publicPem, signatureHolds } from './rendering/signing';
import { acceptedOrder, type AcceptedOrder, type Workers } from './testing/accepted-order';
import { exampleResult } from './testing/example-snapshot';
import { Secrets } from '../platform/secrets';

let app: TestApp;
let quality: TestPerson;
let technician: TestPerson;
let analyst: TestPerson;
let reviewer: TestPerson;
let workers: Workers;

beforeAll(async () => {
  app = await testApp();
  app.clock.set('2026-03-10T09:00:00Z');
  [quality, technician, analyst, reviewer] = [await app.person('quality manager'), await app.person('technician'), await app.person('analyst'), await app.person('reviewer')];
  workers = { technicianId: technician.id, analystId: analyst.id, reviewerId: reviewer.id };
}, 120_000);
afterAll(() => app.close());

const problemOf = (answer: { body: unknown }): Problem => answer.body as Problem;
async function draft(order: AcceptedOrder, determinationIds: string[], by = quality): Promise<Certificate> {
  const answer = await by.post(`/api/orders/${order.orderId}/certificates`, { determinationIds }).expect(201);
  return certificate.parse(answer.body);
}
async function release(id: string, by = quality): Promise<Certificate> {
  const answer = await by.post(`/api/certificates/${id}/release`, { password: by.password }).expect(200);
  return certificate.parse(answer.body);
}
async function released(): Promise<{ order: AcceptedOrder; certified: Certificate; determinationId: string }> {
  const order = await acceptedOrder(app, workers);
  const determinationId = await order.determine('dynamic');
  return { order, determinationId, certified: await release((await draft(order, [determinationId])).id) };
}
async function download(person: TestPerson, id: string, format: 'pdf' | 'xlsx' | 'json'): Promise<Buffer> {
  const answer = await person.get(`/api/certificates/${id}/certificate.${format}`).buffer(true).parse((response, done) => {
    const chunks: Buffer[] = [];
    response.on('data', (chunk: Buffer) => chunks.push(chunk));
    response.on('end', () => done(null, Buffer.concat(chunks)));
  }).expect(200);
  expect(answer.headers['content-disposition']).toMatch(/^attachment; filename="C-2026-\d{4}-issue-\d+(-draft)?\.\w+"$/);
  expect(answer.headers['x-content-type-options']).toBe('nosniff');
  return answer.body as Buffer;
}
async function pdfText(pdf: Buffer): Promise<string> {
  return (await extractText(await getDocumentProxy(new Uint8Array(pdf)), { mergePages: true })).text.replace(/\s+/g, ' ');
}

describe('drafting', () => {
  it('composes the snapshot from accepted determinations, without a signature', async () => {
    const order = await acceptedOrder(app, workers, { limits: [{ constant: 'E', lower: 69e9, upper: null, rule: 'guard band' }], calibrationDueOn: '2026-03-09' });
    const made = await draft(order, [await order.determine('dynamic')]);
    expect(made).toMatchObject({ state: 'draft', issue: 1, sha256: null, signature: null, code: null, separation: null });
    expect(made.number).toMatch(/^C-2026-\d{4}$/);
    const { snapshot } = made;
    expect(snapshot.results[0]).toMatchObject({ basis: 'dynamic', analysedBy: analyst.name, reviewedBy: reviewer.name, runs: [{ performedBy: technician.name, settings: 'AIC picker', temperature: 21 }] });
    expect(snapshot.specimens[0]?.dimensions[0]).toMatchObject({ quantity: 'length', n: 2, unit: 'm' });
    // π/4 · 0.020005² · 0.050025 m³ and 0.0424 kg.
    expect(snapshot.specimens[0]?.density?.value).toBeCloseTo(0.0424 / ((Math.PI / 4) * 0.020005 ** 2 * 0.050025), 4);
    expect(snapshot.conformity).toEqual([expect.objectContaining({ constant: 'E', conforms: true, rule: 'guard band' })]);
    expect(snapshot.instruments).toEqual([expect.objectContaining({ kind: 'micrometer', dueOn: '2026-03-09', inCalibration: false })]);
  });

  it.each([
    { what: 'submitted', message: 'is submitted; only accepted ones' },
    { what: 'superseded', message: 'is superseded by a later one' },
  ] as const)('refuses a determination that is $what, at its field', async ({ what, message }) => {
    const order = await acceptedOrder(app, workers);
    const good = await order.determine('static');
    const bad = await order.determine('dynamic', { state: what });
    const answer = await quality.post(`/api/orders/${order.orderId}/certificates`, { determinationIds: [good, bad] }).expect(422);
    expect(problemOf(answer).errors).toEqual([{ path: 'determinationIds.1', message: expect.stringContaining(message) as string }]);
  });

  it('refuses a determination of another order, one named twice, and one with a stop', async () => {
    const [order, other] = [await acceptedOrder(app, workers), await acceptedOrder(app, workers)];
    const good = await order.determine('static');
    const foreign = await other.determine('static');
    const stopped = await order.determine('dynamic', { result: { ...exampleResult('dynamic'), findings: [{ code: 'NU_OUTSIDE_RANGE', severity: 'stop', subject: 'nu', seen: 'ν = 0.52', why: '', action: '' }] } });
    const answer = await quality.post(`/api/orders/${order.orderId}/certificates`, { determinationIds: [good, foreign, good, stopped] }).expect(422);
    expect(problemOf(answer).errors?.map((e) => e.path)).toEqual(['determinationIds.1', 'determinationIds.2', 'determinationIds.3']);
  });

  it('is only for a quality manager', async () => {
    const order = await acceptedOrder(app, workers);
    const determinationIds = [await order.determine('static')];
    for (const person of [technician, analyst, reviewer]) await person.post(`/api/orders/${order.orderId}/certificates`, { determinationIds }).expect(403);
    await app.nobody.post(`/api/orders/${order.orderId}/certificates`, { determinationIds }).expect(401);
  });

  it('twice makes one draft, the second content standing', async () => {
    const order = await acceptedOrder(app, workers);
    const [a, b] = [await order.determine('static'), await order.determine('dynamic')];
    const first = await draft(order, [a]);
    const second = await draft(order, [a, b]);
    expect(second).toMatchObject({ id: first.id, number: first.number, determinationIds: [a, b], version: first.version + 1 });
  });

  it('prints a watermarked preview for the laboratory, and no other document', async () => {
    const order = await acceptedOrder(app, workers);
    const { id } = await draft(order, [await order.determine('static')]);
    expect(await pdfText(await download(technician, id, 'pdf'))).toContain('DRAFT — not a certificate');
    await quality.get(`/api/certificates/${id}/certificate.xlsx`).expect(409);
    await quality.get(`/api/certificates/${id}/certificate.json`).expect(409);
  }, 30_000);

  it('describes the specimen by the readings that the fits rested on, not by later corrections', async () => {
    const order = await acceptedOrder(app, workers);
    const determinationId = await order.determine('dynamic');
    const [reading] = await app.database.db.select().from(readings).where(and(eq(readings.specimenId, order.specimenId), eq(readings.quantity, 'mass')));
    if (reading === undefined) throw new Error('no reading');
    await app.database.db.insert(readings).values({ ...reading, id: newId(), value: 0.05, supersedesId: reading.id, reason: 'typing error', readAt: new Date('2026-03-11T09:00:00Z') });
    const { snapshot } = await draft(order, [determinationId]);
    expect(snapshot.specimens[0]?.dimensions.find((d) => d.quantity === 'mass')?.mean).toBe(0.0424);
  });
});

describe('release', () => {
  it('signs the snapshot, stores three documents that carry it, reports the order and writes the record', async () => {
    const { order, certified } = await released();
    expect(certified).toMatchObject({ state: 'released', releasedBy: quality.name, releasedAt: '2026-03-10T09:00:00.000Z' });
    const { signingKeyId, signingKey, verifyingKey } = app.get(Secrets);
    const pem = publicPem({ keyId: signingKeyId, privateKey: signingKey, publicKey: verifyingKey });
    const [row] = await app.database.db.select().from(certificates).where(eq(certificates.id, certified.id));
    // As it comes back from the database's own JSON type.
    const bytes = canonicalBytes(row?.snapshot);
    expect(sha256(bytes)).toBe(certified.sha256);
    expect(signatureHolds(bytes, certified.signature ?? '', pem)).toBe(true);

    const document = certificateDocument.parse(JSON.parse((await download(quality, certified.id, 'json')).toString()));
    expect(document).toEqual<CertificateDocument>({ snapshot: certified.snapshot, sha256: certified.sha256 ?? '', signature: { algorithm: 'Ed25519', keyId: app.get(Secrets).signingKeyId, publicKey: pem, value: certified.signature ?? '' } });
    const text = await pdfText(await download(quality, certified.id, 'pdf'));
    for (const part of [certified.number, '70.31 ± 0.91 GPa', certified.sha256 ?? '', certified.code ?? '']) expect(text).toContain(part);
    const zip = await JSZip.loadAsync(await download(quality, certified.id, 'xlsx'));
    expect(await zip.file('xl/sharedStrings.xml')?.async('string')).toContain(certified.sha256);

    const [ordered] = await app.database.db.select().from(orders).where(eq(orders.id, order.orderId));
    expect(ordered?.state).toBe('reported');
    const entries = await app.database.db.select().from(recordEntries).where(eq(recordEntries.nounId, certified.id));
    const documents = await app.database.db.select().from(certificateDocuments).where(eq(certificateDocuments.certificateId, certified.id));
    const byFormat = Object.fromEntries(documents.map((d) => [d.format, d.sha256]));
    expect(entries.at(-1)).toMatchObject({ action: 'certificate.released', personId: quality.id, details: { number: certified.number, sha256: certified.sha256, documents: byFormat } });
  }, 30_000);

  it('asks for the caller’s own password', async () => {
    const order = await acceptedOrder(app, workers);
    const { id } = await draft(order, [await order.determine('static')]);
    const answer = await quality.post(`/api/certificates/${id}/release`, { password: 'not the password' }).expect(403);
    expect(problemOf(answer)).toMatchObject({ code: 'password.wrong', errors: [{ path: 'password' }] });
    expect((await quality.get(`/api/certificates/${id}`)).body).toMatchObject({ state: 'draft' });
  });

  it('twice at once releases once', async () => {
    const order = await acceptedOrder(app, workers);
    const { id } = await draft(order, [await order.determine('static')]);
    const call = () => quality.post(`/api/certificates/${id}/release`, { password: quality.password });
    const statuses = (await Promise.all([call(), call()])).map((answer) => answer.status).sort();
    expect(statuses).toEqual([200, 409]);
    const [row] = await app.database.db.select().from(certificates).where(eq(certificates.id, id));
    const documents = await app.database.db.select().from(certificateDocuments).where(eq(certificateDocuments.certificateId, id));
    expect(documents).toHaveLength(3);
    expect(sha256(canonicalBytes(row?.snapshot))).toBe(row?.sha256);
    await quality.post(`/api/certificates/${id}/release`, { password: quality.password }).expect(409);
  }, 30_000);

  it('refuses a stale version with what is current', async () => {
    const order = await acceptedOrder(app, workers);
    const made = await draft(order, [await order.determine('static')]);
    const answer = await quality.post(`/api/certificates/${made.id}/release`, { password: quality.password, version: made.version + 1 }).expect(409);
    expect(answer.body).toMatchObject({ code: 'version.stale', current: { id: made.id, version: made.version } });
  });

  it('refuses once a determination has been superseded after drafting', async () => {
    const order = await acceptedOrder(app, workers);
    const determinationId = await order.determine('static');
    const { id } = await draft(order, [determinationId]);
    await app.database.db.update(determinations).set({ state: 'superseded' }).where(eq(determinations.id, determinationId));
    const answer = await quality.post(`/api/certificates/${id}/release`, { password: quality.password }).expect(422);
    expect(problemOf(answer).errors?.[0]?.message).toContain('superseded');
  });

  it('is refused to whoever adopted a fit or submitted a determination in it, whatever their roles', async () => {
    const allRoles = await app.person(['analyst', 'quality manager']);
    const order = await acceptedOrder(app, { ...workers, analystId: allRoles.id });
    const made = await draft(order, [await order.determine('static')], allRoles);
    expect(made.separation).toContain('someone else must release it');
    const answer = await allRoles.post(`/api/certificates/${made.id}/release`, { password: allRoles.password }).expect(403);
    expect(problemOf(answer).code).toBe('certificate.own-work');
    expect(await release(made.id)).toMatchObject({ state: 'released', releasedBy: quality.name });
  }, 30_000);

  it('is allowed to a sole practitioner once separation is switched off; certificate and record say so', async () => {
    const sole = await app.person(['analyst', 'quality manager']);
    const order = await acceptedOrder(app, { ...workers, analystId: sole.id });
    const made = await draft(order, [await order.determine('static')], sole);
    await app.database.db.update(laboratory).set({ separationOfDuties: false });
    try {
      const certified = await release(made.id, sole);
      expect(certified.snapshot.laboratory.separationOfDuties).toBe(false);
      expect(await pdfText(await download(sole, certified.id, 'pdf'))).toContain('Separation of duties is switched off');
      const [entry] = await app.database.db.select().from(recordEntries).where(and(eq(recordEntries.nounId, certified.id), eq(recordEntries.action, 'certificate.released')));
      expect(entry?.details).toMatchObject({ separationOfDuties: false });
    } finally {
      await app.database.db.update(laboratory).set({ separationOfDuties: true });
    }
  }, 30_000);

  it('leaves what was released beyond the reach of an update', async () => {
    const { certified } = await released();
    await expect(app.database.db.update(certificates).set({ sha256: 'x' }).where(eq(certificates.id, certified.id))).rejects.toThrow();
    await expect(app.database.db.delete(certificateDocuments).where(eq(certificateDocuments.certificateId, certified.id))).rejects.toThrow();
  }, 30_000);
});

describe('amend', () => {
  it('makes issue 2 that names issue 1 and why, and takes up later determinations; its release supersedes issue 1', async () => {
    const { order, certified, determinationId } = await released();
    await app.database.db.update(determinations).set({ state: 'superseded' }).where(eq(determinations.id, determinationId));
    const later = await order.determine('dynamic');
    const answer = await quality.post(`/api/certificates/${certified.id}/amend`, { reason: 'The balance was misread' }).expect(201);
    const second = certificate.parse(answer.body);
    expect(second).toMatchObject({ number: certified.number, issue: 2, state: 'draft', determinationIds: [later] });
    expect(second.snapshot.replaces).toEqual({ number: certified.number, issue: 1, releasedAt: certified.releasedAt, reason: 'The balance was misread' });
    expect((await quality.get(`/api/certificates/${certified.id}`)).body).toMatchObject({ state: 'released' });

    const reissued = await release(second.id);
    expect(reissued.issues.map((i) => [i.issue, i.state])).toEqual([[1, 'superseded'], [2, 'released']]);
    expect(reissued.code).not.toBe(certified.code);
    expect(await pdfText(await download(quality, reissued.id, 'pdf'))).toContain('Reason: The balance was misread');
    // The first issue is still there, as it was.
    expect(JSON.parse((await download(quality, certified.id, 'json')).toString())).toMatchObject({ sha256: certified.sha256 });
  }, 30_000);

  it('refuses a determination that stands on a released certificate to a second one', async () => {
    const { order, determinationId, certified } = await released();
    const answer = await quality.post(`/api/orders/${order.orderId}/certificates`, { determinationIds: [determinationId] }).expect(422);
    expect(problemOf(answer).errors?.[0]?.message).toContain(`Stands on certificate ${certified.number} issue 1`);
  }, 30_000);

  it.each(['draft', 'withdrawn'])('is refused for a %s', async (state) => {
    const order = await acceptedOrder(app, workers);
    const made = await draft(order, [await order.determine('static')]);
    if (state === 'withdrawn') {
      await release(made.id);
      await quality.post(`/api/certificates/${made.id}/withdraw`, { reason: 'Wrong customer' }).expect(200);
    }
    await quality.post(`/api/certificates/${made.id}/amend`, { reason: 'A good reason' }).expect(409);
  }, 30_000);

  it('cannot be released once the issue that it replaces was withdrawn', async () => {
    const { certified } = await released();
    const second = certificate.parse((await quality.post(`/api/certificates/${certified.id}/amend`, { reason: 'A good reason' }).expect(201)).body);
    await quality.post(`/api/certificates/${certified.id}/withdraw`, { reason: 'Wrong customer' }).expect(200);
    const answer = await quality.post(`/api/certificates/${second.id}/release`, { password: quality.password }).expect(409);
    expect(problemOf(answer).code).toBe('certificate.former');
  }, 30_000);
});

describe('withdraw', () => {
  it('needs a reason, keeps the documents, and happens once', async () => {
    const { certified } = await released();
    await quality.post(`/api/certificates/${certified.id}/withdraw`, { reason: 'x' }).expect(422);
    const answer = await quality.post(`/api/certificates/${certified.id}/withdraw`, { reason: 'The specimens were mixed up' }).expect(200);
    expect(answer.body).toMatchObject({ state: 'withdrawn', reason: 'The specimens were mixed up' });
    await download(quality, certified.id, 'pdf');
    await quality.post(`/api/certificates/${certified.id}/withdraw`, { reason: 'The specimens were mixed up' }).expect(409);
  }, 30_000);
});

describe('customers', () => {
  it('see and download released certificates of their own, and no draft', async () => {
    const customerId = await app.customer();
    const own = await app.person('customer', customerId);
    const stranger = await app.person('customer', await app.customer());
    const order = await acceptedOrder(app, workers, { customerId });
    const made = await draft(order, [await order.determine('static')]);
    await own.get(`/api/certificates/${made.id}`).expect(404);
    await own.get(`/api/certificates/${made.id}/certificate.pdf`).expect(404);
    expect((await own.get('/api/certificates')).body).toEqual({ items: [], total: 0 });
    await release(made.id);
    await own.get(`/api/certificates/${made.id}`).expect(200);
    await download(own, made.id, 'xlsx');
    expect((await own.get('/api/certificates')).body).toMatchObject({ total: 1, items: [{ id: made.id }] });
    await stranger.get(`/api/certificates/${made.id}`).expect(404);
    await stranger.get(`/api/certificates/${made.id}/certificate.pdf`).expect(404);
    expect((await stranger.get('/api/certificates')).body).toEqual({ items: [], total: 0 });
    await own.post(`/api/certificates/${made.id}/withdraw`, { reason: 'I do not like it' }).expect(403);
    // The draft of an amendment is not theirs to see either.
    const second = certificate.parse((await quality.post(`/api/certificates/${made.id}/amend`, { reason: 'A good reason' })).body);
    await own.get(`/api/certificates/${second.id}`).expect(404);
    expect(((await own.get(`/api/certificates/${made.id}`)).body as Certificate).issues).toHaveLength(1);
  }, 30_000);
});
