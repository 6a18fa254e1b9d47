/** Instruments with their calibrations, methods with their versions, reference checks. */
import { z } from 'zod';
import { instrumentKind, runKind } from './vocabulary';
import { day, id, instant, listQuery, longText, shortText, version } from './wire';

export const newCalibration = z
  .strictObject({
    calibratedOn: day,
    dueOn: day,
    certificate: shortText,
    laboratory: shortText,
    /** Relative: a fraction of the reading (force, extension); otherwise in the instrument's unit, turned into SI by the server. */
    relative: z.boolean(),
    expandedUncertainty: z.number().positive('Must be above zero'),
    coverageFactor: z.number().min(1).max(4),
    /** Added to a reading (or fraction of it, when relative). */
    correction: z.number().finite(),
  })
  .refine((c) => c.calibratedOn < c.dueOn, { path: ['dueOn'], message: 'Must lie after the calibration' });
export const calibration = z.object({
  id, calibratedOn: day, dueOn: day, certificate: z.string(), laboratory: z.string(), relative: z.boolean(),
  /** SI, or a fraction when relative. */
  expandedUncertainty: z.number(), coverageFactor: z.number(), correction: z.number(), enteredBy: z.string(), enteredAt: instant,
});
export type Calibration = z.infer<typeof calibration>;

export const newInstrument = z
  .strictObject({
    name: shortText, kind: instrumentKind, maker: z.string().trim().max(120).default(''), model: z.string().trim().max(120).default(''), serial: shortText,
    location: z.string().trim().max(120).default(''),
    /** Unit in which resolution, range and absolute uncertainties are typed. */
    unit: z.string().min(1).max(12),
    resolution: z.number().nonnegative(),
    rangeLow: z.number().nullable(), rangeHigh: z.number().nullable(),
  })
  .refine((i) => i.rangeLow === null || i.rangeHigh === null || i.rangeLow < i.rangeHigh, { path: ['rangeHigh'], message: 'Must lie above the low end' });
export const changeInstrument = z.strictObject({ name: shortText, location: z.string().trim().max(120), inService: z.boolean(), version });
export const instrument = z.object({
  id, name: z.string(), kind: instrumentKind, maker: z.string(), model: z.string(), serial: z.string(), location: z.string(), unit: z.string(),
  /** In the instrument's own unit. */
  resolution: z.number(), rangeLow: z.number().nullable(), rangeHigh: z.number().nullable(),
  inService: z.boolean(), calibrations: z.array(calibration), dueOn: day.nullable(),
  calibrationState: z.enum(['in calibration', 'due soon', 'lapsed', 'never calibrated']), version,
});
export type Instrument = z.infer<typeof instrument>;
export const instrumentQuery = listQuery.extend({ kind: instrumentKind.optional() });

export const methodBody = {
  name: shortText, kind: runKind,
  /** The standard that it follows, worded as the laboratory words it: "settings after …" where the text was not at hand. */
  standard: shortText, description: longText, cautions: longText,
};
export const newMethod = z.strictObject({ code: shortText, ...methodBody });
export const newMethodVersion = z.strictObject(methodBody);
export const method = z.object({ id, code: z.string(), versionNumber: z.number().int(), name: z.string(), kind: runKind, standard: z.string(), description: z.string(), cautions: z.string(), current: z.boolean(), createdAt: instant, createdBy: z.string() });
export type Method = z.infer<typeof method>;

export const newReferencePiece = z.strictObject({
  name: shortText, quantity: z.enum(['transit time P', 'transit time S', 'E']), knownValue: z.number().positive(), knownExpandedUncertainty: z.number().positive(), unit: z.string().min(1).max(12), instrumentId: id,
});
export const newReferenceCheck = z.strictObject({ value: z.number().positive(), unit: z.string().min(1).max(12), expandedUncertainty: z.number().positive(), checkedAt: instant });
export const referenceCheck = z.object({ id, value: z.number(), expandedUncertainty: z.number(), checkedAt: instant, personName: z.string(), en: z.number(), withinLimits: z.boolean() });
export const referencePiece = z.object({
  id, name: z.string(), quantity: z.string(), knownValue: z.number(), knownExpandedUncertainty: z.number(), unit: z.string(), instrumentId: id, instrumentName: z.string(),
  checks: z.array(referenceCheck), withinLimits: z.boolean(),
});
export type ReferencePiece = z.infer<typeof referencePiece>;
