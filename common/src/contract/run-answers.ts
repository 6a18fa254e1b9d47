/** Runs, their files and fits as the API tells and takes them. */
import { z } from 'zod';
import { filePurpose, fitSettings, layout, layoutProposal, runInstruments, runRecord } from './runs';
import { finding, fitResult } from './result';
import { fitState, runState } from './states';
import { materialClass, runKind, shape } from './vocabulary';
import { id, instant, longText, reason, version } from './wire';

export const conditions = z.strictObject({
  /** °C and %. */
  temperature: z.number().min(-80).max(1500).nullable(), humidity: z.number().min(0).max(100).nullable(), notes: longText.default(''),
});

/** The `run` part of the multipart request; `files[i]` belongs to the i-th uploaded file. */
export const newRun = z.strictObject({
  methodId: id,
  performedAt: instant,
  conditions: conditions.default({ temperature: null, humidity: null, notes: '' }),
  instruments: runInstruments.default({}),
  record: runRecord,
  files: z.array(z.strictObject({ purpose: filePurpose, layout: layout.optional() })).max(20).default([]),
});
export type NewRun = z.infer<typeof newRun>;

export const runFile = z.object({
  id, name: z.string(), purpose: filePurpose, sha256: z.string(), size: z.number().int(), mediaType: z.string(),
  layout, layoutOrigin: z.enum(['remembered', 'proposed', 'confirmed']), confidence: z.number(), remarks: z.array(z.string()),
  confirmedBy: z.string().nullable(), rowCount: z.number().int(),
});
export type RunFile = z.infer<typeof runFile>;

export const confirmLayout = z.strictObject({ layout });

export const fitSummary = z.object({
  id, runId: id, number: z.number().int(), state: fitState, progress: z.number().min(0).max(1), settings: fitSettings, adopted: z.boolean(),
  requestedBy: z.string(), createdAt: instant, finishedAt: instant.nullable(), error: z.string().nullable(), findingsWhenRefused: z.array(finding),
});
export const fit = fitSummary.extend({
  result: fitResult.nullable(),
  /** Software version and SHA-256 of everything that went in, so that anyone can do it again. */
  softwareVersion: z.string(), inputsSha256: z.string().nullable(),
});
export type Fit = z.infer<typeof fit>;
export type FitSummary = z.infer<typeof fitSummary>;
export const newFit = z.strictObject({ settings: fitSettings });
export const fitAnswer = z.object({ fit });

export const run = z.object({
  id, specimenId: id, specimenMark: z.string(), sampleMark: z.string(), orderId: id, orderNumber: z.string(), shape, materialClass,
  number: z.number().int(), kind: runKind, state: runState, voidReason: z.string().nullable(),
  method: z.object({ id, code: z.string(), versionNumber: z.number().int(), name: z.string(), standard: z.string(), cautions: z.string() }),
  performedAt: instant, performedBy: z.string(), conditions, record: runRecord,
  instruments: z.array(z.object({ role: z.enum(['time', 'force', 'axial', 'transverse', 'frame']), id, name: z.string(), calibrationState: z.enum(['in calibration', 'due soon', 'lapsed', 'never calibrated']) })),
  files: z.array(runFile), fits: z.array(fitSummary), findings: z.array(finding), version,
});
export type Run = z.infer<typeof run>;
export const voidRun = z.strictObject({ reason, version: version.optional() });

/** First rows of one file, as text. */
export const filePreview = layoutProposal;
/** Columns for a plot, thinned on the server to at most `points` per channel, extremes kept; SI. */
export const channelsQuery = z.strictObject({ points: z.coerce.number().int().min(100).max(20_000).default(4000) });
export const channelSeries = z.object({
  fileId: id, purpose: filePurpose, rowCount: z.number().int(), problems: z.array(z.object({ row: z.number().int(), message: z.string() })), problemCount: z.number().int(),
  series: z.array(z.object({ name: z.string(), channel: z.string(), unit: z.string(), values: z.array(z.number().nullable()) })),
});
export const runChannels = z.object({ files: z.array(channelSeries) });
export type RunChannels = z.infer<typeof runChannels>;
