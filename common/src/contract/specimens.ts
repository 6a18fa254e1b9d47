/** One specimen with its readings and what follows from them. */
import { z } from 'zod';
import { determinationState, fitState, runState } from './states';
import { basis, readingQuantity, runKind } from './vocabulary';
import { elasticResult, finding, quantity } from './result';
import { moistureState, specimenSummary } from './orders';
import { id, instant, reason } from './wire';

export const newReading = z.strictObject({
  quantity: readingQuantity,
  station: z.number().int().min(1).max(99),
  /** As typed, in `unit`; the server turns it into SI and keeps both. */
  value: z.number().finite('Enter a number'),
  unit: z.string().min(1).max(12),
  instrumentId: id,
});
export type NewReading = z.infer<typeof newReading>;
/** The idempotency key of a burst: sent twice, it is stored once. */
export const newReadings = z.array(newReading).min(1, 'No readings').max(500);

export const correctReading = z.strictObject({ value: z.number().finite(), unit: z.string().min(1).max(12), instrumentId: id, reason });

export const reading = z.object({
  id, specimenId: id, quantity: readingQuantity, station: z.number().int(),
  /** SI. */
  value: z.number(),
  typedValue: z.number(), unit: z.string(), instrumentId: id, instrumentName: z.string(), personName: z.string(), readAt: instant,
  supersedes: id.nullable(), supersededBy: id.nullable(), reason: z.string().nullable(),
});
export type Reading = z.infer<typeof reading>;

export const readingStatistics = z.object({
  quantity: readingQuantity, n: z.number().int(), mean: z.number(), standardDeviation: z.number().nullable(), range: z.number(),
  standardUncertainty: z.number(), unit: z.string(),
});
export type ReadingStatistics = z.infer<typeof readingStatistics>;

export const specimenMeasurement = z.object({
  statistics: z.array(readingStatistics),
  area: quantity.nullable(),
  volume: quantity.nullable(),
  densityByDimensions: quantity.nullable(),
  densityInWater: quantity.nullable(),
  density: quantity.nullable(),
  findings: z.array(finding),
});
export type SpecimenMeasurementAnswer = z.infer<typeof specimenMeasurement>;

export const readingsAnswer = z.object({ readings: z.array(reading), measurement: specimenMeasurement });

export const specimenRun = z.object({
  id, number: z.number().int(), kind: runKind, state: runState, methodName: z.string(), performedAt: instant, performedBy: z.string(),
  fits: z.array(z.object({ id, number: z.number().int(), state: fitState, adopted: z.boolean() })),
});
export const specimenDetermination = z.object({ id, basis, number: z.number().int(), state: determinationState, result: elasticResult });

export const specimen = specimenSummary.extend({
  orientation: z.string(), moisture: moistureState, notes: z.string(),
  readings: z.array(reading), measurement: specimenMeasurement, runs: z.array(specimenRun), determinations: z.array(specimenDetermination),
});
export type Specimen = z.infer<typeof specimen>;
