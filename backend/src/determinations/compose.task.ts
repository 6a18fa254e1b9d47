import type { MessagePort } from 'node:worker_threads';
import type { ElasticResult } from '@strainwright/common/contract/result';
import type { Basis } from '@strainwright/common/contract/vocabulary';
import { composeDetermination, type AdoptedFit } from '@strainwright/common/determinations/compose';

export interface ComposeJob {
  fits: AdoptedFit[];
  basis: Basis;
  seed: number;
}

/** Composes in a worker thread: several fits are joined with trials of their own. */
export default function runComposeTask({ job }: { job: ComposeJob; progress: MessagePort }): ElasticResult {
  return composeDetermination(job.fits, job.basis, job.seed);
}
