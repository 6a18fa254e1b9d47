import { Injectable, OnApplicationBootstrap } from '@nestjs/common';
import type { changeLaboratory, Laboratory } from '@strainwright/common/contract/people';
import { and, eq } from 'drizzle-orm';
import type { z } from 'zod';
import { Database, type Queries } from '../database/database';
import { laboratory } from '../database/schema/people';
import { Config } from '../platform/config';
import { invalid, notFound, stale } from '../platform/problem';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';

/** The laboratory itself: its name and address as certificates carry them, its time zone, and whether its duties are separated. */
@Injectable()
export class LaboratoryService implements OnApplicationBootstrap {
  constructor(private readonly database: Database, private readonly config: Config, private readonly record: RecordService) {}

  /** The one row is made with the database's first start. */
  async onApplicationBootstrap(): Promise<void> {
    await this.database.db.insert(laboratory).values({ id: 1, name: 'Your laboratory', address: 'Set the address under People', timeZone: this.config.timeZone }).onConflictDoNothing();
  }

  async read(queries: Queries = this.database.db): Promise<Laboratory> {
    const [row] = await queries.select().from(laboratory).where(eq(laboratory.id, 1));
    if (row === undefined) throw notFound('laboratory');
    const { name, address, timeZone, separationOfDuties, version } = row;
    return { name, address, timeZone, separationOfDuties, version };
  }

  async change(me: Caller, input: z.infer<typeof changeLaboratory>): Promise<Laboratory> {
    if (!isTimeZone(input.timeZone)) throw invalid('timeZone', 'Not a time zone: write it like Europe/London');
    return this.database.transaction(async (tx) => {
      const before = await this.read(tx);
      const { version, ...wanted } = input;
      const changed = await tx.update(laboratory).set({ ...wanted, version: version + 1 }).where(and(eq(laboratory.id, 1), eq(laboratory.version, version))).returning({ version: laboratory.version });
      if (changed.length === 0) throw stale('laboratory', { ...before });
      await this.record.append(tx, { action: 'laboratory.changed', noun: 'laboratory', nounId: '1', person: me, details: wanted });
      if (before.separationOfDuties !== wanted.separationOfDuties) {
        await this.record.append(tx, { action: wanted.separationOfDuties ? 'laboratory.separation-on' : 'laboratory.separation-off', noun: 'laboratory', nounId: '1', person: me });
      }
      return this.read(tx);
    });
  }
}

function isTimeZone(name: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: name });
    return true;
  } catch {
    return false;
  }
}
