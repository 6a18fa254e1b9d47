import { sql } from 'drizzle-orm';
import type { Transaction } from './database';
import { numberSeries } from './schema/people';

/** The next number of a series, 1 at first; the row stays locked until the transaction ends, so that no number is given twice. */
export async function nextNumber(tx: Transaction, series: string): Promise<number> {
  const [row] = await tx.insert(numberSeries).values({ series, last: 1 })
    .onConflictDoUpdate({ target: numberSeries.series, set: { last: sql`${numberSeries.last} + 1` } })
    .returning({ last: numberSeries.last });
  if (row === undefined) throw new Error(`The series ${series} gave no number`);
  return row.last;
}
