import { InjectQueue } from '@nestjs/bullmq';
import { Controller, Get, Res } from '@nestjs/common';
import type { Queue } from 'bullmq';
import { sql } from 'drizzle-orm';
import type { Response } from 'express';
import { z } from 'zod';
import { Database } from '../database/database';
import { Config } from '../platform/config';
import { Answers } from '../platform/contract/from';
import { FITS_QUEUE } from '../platform/queue/queue.settings';
import { VERSION } from '../platform/version';
import { Action } from '../session/caller';

const part = z.object({ kind: z.string(), ready: z.boolean() });
const health = z.object({ status: z.enum(['ready', 'not ready']), version: z.string(), node: z.string(), database: part, queue: part });

/** A part that does not answer within this is not ready. */
const PATIENCE_MS = 2_000;

@Controller('health')
export class HealthController {
  constructor(private readonly database: Database, private readonly config: Config, @InjectQueue(FITS_QUEUE) private readonly queue: Queue) {}

  @Get()
  @Action('health.read')
  @Answers(health)
  async read(@Res({ passthrough: true }) response: Response): Promise<z.infer<typeof health>> {
    const [database, queue] = await Promise.all([answers(() => this.database.db.execute(sql`select 1`)), answers(() => this.queue.getJobCounts('waiting'))]);
    const ready = database && queue;
    response.status(ready ? 200 : 503).setHeader('Cache-Control', 'no-store');
    return {
      status: ready ? 'ready' : 'not ready', version: VERSION, node: process.versions.node,
      database: { kind: this.database.kind, ready: database },
      queue: { kind: this.config.redisUrl === undefined ? this.database.kind : 'redis', ready: queue },
    };
  }
}

async function answers(ask: () => Promise<unknown>): Promise<boolean> {
  let timer: NodeJS.Timeout | undefined;
  const tooLate = new Promise<false>((resolve) => {
    timer = setTimeout(() => resolve(false), PATIENCE_MS);
  });
  const answer = ask().then(() => true, () => false);
  try {
    return await Promise.race([answer, tooLate]);
  } finally {
    clearTimeout(timer);
  }
}
