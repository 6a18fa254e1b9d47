import type { MessagePort } from 'node:worker_threads';
import type { FitOutcome } from './fit.job';
import type { Behaviour } from './testing';

interface TestTask {
  job: { behaviour: Behaviour; fitId: string };
  progress: MessagePort;
}

/** Stands in for the computation in tests of the queue. */
export default async function runTestTask({ job, progress }: TestTask): Promise<FitOutcome> {
  progress.postMessage(0.5);
  if (job.behaviour === 'throw') throw new Error('a fault of ours');
  if (job.behaviour === 'die') process.exit(1);
  if (job.behaviour === 'wait') await new Promise((resolve) => setTimeout(resolve, 2 ** 30));
  return { state: 'failed', error: `refused ${job.fitId}`, findings: [], inputsSha256: 'f'.repeat(64) };
}
