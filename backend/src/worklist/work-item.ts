import type { workItem } from '@strainwright/common/contract/worklist';
import type { z } from 'zod';

export type WorkItem = z.infer<typeof workItem>;

/** Of each kind: more than a person does in a day. */
export const MOST = 50;
