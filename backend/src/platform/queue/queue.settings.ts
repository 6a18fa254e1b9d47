import type { JobsOptions } from 'bullmq';

/** Fits take seconds: a worker that was killed is noticed within about this long (lock + check). */
export const WORKER_TIMING = { lockDuration: 5_000, stalledInterval: 3_000, maxStalledCount: 3 } as const;

/** How often a job is tried before it is given up as poisoned. Finished jobs stay known for a while, so that a second delivery finds them. */
export const JOB_OPTIONS: JobsOptions = {
  attempts: 3,
  backoff: { type: 'exponential', delay: 500 },
  removeOnComplete: { age: 7 * 86_400 },
  removeOnFail: { age: 30 * 86_400 },
};

export const FITS_QUEUE = 'fits';
