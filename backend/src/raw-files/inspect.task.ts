import type { MessagePort } from 'node:worker_threads';
import type { Layout } from '@strainwright/common/contract/runs';
import { TabularRefused } from '@strainwright/common/tabular/tabular-refused';
import { inspectRawFile, readRawFile, type Inspection } from './raw-file';

export interface InspectJob {
  path: string;
  waveform: boolean;
  remembered: [string, Layout][];
  /** Given by a person: checked by reading the file with it. */
  layout: Layout | null;
}
export type InspectOutcome = { ok: true; inspection: Inspection } | { ok: false; code: string; detail: string };

/** Proposes a layout, or checks the one given, in a worker thread. */
export default async function runInspectTask({ job }: { job: InspectJob; progress: MessagePort }): Promise<InspectOutcome> {
  try {
    const inspection = await inspectRawFile(job.path, { waveform: job.waveform, remembered: new Map(job.remembered) });
    if (job.layout !== null) {
      const { rows } = await readRawFile(job.path, job.layout);
      return { ok: true, inspection: { ...inspection, proposal: { ...inspection.proposal, layout: job.layout, confidence: 1, remarks: [], rowCount: rows } } };
    }
    return { ok: true, inspection };
  } catch (error) {
    if (error instanceof TabularRefused) return { ok: false, code: error.code, detail: error.message };
    throw error;
  }
}
