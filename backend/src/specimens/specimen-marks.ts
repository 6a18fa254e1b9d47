import { eq } from 'drizzle-orm';
import type { Transaction } from '../database/database';
import { specimenMarks, specimens } from '../database/schema/orders';

/**
 * The next free marks of a sample: S3-07, S3-08, … Numbers only rise, and marks that people gave themselves are skipped.
 * The caller holds the order's lock.
 */
export async function nextMarks(tx: Transaction, sample: { id: string; mark: string }, wanted: number): Promise<string[]> {
  const [series] = await tx.select({ last: specimenMarks.last }).from(specimenMarks).where(eq(specimenMarks.sampleId, sample.id));
  const present = await tx.select({ mark: specimens.mark }).from(specimens).where(eq(specimens.sampleId, sample.id));
  const taken = new Set(present.map((row) => row.mark));
  const marks: string[] = [];
  let last = series?.last ?? 0;
  while (marks.length < wanted) {
    last += 1;
    const mark = `${sample.mark}-${String(last).padStart(2, '0')}`;
    if (!taken.has(mark)) marks.push(mark);
  }
  await tx.insert(specimenMarks).values({ sampleId: sample.id, last }).onConflictDoUpdate({ target: specimenMarks.sampleId, set: { last } });
  return marks;
}
