import type { MessagePort } from 'node:worker_threads';
import type { Finding, FitResult } from '@strainwright/common/contract/result';
import type { FilePurpose, FitSettings, Layout, RunRecord } from '@strainwright/common/contract/runs';
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
  /** What else the computation of this kind needs: readings, instruments with their calibrations, method; by name. */
  inputs: Record<string, unknown>;
  files: FitFile[];
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
