/** The append-only, chained record of who did what to what and when. */
import { z } from 'zod';
import { id, instant, listQuery } from './wire';

export const recordEntry = z.object({
  sequence: z.number().int().positive(),
  at: instant,
  personId: id.nullable(),
  personName: z.string().nullable(),
  /** A verb of the product: `reading.entered`, `certificate.released`, … */
  action: z.string(),
  noun: z.string(),
  nounId: z.string(),
  details: z.record(z.string(), z.unknown()),
  hash: z.string(),
  previousHash: z.string(),
});
export type RecordEntry = z.infer<typeof recordEntry>;

export const recordQuery = listQuery.extend({
  noun: z.string().max(40).optional(), nounId: z.string().max(60).optional(), action: z.string().max(60).optional(),
  personId: id.optional(), from: instant.optional(), to: instant.optional(),
});

export const recordVerification = z.object({
  entries: z.number().int().nonnegative(),
  intact: z.boolean(),
  /** Sequence number of the first entry that does not follow; null when intact. */
  firstBroken: z.number().int().nullable(),
  reason: z.string().nullable(),
});
