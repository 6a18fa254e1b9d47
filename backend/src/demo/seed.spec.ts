import type { Certificate } from '@strainwright/common/contract/certificates';
import type { Instrument, ReferencePiece } from '@strainwright/common/contract/instruments';
import { ORDER_STATES } from '@strainwright/common/contract/states';
import { asc, eq } from 'drizzle-orm';
import { certificates } from '../database/schema/certificates';
import { determinations, reviews } from '../database/schema/determinations';
import { orders, samples, specimens } from '../database/schema/orders';
import { recordEntries } from '../database/schema/record';
import { adoptions, fits, runs } from '../database/schema/runs';
import { fitWorker } from '../fits/fit-worker';
import { testApp, type TestApp } from '../testing/app';
import { DEMO_SIGN_INS } from './people';
import { seedDemo } from './seed';
import { TRUTHS, type Truth } from './truths';

let app: TestApp;
beforeAll(async () => {
  app = await testApp({ worker: fitWorker() });
  await seedDemo(app.nest);
}, 180_000);
afterAll(() => app.close());

/** Which truth a sample of the demo was made from. */
const TRUTH_OF: Readonly<Record<string, Truth>> = {
  Granite: TRUTHS.granite, Concrete: TRUTHS.concrete, 'Nickel alloy NR-4': TRUTHS.nickelAlloy, 'Aluminium alloy AF-2': TRUTHS.aluminiumAlloy, 'Glass LH-7': TRUTHS.glass,
};

async function get<T>(who: string, path: string): Promise<T> {
  const person = DEMO_SIGN_INS.find((s) => s.who === who);
  const { body } = await app.nobody.post('/api/session', { email: person?.email, password: person?.password }).expect(200);
  return (await app.nobody.get(path).set('Authorization', `Bearer ${(body as { accessToken: string }).accessToken}`).expect(200)).body as T;
}

describe('seedDemo', () => {
  it('lets everybody sign in', async () => {
    for (const { email, password } of DEMO_SIGN_INS) await app.nobody.post('/api/session', { email, password }).expect(200);
    expect(DEMO_SIGN_INS.every(({ password }) => password.length >= 12)).toBe(true);
  });

  it('has orders in every state', async () => {
    const rows = await app.database.db.select({ state: orders.state }).from(orders);
    expect(new Set(rows.map((r) => r.state))).toEqual(new Set(ORDER_STATES));
  });

  it('determines constants that cover the truth of the raw files', async () => {
    const rows = await app.database.db.select({ material: samples.material, mark: specimens.mark, state: determinations.state, result: determinations.result }).from(determinations)
      .innerJoin(specimens, eq(specimens.id, determinations.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId));
    const good = rows.filter((r) => r.state === 'accepted' || r.state === 'submitted');
    expect(good.length).toBe(6);
    for (const { material, result } of good) {
      for (const constant of ['E', 'nu'] as const) {
        const [measured, truth] = [result.constants[constant], TRUTH_OF[material]?.[constant] ?? Number.NaN];
        expect(Math.abs((measured?.value ?? Number.NaN) - truth)).toBeLessThanOrEqual(measured?.expandedUncertainty ?? 0);
      }
    }
  });

  it('has one determination that was returned, with the reason', async () => {
    const rows = await app.database.db.select({ reason: reviews.reason, result: determinations.result }).from(determinations).innerJoin(reviews, eq(reviews.determinationId, determinations.id)).where(eq(determinations.state, 'returned'));
    expect(rows).toHaveLength(1);
    expect(rows[0]?.reason).toContain('seating');
    expect(rows[0]?.result.findings.map((f) => f.code)).toContain('TOE_IN_WINDOW');
    expect(rows[0]?.result.constants.E?.value).toBeLessThan(0.8 * TRUTHS.concrete.E);
  });

  it('has one certificate in its second issue, and one waiting to be released', async () => {
    const rows = await app.database.db.select().from(certificates).orderBy(asc(certificates.number), asc(certificates.issue));
    expect(rows.map((r) => [r.number.slice(-4), r.issue, r.state])).toEqual([['0001', 1, 'superseded'], ['0001', 2, 'released'], ['0002', 1, 'released'], ['0003', 1, 'draft']]);
    const second = await get<Certificate>('customer, Harbeck Crossing Partnership', `/api/certificates/${rows[1]?.id ?? ''}`);
    expect(second.snapshot.replaces).toMatchObject({ issue: 1, reason: expect.stringContaining('mass of the second core') as string });
    const density = (snapshot: Certificate['snapshot'] | null | undefined) => snapshot?.specimens[1]?.density?.value ?? 0;
    expect(density(rows[0]?.snapshot) / TRUTHS.granite.density).toBeGreaterThan(1.01);
    expect(density(second.snapshot) / TRUTHS.granite.density).toBeCloseTo(1, 3);
  });

  it('has one instrument whose calibration lapsed, flagged on the certificate that used it', async () => {
    const { items } = await get<{ items: Instrument[] }>('quality manager', '/api/instruments');
    expect(items.filter((i) => i.calibrationState === 'lapsed').map((i) => i.name)).toEqual(['Extensometer EX-1']);
    const [row] = await app.database.db.select().from(certificates).where(eq(certificates.number, items.length > 0 ? await numberOf('Nickel alloy NR-4') : ''));
    expect(row?.snapshot?.instruments.filter((i) => !i.inCalibration).map((i) => i.name)).toEqual(['Extensometer EX-1']);
    expect(row?.snapshot?.results.flatMap((r) => r.acknowledgements).map((a) => a.code)).toContain('OUT_OF_CALIBRATION');
  });

  it('has one reference bar that drifted out of limits, noticed on the fit that it concerns', async () => {
    const { items } = await get<{ items: ReferencePiece[] }>('quality manager', '/api/reference-pieces');
    expect(items.map((piece) => piece.checks.filter((c) => !c.withinLimits).length)).toEqual([1]);
    const [fit] = await app.database.db.select({ id: fits.id, result: fits.result }).from(fits).innerJoin(runs, eq(runs.id, fits.runId)).innerJoin(specimens, eq(specimens.id, runs.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId)).where(eq(samples.material, 'Glass LH-7'));
    expect(fit?.result?.findings.map((f) => f.code)).toContain('REFERENCE_CHECK_OUT_OF_LIMITS');
    expect(await app.database.db.select().from(adoptions).where(eq(adoptions.fitId, fit?.id ?? ''))).toEqual([]);
  });

  it('tells everything in the record, in order of time, unbroken', async () => {
    expect(await get('quality manager', '/api/record/verify')).toMatchObject({ intact: true, firstBroken: null });
    const entries = await app.database.db.select({ at: recordEntries.at, action: recordEntries.action }).from(recordEntries).orderBy(asc(recordEntries.sequence));
    const story = entries.filter((e) => !e.action.startsWith('session.'));
    expect(story.every((e, i) => i === 0 || e.at >= (story[i - 1]?.at ?? e.at))).toBe(true);
    expect(story[0]?.at.getTime()).toBeLessThan(Date.now() - 60 * 86_400_000);
  });

  it('leaves the clock right', () => {
    expect(Math.abs(app.clock.now().getTime() - Date.now())).toBeLessThan(1000);
  });
});

async function numberOf(material: string): Promise<string> {
  const rows = await app.database.db.select({ number: certificates.number, snapshot: certificates.snapshot }).from(certificates);
  return rows.find((r) => r.snapshot?.specimens.some((s) => s.material === material) === true)?.number ?? '';
}
