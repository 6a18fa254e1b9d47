/** Orders, samples and specimens: what was asked for and what arrived. */
import { z } from 'zod';
import { certificateState, determinationState, orderState } from './states';
import { basis, constantName, materialClass, runKind, shape } from './vocabulary';
import { constantResult } from './result';
import { day, id, instant, listQuery, longText, reason, shortText, version } from './wire';

export const DECISION_RULES = ['simple', 'guard band', 'one-sided 5 %'] as const;
export const decisionRule = z.enum(DECISION_RULES);

/** A limit that the customer wants a statement of conformity for; SI (Pa for E, G, K; 1 for ν). */
export const limit = z
  .strictObject({ constant: constantName, lower: z.number().nullable(), upper: z.number().nullable(), rule: decisionRule })
  .refine((l) => l.lower !== null || l.upper !== null, { path: ['lower'], message: 'Give a lower or an upper limit' })
  .refine((l) => l.lower === null || l.upper === null || l.lower < l.upper, { path: ['upper'], message: 'The upper limit must lie above the lower' });
export type Limit = z.infer<typeof limit>;

const orderBody = {
  title: shortText,
  customerReference: z.string().trim().max(120).default(''),
  /** What the customer says of the material; customer-supplied data, marked so on the certificate. */
  materialDescription: longText.min(1, 'Describe the material'),
  constantsWanted: z.array(constantName).min(1, 'Choose at least one constant'),
  kindsOfRun: z.array(runKind).min(1, 'Choose at least one kind of test'),
  limits: z.array(limit).max(8).default([]),
  dueOn: day.nullable().default(null),
  notes: longText.default(''),
};

export const newOrder = z.strictObject({
  /** Left out by a customer, whose own it is; required from the quality manager on behalf. */
  customerId: id.optional(),
  ...orderBody,
});
export type NewOrder = z.infer<typeof newOrder>;

export const orderSummary = z.object({
  id, number: z.string(), title: z.string(), customerId: id, customerName: z.string(), state: orderState,
  dueOn: day.nullable(), createdAt: instant, sampleCount: z.number().int(), specimenCount: z.number().int(), version,
});
export type OrderSummary = z.infer<typeof orderSummary>;

/** How far one specimen is; what the customer sees of the laboratory's work, without its insides. */
export const specimenProgress = z.object({
  id, mark: z.string(), sampleMark: z.string(), shape,
  received: z.boolean(), measured: z.boolean(), tested: z.array(runKind), fitted: z.array(basis),
  determinations: z.array(z.object({ id, basis, state: determinationState })),
  /** Constants of accepted determinations that stand on a released certificate (customer) or are accepted (laboratory). */
  constants: z.array(z.object({ basis, E: constantResult.nullable(), nu: constantResult.nullable(), G: constantResult.nullable(), K: constantResult.nullable() })),
});
export type SpecimenProgress = z.infer<typeof specimenProgress>;

export const orderCertificate = z.object({
  id, number: z.string(), issue: z.number().int(), state: certificateState, releasedAt: instant.nullable(), reason: z.string().nullable(),
});

export const order = orderSummary.extend({
  customerReference: z.string(), materialDescription: z.string(), constantsWanted: z.array(constantName), kindsOfRun: z.array(runKind),
  limits: z.array(z.object({ constant: constantName, lower: z.number().nullable(), upper: z.number().nullable(), rule: decisionRule })),
  notes: z.string(), requestedBy: z.string(), specimens: z.array(specimenProgress), certificates: z.array(orderCertificate),
});
export type Order = z.infer<typeof order>;

export const orderQuery = listQuery.extend({ customerId: id.optional() });
export const changeState = z.strictObject({ version: version.optional() });
export const cancelOrder = z.strictObject({ reason, version: version.optional() });

export const MOISTURE_STATES = ['as received', 'oven dry', 'saturated surface dry', 'not applicable'] as const;
export const moistureState = z.enum(MOISTURE_STATES);

export const newSample = z.strictObject({
  mark: shortText.optional(),
  material: shortText,
  materialClass,
  description: longText.default(''),
  receivedOn: day,
  condition: longText.default(''),
  sampledOn: day.nullable().default(null),
  sampledBy: z.string().trim().max(120).default(''),
});
export const sample = z.object({
  id, orderId: id, orderNumber: z.string(), mark: z.string(), material: z.string(), materialClass, description: z.string(), receivedOn: day, condition: z.string(),
  sampledOn: day.nullable(), sampledBy: z.string(), specimenCount: z.number().int(), version,
});
export type Sample = z.infer<typeof sample>;

export const newSpecimen = z.strictObject({
  /** Left out: the next free mark of the sample is given, e.g. S3-07. */
  mark: shortText.optional(),
  shape,
  orientation: z.string().trim().max(120).default(''),
  moisture: moistureState.default('not applicable'),
  notes: longText.default(''),
});
export const newSpecimens = newSpecimen.extend({ count: z.number().int().min(1).max(100).default(1) });

export const specimenSummary = z.object({
  id, mark: z.string(), sampleId: id, sampleMark: z.string(), orderId: id, orderNumber: z.string(), customerName: z.string(),
  material: z.string(), materialClass, shape, readingCount: z.number().int(), runCount: z.number().int(), createdAt: instant, version,
});
export type SpecimenSummary = z.infer<typeof specimenSummary>;
export const specimenQuery = listQuery.extend({ orderId: id.optional(), sampleId: id.optional() });
