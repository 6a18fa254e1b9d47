/** Runs: what a technician records for one test, and how raw columns map to channels. */
import { z } from 'zod';
import { runKind, wave } from './vocabulary';

/** Channels of a record. Two opposed axial and two transverse sensors are allowed. */
export const CHANNELS = ['time', 'force', 'stress', 'axial1', 'axial2', 'transverse1', 'transverse2', 'trace', 'ignore'] as const;
export const channel = z.enum(CHANNELS);
export type Channel = z.infer<typeof channel>;

/**
 * How to read one raw file. A person confirms or corrects the program's proposal.
 * For a stress–strain record `axial` and `transverse` are extensions or strains, told by the unit; for waveforms there are
 * one `time` column and one or more `trace` columns.
 */
export const columnMapping = z.object({
  /** 0-based column of the table. */
  column: z.number().int().nonnegative(),
  heading: z.string(),
  channel,
  /** Unit as the file or the person states it, one of quantities/units; `` for raw trace amplitude. */
  unit: z.string(),
  /** −1 where the record's sign must be turned so that loading and the strain along it are positive. */
  sign: z.union([z.literal(1), z.literal(-1)]),
});
export type ColumnMapping = z.infer<typeof columnMapping>;

export const layout = z.object({
  format: z.enum(['delimited', 'workbook']),
  encoding: z.enum(['utf-8', 'utf-16le', 'utf-16be', 'windows-1252']),
  delimiter: z.enum([',', ';', '\t', '|', ' ']),
  decimal: z.enum(['.', ',']),
  /** Workbook sheet name; `` for delimited text. */
  sheet: z.string(),
  /** 0-based row of column headings; null when there are none. */
  headingRow: z.number().int().nonnegative().nullable(),
  /** 0-based row of units; null when they stand in the headings or are missing. */
  unitsRow: z.number().int().nonnegative().nullable(),
  firstDataRow: z.number().int().nonnegative(),
  columns: z.array(columnMapping).min(1).max(64),
});
export type Layout = z.infer<typeof layout>;

/** The program's reading of a raw file before anyone confirmed it. */
export const layoutProposal = z.object({
  layout,
  /** `remembered` when the same headings were confirmed before for this instrument. */
  origin: z.enum(['remembered', 'proposed']),
  /** 0 to 1; under 0.6 the program asks rather than proposes. */
  confidence: z.number().min(0).max(1),
  /** Plain sentences: what was recognised, what is doubtful. */
  remarks: z.array(z.string()),
  /** The first rows as text, header lines included. */
  firstRows: z.array(z.array(z.string())),
  rowCount: z.number().int().nonnegative(),
});
export type LayoutProposal = z.infer<typeof layoutProposal>;

/** How the zero time of one wave was found. Times in seconds; lengths in metres. */
export const zeroTime = z.discriminatedUnion('by', [
  z.object({ by: z.literal('face to face'), readings: z.array(z.number().finite()).min(1).max(50) }),
  z.object({
    by: z.literal('reference bar'),
    /** Measured transit times through the bar. */
    readings: z.array(z.number().finite()).min(1).max(50),
    /** Engraved (known) transit time and its standard uncertainty. */
    knownTime: z.number().positive(),
    knownTimeUncertainty: z.number().nonnegative(),
  }),
  z.object({
    by: z.literal('several lengths'),
    points: z.array(z.object({ length: z.number().positive(), time: z.number().positive() })).min(3).max(50),
  }),
]);
export type ZeroTime = z.infer<typeof zeroTime>;

/** One wave of a pulse run: times typed, or picked by the worker from waveforms (`readings` then empty). */
export const waveRecord = z.object({
  readings: z.array(z.number().positive().lt(1)).max(50),
  zero: zeroTime.nullable(),
});
export type WaveRecord = z.infer<typeof waveRecord>;

export const pulseRecord = z.object({
  kind: z.literal('pulse'),
  /** Nominal transducer frequency, Hz. */
  frequency: z.number().positive().nullable(),
  /** Resolution of the time readings, s. */
  timeResolution: z.number().nonnegative(),
  /** When the zero time was determined; null when it was not. */
  zeroDeterminedAt: z.iso.datetime().nullable(),
  P: waveRecord,
  S: waveRecord,
});
export type PulseRecord = z.infer<typeof pulseRecord>;

export const stressStrainRecord = z.object({
  kind: z.literal('stress-strain'),
  /** Original gauge length of axial and transverse sensors, m; needed when the channel is an extension. */
  axialGaugeLength: z.number().positive().nullable(),
  transverseGaugeLength: z.number().positive().nullable(),
  compressive: z.boolean(),
});
export type StressStrainRecord = z.infer<typeof stressStrainRecord>;

export const runRecord = z.discriminatedUnion('kind', [pulseRecord, stressStrainRecord]);
export type RunRecord = z.infer<typeof runRecord>;

export const FILE_PURPOSES = ['record', 'waveform P', 'waveform S', 'zero P', 'zero S'] as const;
export const filePurpose = z.enum(FILE_PURPOSES);
export type FilePurpose = z.infer<typeof filePurpose>;

/** Which instrument measured what in a run; ids of instruments. */
export const runInstruments = z.object({
  time: z.uuid().optional(),
  force: z.uuid().optional(),
  axial: z.uuid().optional(),
  transverse: z.uuid().optional(),
  frame: z.uuid().optional(),
});
export type RunInstruments = z.infer<typeof runInstruments>;

/** Settings of one fit. An analyst changes them; each change is a new fit. */
export const pulseSettings = z.object({
  kind: z.literal('pulse'),
  /** Arrivals set by hand, by file purpose and trace, s; they take the place of the picker's. */
  arrivals: z.array(z.object({ wave, trace: z.string(), time: z.number().positive(), reason: z.string().min(1).max(500) })).max(100).default([]),
  picker: z.enum(['AIC', 'threshold']).default('AIC'),
});
export type PulseSettings = z.infer<typeof pulseSettings>;

export const region = z.discriminatedUnion('by', [
  z.object({ by: z.literal('automatic') }),
  z.object({ by: z.literal('chord between strains'), from: z.number(), to: z.number() }),
  z.object({ by: z.literal('chord between stresses'), from: z.number(), to: z.number() }),
  z.object({ by: z.literal('by hand'), from: z.number(), to: z.number(), reason: z.string().min(1).max(500) }),
]);
export type Region = z.infer<typeof region>;

export const stressStrainSettings = z.object({
  kind: z.literal('stress-strain'),
  region: region.default({ by: 'automatic' }),
});
export type StressStrainSettings = z.infer<typeof stressStrainSettings>;

export const fitSettings = z.discriminatedUnion('kind', [pulseSettings, stressStrainSettings]);
export type FitSettings = z.infer<typeof fitSettings>;

export { runKind };
