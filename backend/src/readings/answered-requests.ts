import { eq } from 'drizzle-orm';
import type { Transaction } from '../database/database';
import { answeredRequests } from '../database/schema/readings';
import { canonicalJson, sha256 } from '../platform/canonical';
import { invalid, refused } from '../platform/problem';

/** A request that names itself, so that sending it twice does its work once. */
export interface KeyedRequest { personId: string; key: string | undefined; nounId: string; body: unknown; at: Date }

/** The key as the header gives it. @throws Problem 422 when it is no plain text of 1 to 100 characters */
export function idempotencyKey(header: string | undefined): string | undefined {
  if (header === undefined || /^[\x21-\x7e]{1,100}$/.test(header)) return header;
  throw invalid('Idempotency-Key', 'A text of 1 to 100 characters without spaces');
}

/**
 * Notes a request as answered, or tells when it was: undefined means that its work is still to be done. A second one waits here
 * until the first has been committed. Keys of different people never meet.
 * @throws Problem 409 when the key was given to something else before
 */
export async function answeredBefore(tx: Transaction, { personId, key, nounId, body, at }: KeyedRequest): Promise<Date | undefined> {
  if (key === undefined) return undefined;
  const row = { key: `${personId} ${key}`, personId, bodySha256: sha256(canonicalJson(body)), nounId, at };
  const noted = await tx.insert(answeredRequests).values(row).onConflictDoNothing().returning({ key: answeredRequests.key });
  if (noted.length > 0) return undefined;
  const [before] = await tx.select().from(answeredRequests).where(eq(answeredRequests.key, row.key));
  if (before?.nounId === nounId && before.bodySha256 === row.bodySha256) return before.at;
  throw refused('request.key-used', 'This Idempotency-Key was sent with another request before. Use a new key for each request.');
}
