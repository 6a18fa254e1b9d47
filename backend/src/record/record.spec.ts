import { asc, eq, sql } from 'drizzle-orm';
import { rowsOf, sqlState } from '../database/database';
import { recordEntries } from '../database/schema/record';
import { testApp, type TestApp, type TestPerson } from '../testing/app';
import { RecordReader } from './record.reader';
import { hashOf, RecordService } from './record.service';

describe('Record', () => {
  let app: TestApp;
  let manager: TestPerson;
  beforeAll(async () => {
    app = await testApp();
    manager = await app.person('quality manager');
  }, 60_000);
  afterAll(() => app.close());

  const append = (n: number) => app.database.transaction(async (tx) => {
    const deeds = Array.from({ length: n }, (_, i) => ({ action: 'reading.entered', noun: 'reading', nounId: `reading-${i}`, person: null, details: { value: 0.1 * i, text: 'größer', at: new Date(0), none: undefined } }));
    await app.get(RecordService).append(tx, ...deeds);
  });

  /** As somebody with the database's own password would: the guard taken away, and put back. */
  const tamper = async (change: ReturnType<typeof sql>) => {
    await app.database.db.execute(sql`alter table record_entries disable trigger user`);
    await app.database.db.execute(change);
    await app.database.db.execute(sql`alter table record_entries enable trigger user`);
  };

  it('is intact over more entries than are read at once', async () => {
    await append(1_203);
    const answer = await app.get(RecordReader).verify();
    expect(answer).toMatchObject({ intact: true, firstBroken: null });
    expect(answer.entries).toBeGreaterThan(1_203);
  });

  it('does not fork when many changes write it at the same time', async () => {
    await Promise.all(Array.from({ length: 20 }, () => append(2)));
    expect(await app.get(RecordReader).verify()).toMatchObject({ intact: true });
  });

  it('has no entry for a change that was rolled back', async () => {
    const before = await app.get(RecordReader).verify();
    await app.database.transaction(async (tx) => {
      await app.get(RecordService).append(tx, { action: 'order.opened', noun: 'order', nounId: 'x', person: null });
      throw new Error('rolled back');
    }).catch(() => undefined);
    expect(await app.get(RecordReader).verify()).toEqual(before);
  });

  it.each([['update', sql`update record_entries set details = '{}'`], ['delete', sql`delete from record_entries`], ['truncate', sql`truncate record_entries`]])('is guarded against %s', async (_what, statement) => {
    const error: unknown = await app.database.db.execute(statement).catch((e: unknown) => e);
    expect(sqlState(error)).toBe('23001');
  });

  it('is listed newest first, filtered and paged, for those who may read it', async () => {
    const { body } = await manager.get('/api/record?action=reading.entered&pageSize=3&page=1').expect(200);
    expect(body.items).toHaveLength(3);
    expect(body.total).toBe(1_243);
    const sequences = (body.items as { sequence: number }[]).map((i) => i.sequence);
    expect(sequences).toEqual([...sequences].sort((a, b) => b - a));
    const analyst = await app.person('analyst');
    await analyst.get('/api/record').expect(403);
  });

  it('names the first entry whose content was changed, though its hashes were left alone', async () => {
    await tamper(sql`update record_entries set details = jsonb_set(details, '{value}', '7') where sequence = 700`);
    const { body } = await manager.get('/api/record/verify').expect(200);
    expect(body).toMatchObject({ intact: false, firstBroken: 700 });
    expect(body.reason).toContain('was changed after it was written');
  });

  it('names the entry after one whose hash was made anew to hide the change', async () => {
    const [changed] = await app.database.db.select().from(recordEntries).where(eq(recordEntries.sequence, 700));
    if (changed === undefined) throw new Error('entry 700 is not there');
    await tamper(sql`update record_entries set hash = ${hashOf(changed)} where sequence = 700`);
    const { body } = await manager.get('/api/record/verify').expect(200);
    expect(body).toMatchObject({ intact: false, firstBroken: 701 });
  });

  it('names the entry after one that was taken out', async () => {
    await tamper(sql`delete from record_entries where sequence = 300`);
    const { body } = await manager.get('/api/record/verify').expect(200);
    expect(body).toMatchObject({ intact: false, firstBroken: 301, entries: 299 });
  });

  it('gives the same hash for what the database gives back', async () => {
    const [row] = await app.database.db.select().from(recordEntries).orderBy(asc(recordEntries.sequence)).limit(1);
    if (row === undefined) throw new Error('the record is empty');
    expect(hashOf(row)).toBe(row.hash);
    expect(rowsOf<{ n: number }>(await app.database.db.execute(sql`select count(*)::int as n from record_entries where length(hash) <> 64`))[0]?.n).toBe(0);
  });
});
