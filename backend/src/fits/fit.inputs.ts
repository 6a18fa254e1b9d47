import { join } from 'node:path';
import { Injectable } from '@nestjs/common';
import type { Finding } from '@strainwright/common/contract/result';
import { finding } from '@strainwright/common/findings/findings';
import { asc, eq } from 'drizzle-orm';
import { Database } from '../database/database';
import { samples, specimens } from '../database/schema/orders';
import { fits, runFiles, runs } from '../database/schema/runs';
import { instrumentStates } from '../instruments/instrument-state';
import { dayIn, timeZoneOf } from '../laboratory/laboratory-day';
import { Config } from '../platform/config';
import { Storage } from '../platform/storage/storage';
import { readingStatesOf } from '../readings/measurement';
import { referenceCheckFindings } from '../reference-checks/reference-check-findings';
import type { FitFile, FitJob } from './fit.job';

type FileRow = typeof runFiles.$inferSelect;

/** Gathers everything that one fit is computed from. */
@Injectable()
export class FitInputs {
  constructor(private readonly database: Database, private readonly storage: Storage, private readonly config: Config) {}

  async load(fitId: string): Promise<FitJob> {
    const db = this.database.db;
    const [row] = await db.select({ settings: fits.settings, run: runs, shape: specimens.shape, materialClass: samples.materialClass })
      .from(fits).innerJoin(runs, eq(runs.id, fits.runId)).innerJoin(specimens, eq(specimens.id, runs.specimenId)).innerJoin(samples, eq(samples.id, specimens.sampleId)).where(eq(fits.id, fitId));
    if (row === undefined) throw new Error(`There is no fit ${fitId}`);
    const { run, settings, shape, materialClass } = row;
    const files = await db.select().from(runFiles).where(eq(runFiles.runId, run.id)).orderBy(asc(runFiles.position));
    const on = dayIn(await timeZoneOf(db))(run.performedAt);
    const named = Object.values(run.instruments).filter((id) => id !== undefined);
    const states = await instrumentStates(db, named, on);
    const instrument = (id: string | undefined) => (id === undefined ? null : (states.get(id) ?? null));
    return {
      kind: run.kind, settings, record: run.record, shape, materialClass, performedAt: run.performedAt.toISOString(),
      readings: await readingStatesOf(db, run.specimenId),
      instruments: { time: instrument(run.instruments.time), force: instrument(run.instruments.force), axial: instrument(run.instruments.axial), transverse: instrument(run.instruments.transverse) },
      findings: [...layoutFindings(files), ...(await referenceCheckFindings(db, named, run.performedAt))],
      files: await Promise.all(files.map((file) => this.located(file))),
      cacheFolder: join(this.config.dataFolder, 'cache', 'columns'),
    };
  }

  private async located({ name, purpose, sha256, layout }: FileRow): Promise<FitFile> {
    return { name, purpose, sha256, layout, path: await this.storage.localPath(sha256) };
  }
}

/** Layouts that nobody has confirmed. */
export function layoutFindings(files: readonly Pick<FileRow, 'name' | 'layoutOrigin' | 'confidence'>[]): Finding[] {
  return files.filter((f) => f.layoutOrigin === 'proposed').map((f) => finding('LAYOUT_NOT_CONFIRMED', f.name, `${f.name}: layout proposed with confidence ${(100 * f.confidence).toFixed(0)} %, confirmed by nobody`));
}
