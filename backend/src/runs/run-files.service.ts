import { rm } from 'node:fs/promises';
import { join } from 'node:path';
import { Injectable } from '@nestjs/common';
import type { NewRun, RunChannels } from '@strainwright/common/contract/run-answers';
import type { Layout, LayoutProposal } from '@strainwright/common/contract/runs';
import { signatureOf } from '@strainwright/common/tabular/propose-layout';
import { and, eq } from 'drizzle-orm';
import { Database, type Queries, type Transaction } from '../database/database';
import { rememberedLayouts, runFiles } from '../database/schema/runs';
import { Clock } from '../platform/clock';
import { Compute } from '../platform/compute';
import { Config } from '../platform/config';
import { newId } from '../platform/ids';
import { invalid, invalidFields, notFound, type FieldError } from '../platform/problem';
import { Storage } from '../platform/storage/storage';
import type { ChannelsJob } from '../raw-files/channels.task';
import type { InspectJob, InspectOutcome } from '../raw-files/inspect.task';
import type { Caller } from '../session/caller';
import { filesOfRun } from './run-answer';

export interface Upload {
  readonly originalname: string;
  readonly path: string;
}

/** What is known of an uploaded file before it belongs to a run. */
export interface ReceivedFile {
  readonly row: Omit<typeof runFiles.$inferInsert, 'runId'>;
  readonly signature: string | null;
}

const LONGEST_MS = 120_000;
const isWaveform = (purpose: string) => purpose !== 'record';

/** Raw files of runs: typed by content, kept as they came, their layouts proposed and confirmed. */
@Injectable()
export class RunFilesService {
  constructor(private readonly database: Database, private readonly storage: Storage, private readonly compute: Compute, private readonly config: Config, private readonly clock: Clock) {}

  /** Inspects and stores uploads. Nothing is kept when one of them is no table. @throws Problem 422 at `files.<i>` */
  async receive(run: NewRun, uploads: readonly Upload[], by: Caller): Promise<ReceivedFile[]> {
    if (uploads.length !== run.files.length) throw invalid('files', `The run names ${run.files.length} files, ${uploads.length} came`);
    const remembered = await this.remembered(this.database.db, rememberingInstrument(run.instruments));
    const outcomes: InspectOutcome[] = [];
    for (const [i, upload] of uploads.entries()) outcomes.push(await this.inspect(upload.path, isWaveform(run.files[i]?.purpose ?? ''), remembered, run.files[i]?.layout ?? null));
    const faults = outcomes.flatMap((o, i): FieldError[] => (o.ok ? [] : [{ path: `files.${i}`, message: o.detail }]));
    const first = outcomes.find((o) => !o.ok);
    if (first !== undefined && !first.ok) throw invalidFields(faults, first.code);
    const received: ReceivedFile[] = [];
    for (const [i, upload] of uploads.entries()) {
      const outcome = outcomes[i];
      const named = run.files[i];
      if (outcome?.ok !== true || named === undefined) continue;
      const { proposal, mediaType } = outcome.inspection;
      const { sha256, size } = await this.storage.adopt(upload.path);
      const confirmed = named.layout !== undefined;
      received.push({
        signature: signatureOf(proposal.layout, proposal.firstRows),
        row: {
          id: newId(), position: i, name: upload.originalname.slice(0, 255), purpose: named.purpose, sha256, size, mediaType, layout: proposal.layout,
          layoutOrigin: confirmed ? 'confirmed' : proposal.origin, confidence: proposal.confidence, remarks: proposal.remarks, rowCount: proposal.rowCount, confirmedById: confirmed ? by.id : null,
        },
      });
    }
    return received;
  }

  async discard(uploads: readonly Upload[]): Promise<void> {
    await Promise.all(uploads.map((upload) => rm(upload.path, { force: true })));
  }

  async preview(runId: string, fileId: string): Promise<LayoutProposal> {
    const file = await this.fileOrFail(this.database.db, runId, fileId);
    const outcome = await this.inspect(await this.storage.localPath(file.sha256), isWaveform(file.purpose), new Map(), null);
    if (!outcome.ok) throw invalid('file', outcome.detail, outcome.code);
    return { ...outcome.inspection.proposal, layout: file.layout, remarks: file.remarks, confidence: file.confidence, origin: file.layoutOrigin === 'remembered' ? 'remembered' : 'proposed', rowCount: file.rowCount };
  }

  /** Checks a person's layout by reading the file with it. @throws Problem 422 at `layout` */
  async checked(runId: string, fileId: string, layout: Layout): Promise<{ file: typeof runFiles.$inferSelect; rowCount: number; signature: string | null }> {
    const file = await this.fileOrFail(this.database.db, runId, fileId);
    const outcome = await this.inspect(await this.storage.localPath(file.sha256), isWaveform(file.purpose), new Map(), layout);
    if (!outcome.ok) throw invalid('layout', outcome.detail, outcome.code);
    const { proposal } = outcome.inspection;
    return { file, rowCount: proposal.rowCount, signature: signatureOf(layout, proposal.firstRows) };
  }

  async channels(runId: string, points: number): Promise<RunChannels> {
    const files = await filesOfRun(this.database.db, runId);
    const located = await Promise.all(files.map(async ({ id, sha256, layout, purpose }) => ({ fileId: id, sha256, layout, purpose, path: await this.storage.localPath(sha256) })));
    const job: ChannelsJob = { folder: join(this.config.dataFolder, 'cache', 'columns'), points, files: located };
    return { files: await this.compute.run<RunChannels['files']>(require.resolve('../raw-files/channels.task'), job, () => undefined, LONGEST_MS) };
  }

  /** Keeps a confirmed layout for the instrument that wrote the file. */
  async remember(tx: Transaction, instrumentId: string | undefined, signature: string | null, layout: Layout, by: Caller): Promise<void> {
    if (instrumentId === undefined || signature === null) return;
    const row = { id: newId(), instrumentId, signature, layout, confirmedById: by.id, confirmedAt: this.clock.now() };
    await tx.insert(rememberedLayouts).values(row).onConflictDoUpdate({ target: [rememberedLayouts.instrumentId, rememberedLayouts.signature], set: { layout, confirmedById: by.id, confirmedAt: row.confirmedAt } });
  }

  async fileOrFail(db: Queries, runId: string, fileId: string): Promise<typeof runFiles.$inferSelect> {
    const [file] = await db.select().from(runFiles).where(and(eq(runFiles.id, fileId), eq(runFiles.runId, runId)));
    if (file === undefined) throw notFound('file');
    return file;
  }

  private async remembered(db: Queries, instrumentId: string | undefined): Promise<Map<string, Layout>> {
    if (instrumentId === undefined) return new Map();
    const rows = await db.select({ signature: rememberedLayouts.signature, layout: rememberedLayouts.layout }).from(rememberedLayouts).where(eq(rememberedLayouts.instrumentId, instrumentId));
    return new Map(rows.map((row) => [row.signature, row.layout]));
  }

  private inspect(path: string, waveform: boolean, remembered: ReadonlyMap<string, Layout>, layout: Layout | null): Promise<InspectOutcome> {
    const job: InspectJob = { path, waveform, remembered: [...remembered], layout };
    return this.compute.run<InspectOutcome>(require.resolve('../raw-files/inspect.task'), job, () => undefined, LONGEST_MS);
  }
}

/** The instrument whose software wrote the file: the frame, else what measured force or time. */
export function rememberingInstrument(named: NewRun['instruments']): string | undefined {
  return named.frame ?? named.force ?? named.time;
}
