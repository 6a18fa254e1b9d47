import { Injectable } from '@nestjs/common';
import type { Role } from '@strainwright/common/contract/vocabulary';
import { Database, type Queries } from '../database/database';
import { laboratoryToday } from '../laboratory/laboratory-day';
import { Clock } from '../platform/clock';
import type { Caller } from '../session/caller';
import { determinationsReturned, determinationsToReview, determinationsToSubmit, fitsToLookAt } from './analysis-work';
import { ordersToOpen, runsToMake, specimensMissingReadings } from './bench-work';
import { calibrationsAboutToLapse, certificatesToDraft, certificatesToRelease, checksOutOfLimits } from './quality-work';
import type { WorkItem } from './work-item';

interface Search { roles: readonly Role[]; find: (db: Queries, caller: Caller, today: string) => Promise<WorkItem[]> }

/** What waits for whom, in the order in which it is shown: one statement each. */
const SEARCHES: readonly Search[] = [
  { roles: ['analyst'], find: determinationsReturned },
  { roles: ['reviewer', 'quality manager'], find: (db, caller) => determinationsToReview(db, caller.id) },
  { roles: ['quality manager'], find: checksOutOfLimits },
  { roles: ['quality manager'], find: certificatesToRelease },
  { roles: ['quality manager'], find: certificatesToDraft },
  { roles: ['quality manager'], find: (db, _, today) => calibrationsAboutToLapse(db, today) },
  { roles: ['analyst'], find: fitsToLookAt },
  { roles: ['analyst'], find: determinationsToSubmit },
  { roles: ['technician', 'quality manager'], find: ordersToOpen },
  { roles: ['technician'], find: specimensMissingReadings },
  { roles: ['technician'], find: runsToMake },
];

@Injectable()
export class WorklistService {
  constructor(private readonly database: Database, private readonly clock: Clock) {}

  /** What waits for the caller in any of their roles. */
  async read(caller: Caller): Promise<{ items: WorkItem[] }> {
    const today = await laboratoryToday(this.database.db, this.clock);
    const items: WorkItem[] = [];
    for (const search of SEARCHES) {
      if (search.roles.some((role) => caller.roles.includes(role))) items.push(...(await search.find(this.database.db, caller, today)));
    }
    return { items };
  }
}
