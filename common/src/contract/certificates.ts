/** Certificates: the canonical snapshot, its issues, and public verification. */
import { z } from 'zod';
import { decisionRule } from './orders';
import { elasticResult, quantity } from './result';
import { certificateState } from './states';
import { basis, constantName, materialClass, runKind, shape } from './vocabulary';
import { day, id, instant, listQuery, longText, reason, version } from './wire';

export const draftCertificate = z.strictObject({
  determinationIds: z.array(id).min(1, 'Choose at least one accepted determination').max(200),
  /** Additions to, deviations or exclusions from the methods; opinions are not given here. */
  deviations: longText.default(''),
});
export const releaseCertificate = z.strictObject({ password: z.string().min(1, 'Type your password again').max(200), version: version.optional() });
export const amendCertificate = z.strictObject({ reason, determinationIds: z.array(id).min(1).max(200).optional(), deviations: longText.optional() });
export const withdrawCertificate = z.strictObject({ reason, version: version.optional() });

export const conformityStatement = z.object({
  specimenMark: z.string(), basis, constant: constantName, lower: z.number().nullable(), upper: z.number().nullable(), rule: decisionRule,
  conforms: z.boolean(), probability: z.number(), statement: z.string(),
});

const certificateMethod = z.object({ code: z.string(), versionNumber: z.number().int(), name: z.string(), standard: z.string(), kind: runKind });

/** The one content of PDF, XLSX and JSON; its RFC 8785 form is what is hashed and signed. */
export const certificateSnapshot = z.object({
  schema: z.literal('strainwright-certificate-1'),
  number: z.string(), issue: z.number().int().positive(),
  /** Of the issue that this one replaces. */
  replaces: z.object({ number: z.string(), issue: z.number().int(), releasedAt: instant, reason: z.string() }).nullable(),
  title: z.string(),
  /** Days and times are printed in its time zone. */
  laboratory: z.object({ name: z.string(), address: z.string(), timeZone: z.string(), separationOfDuties: z.boolean() }),
  customer: z.object({ name: z.string(), address: z.string() }),
  order: z.object({ number: z.string(), customerReference: z.string(), materialDescription: z.string() }),
  issuedAt: instant,
  releasedBy: z.string(),
  specimens: z.array(z.object({
    mark: z.string(), sampleMark: z.string(), material: z.string(), materialClass, shape, orientation: z.string(), moisture: z.string(), condition: z.string(),
    receivedOn: day, sampledOn: day.nullable(), sampledBy: z.string(),
    dimensions: z.array(z.object({ quantity: z.string(), mean: z.number(), standardUncertainty: z.number(), n: z.number().int(), unit: z.string() })),
    density: quantity.nullable(),
  })),
  results: z.array(z.object({
    specimenMark: z.string(), basis, result: elasticResult,
    /** Of its first run. */
    method: certificateMethod,
    runs: z.array(z.object({
      number: z.number().int(), kind: runKind, methodCode: z.string(), methodVersion: z.number().int(), performedAt: instant, performedBy: z.string(), temperature: z.number().nullable(), humidity: z.number().nullable(), notes: z.string(),
      settings: z.string(), softwareVersion: z.string(),
      files: z.array(z.object({ name: z.string(), sha256: z.string(), size: z.number().int() })),
    })),
    analysedBy: z.string(), reviewedBy: z.string(), reviewedAt: instant,
    acknowledgements: z.array(z.object({ code: z.string(), subject: z.string(), reason: z.string() })),
  })),
  /** Every method version that a run followed, once. */
  methods: z.array(certificateMethod),
  instruments: z.array(z.object({ name: z.string(), kind: z.string(), serial: z.string(), certificate: z.string(), calibratedOn: day.nullable(), dueOn: day.nullable(), inCalibration: z.boolean() })),
  conformity: z.array(conformityStatement),
  deviations: z.string(),
  /** Cautions and statements that stand on every certificate. */
  statements: z.array(z.string()),
  verification: z.object({ url: z.string(), code: z.string() }),
});
export type CertificateSnapshot = z.infer<typeof certificateSnapshot>;

/** certificate.json: the snapshot with its digest and signature. */
export const certificateDocument = z.object({
  snapshot: certificateSnapshot,
  sha256: z.string(),
  signature: z.object({ algorithm: z.literal('Ed25519'), keyId: z.string(), publicKey: z.string(), value: z.string() }),
});
export type CertificateDocument = z.infer<typeof certificateDocument>;

export const certificateSummary = z.object({
  id, number: z.string(), issue: z.number().int(), state: certificateState, orderId: id, orderNumber: z.string(), customerName: z.string(),
  draftedBy: z.string(), releasedBy: z.string().nullable(), releasedAt: instant.nullable(), reason: z.string().nullable(), version,
});
export type CertificateSummary = z.infer<typeof certificateSummary>;
export const certificate = certificateSummary.extend({
  determinationIds: z.array(id), snapshot: certificateSnapshot, sha256: z.string().nullable(), signature: z.string().nullable(), code: z.string().nullable(),
  issues: z.array(certificateSummary), separation: z.string().nullable(),
});
export type Certificate = z.infer<typeof certificate>;
export const certificateQuery = listQuery.extend({ orderId: id.optional() });

export const verification = z.object({
  verdict: z.enum(['genuine and current', 'genuine but superseded', 'genuine but withdrawn', 'not ours']),
  number: z.string().nullable(), issue: z.number().int().nullable(), releasedAt: instant.nullable(), laboratory: z.string().nullable(),
  sha256: z.string().nullable(),
  /** The issue that replaced it, or the reason of withdrawal. */
  replacedBy: z.object({ number: z.string(), issue: z.number().int(), releasedAt: instant }).nullable(),
  withdrawal: z.object({ at: instant, reason: z.string() }).nullable(),
  explanation: z.string(),
});
export type Verification = z.infer<typeof verification>;
/** Each issue has its own code; `issue` only narrows. */
export const verifyQuery = z.strictObject({ code: z.string().min(1, 'Type the code').max(40), issue: z.coerce.number().int().positive().optional() });
