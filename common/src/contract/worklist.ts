/** What waits for a person now, by role. */
import { z } from 'zod';
import { day, id, instant } from './wire';

export const WORK_KINDS = ['order to open', 'specimen missing readings', 'run to make', 'fit to look at', 'determination returned', 'determination to submit', 'determination to review', 'certificate to draft', 'certificate to release', 'calibration about to lapse', 'check out of limits'] as const;
export const workItem = z.object({
  kind: z.enum(WORK_KINDS), id, label: z.string(), detail: z.string(), path: z.string(), since: instant.nullable(), dueOn: day.nullable(),
});
export type WorkItem = z.infer<typeof workItem>;
export const worklist = z.object({ items: z.array(workItem) });
