import type { MessagePort } from 'node:worker_threads';
import type { Finding, FitResult } from '@strainwright/common/contract/result';
import type { FilePurpose, FitSettings, Layout, RunRecord } from '@strainwright/common/contract/runs';
import type { InstrumentState } from '@strainwright/common/specimens/instrument-state';
import type { ReadingState } from '@strainwright/common/specimens/measure-specimen';
import type { MaterialClass, RunKind, Shape } from '@strainwright/common/contract/vocabulary';

/** A raw file as the worker thread reads it. */
export interface FitFile {
  name: string;
  purpose: FilePurpose;
  sha256: string;
  layout: Layout;
  /** On this machine. Not part of the inputs' hash. */
  path: string;
}

/** Everything that one fit is computed from. */
export interface FitJob {
  kind: RunKind;
  settings: FitSettings;
  record: RunRecord;
  shape: Shape;
  materialClass: MaterialClass;
  /** ISO instant. */
  performedAt: string;
  readings: ReadingState[];
  /** As calibrated on the day of the run. */
  instruments: Record<'time' | 'force' | 'axial' | 'transverse', InstrumentState | null>;
  /** Found before the computation: an unconfirmed layout, a reference check out of limits. */
  findings: Finding[];
  files: FitFile[];
  /** Where parsed columns are kept. Not part of the inputs' hash. */
  cacheFolder: string;
}

/** What the worker thread is handed; it posts numbers from 0 to 1 to `progress`. */
export interface FitTask {
  job: FitJob;
  progress: MessagePort;
}

/** `failed` says that no result can be given for these inputs, and why: trying again would not help. */
export type FitOutcome =
  | { state: 'done'; result: FitResult; inputsSha256: string }
  | { state: 'failed'; error: string; findings: Finding[]; inputsSha256: string };
