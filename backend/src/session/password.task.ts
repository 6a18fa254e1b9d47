import { compare, hash } from 'bcryptjs';

/** Makes a hash, or compares a password with one. */
export type PasswordJob = { password: string; cost: number } | { password: string; against: string };

/** bcrypt takes a quarter of a second of pure computation on purpose: in a worker thread nobody else waits for it. */
export default async function runPasswordTask({ job }: { job: PasswordJob }): Promise<string | boolean> {
  return 'against' in job ? compare(job.password, job.against) : hash(job.password, job.cost);
}
