/** Determinations and their review. */
import { z } from 'zod';
import { elasticResult } from './result';
import { determinationState } from './states';
import { fit, run } from './run-answers';
import { instrument } from './instruments';
import { reading, specimenMeasurement } from './specimens';
import { basis, materialClass, shape } from './vocabulary';
import { id, instant, listQuery, longText, reason, version } from './wire';

export const newDetermination = z.strictObject({ basis });
/** A warning passes only with a reason. */
export const acknowledgement = z.strictObject({ code: z.string().min(1).max(80), subject: z.string().max(200), reason });
export const submitDetermination = z.strictObject({ acknowledgements: z.array(acknowledgement).max(100).default([]), comment: longText.default(''), version: version.optional() });
export const acceptDetermination = z.strictObject({ comment: longText.default(''), version: version.optional() });
export const returnDetermination = z.strictObject({ reason, version: version.optional() });

export const review = z.object({ id, decision: z.enum(['accept', 'return']), reason: z.string(), personName: z.string(), at: instant });
export const determinationSummary = z.object({
  id, number: z.number().int(), specimenId: id, specimenMark: z.string(), orderId: id, orderNumber: z.string(), material: z.string(), basis, state: determinationState,
  composedBy: z.string(), submittedBy: z.string().nullable(), submittedAt: instant.nullable(), version,
});
export type DeterminationSummary = z.infer<typeof determinationSummary>;

/** Two adopted fits of one specimen and basis that measured the same constant: whether they agree (E_n with expanded uncertainties). */
export const agreement = z.object({ constant: z.enum(['E', 'nu', 'G', 'K']), fits: z.tuple([id, id]), values: z.tuple([z.number(), z.number()]), en: z.number(), agrees: z.boolean() });

export const determination = determinationSummary.extend({
  shape, materialClass,
  result: elasticResult,
  fitIds: z.array(id),
  acknowledgements: z.array(acknowledgement),
  comment: z.string(),
  reviews: z.array(review),
  agreements: z.array(agreement),
  /** The latest determination of the other basis, shown beside; never mixed. */
  otherBasis: z.object({ id, basis, state: determinationState, result: elasticResult }).nullable(),
  /** Why the caller may not review or release this, or null. */
  separation: z.string().nullable(),
});
export type Determination = z.infer<typeof determination>;
export const determinationQuery = listQuery.extend({ orderId: id.optional(), specimenId: id.optional(), basis: basis.optional() });

/** Everything a reviewer needs on one page. */
export const reviewFile = z.object({
  determination, runs: z.array(run), fits: z.array(fit), readings: z.array(reading), measurement: specimenMeasurement, instruments: z.array(instrument),
  /** Settings of the adopted fits that differ from those of the fits of the determination last returned. */
  changedSinceReturn: z.array(z.string()),
});
export type ReviewFile = z.infer<typeof reviewFile>;
