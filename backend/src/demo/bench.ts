/** The demo's hands: each does one piece of work through the services, as a person would through the screens. */
import { randomUUID } from 'node:crypto';
import { writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { INestApplicationContext } from '@nestjs/common';
import type { Determination } from '@strainwright/common/contract/determinations';
import type { Finding } from '@strainwright/common/contract/result';
import { newRun, type Run } from '@strainwright/common/contract/run-answers';
import type { FitSettings, PulseRecord, RunInstruments, StressStrainRecord } from '@strainwright/common/contract/runs';
import type { Basis, ReadingQuantity } from '@strainwright/common/contract/vocabulary';
import { Database } from '../database/database';
import { DeterminationsService } from '../determinations/determinations.service';
import { FitsService } from '../fits/fits.service';
import { Clock } from '../platform/clock';
import { Storage } from '../platform/storage/storage';
import { readingsOf } from '../readings/reading-answer';
import { ReadingsService } from '../readings/readings.service';
import { RunsService } from '../runs/runs.service';
import type { Cast } from './people';
import type { Equipment, InstrumentKey, MethodKey } from './equipment';
import type { RawFile } from './raw-files';

/** Values of one quantity, read at stations 1, 2, … */
export interface Series {
  readonly quantity: ReadingQuantity;
  readonly instrument: InstrumentKey;
  readonly unit: string;
  readonly values: readonly number[];
}

const FIT_DEADLINE_MS = 120_000;
const LOOK_EVERY_MS = 40;

export class Bench {
  private readonly readings: ReadingsService;
  private readonly runs: RunsService;
  private readonly fits: FitsService;
  private readonly determinations: DeterminationsService;
  private readonly storage: Storage;
  readonly clock: Clock;

  constructor(readonly app: INestApplicationContext, readonly cast: Cast, readonly equipment: Equipment) {
    const find = { strict: false };
    this.readings = app.get(ReadingsService, find);
    this.runs = app.get(RunsService, find);
    this.fits = app.get(FitsService, find);
    this.determinations = app.get(DeterminationsService, find);
    this.storage = app.get(Storage);
    this.clock = app.get(Clock);
  }

  async measure(specimenId: string, series: readonly Series[]): Promise<void> {
    const typed = series.flatMap(({ quantity, instrument, unit, values }) => values.map((value, i) => ({ quantity, station: i + 1, value, unit, instrumentId: this.equipment.instruments[instrument] })));
    await this.readings.enter(specimenId, typed, undefined, this.cast.technician);
  }

  /** Records a run and confirms how its files are read. */
  async record(specimenId: string, method: MethodKey, instruments: Partial<Record<keyof RunInstruments, InstrumentKey>>, record: PulseRecord | StressStrainRecord, files: readonly RawFile[]): Promise<Run> {
    const named = Object.fromEntries(Object.entries(instruments).map(([role, key]) => [role, this.equipment.instruments[key]]));
    const body = newRun.parse({
      methodId: this.equipment.methods[method], performedAt: this.clock.now().toISOString(), conditions: { temperature: 21.5, humidity: 46, notes: '' },
      instruments: named, record, files: files.map(({ purpose }) => ({ purpose })),
    });
    const uploads = await Promise.all(files.map((file) => this.upload(file)));
    const run = await this.runs.recordRun(specimenId, body, uploads, undefined, this.cast.technician);
    for (const file of run.files) if (file.layoutOrigin === 'proposed') await this.runs.confirmLayout(run.id, file.id, file.layout, this.cast.technician);
    return run;
  }

  /** Asks for a fit, which the worker makes while the demo goes on. @returns its id */
  async ask(runId: string, settings: FitSettings): Promise<string> {
    return (await this.fits.ask(runId, settings, this.cast.analyst)).id;
  }

  /** Waits until the worker has made a fit. */
  async made(fitId: string): Promise<void> {
    const deadline = performance.now() + FIT_DEADLINE_MS;
    for (;;) {
      const fit = await this.fits.one(fitId);
      if (fit.state === 'done') return;
      if (fit.state === 'failed') throw new Error(`A fit of the demo failed: ${fit.error ?? ''}`);
      if (performance.now() > deadline) throw new Error('A fit of the demo was not done in time: does a worker run?');
      await new Promise((resolve) => setTimeout(resolve, LOOK_EVERY_MS));
    }
  }

  /** From a fit to a determination that waits for its review. */
  async submit(specimenId: string, basis: Basis, fitId: string, reasons: Readonly<Record<string, string>> = {}): Promise<Determination> {
    const { analyst } = this.cast;
    await this.made(fitId);
    await this.fits.adopt(fitId, analyst);
    const draft = await this.determinations.compose(specimenId, basis, analyst);
    const acknowledgements = draft.result.findings.filter((f) => f.severity === 'warn').map((f) => ({ code: f.code, subject: f.subject, reason: reasons[f.code] ?? judged(f) }));
    return this.determinations.submit(draft.id, { acknowledgements, comment: '' }, analyst);
  }

  accept(determinationId: string, comment = ''): Promise<Determination> {
    return this.determinations.accept(determinationId, comment, undefined, this.cast.reviewer);
  }

  sendBack(determinationId: string, reason: string): Promise<Determination> {
    return this.determinations.return(determinationId, reason, undefined, this.cast.reviewer);
  }

  async correct(specimenId: string, quantity: ReadingQuantity, value: number, unit: string, instrument: InstrumentKey, reason: string): Promise<void> {
    const all = await readingsOf(this.app.get(Database).db, specimenId);
    const wrong = all.find((r) => r.quantity === quantity && r.supersededBy === null);
    if (wrong === undefined) throw new Error(`The demo has no reading of ${quantity} to correct`);
    await this.readings.correct(wrong.id, { value, unit, instrumentId: this.equipment.instruments[instrument], reason }, this.cast.technician);
  }

  private async upload(file: RawFile): Promise<{ originalname: string; path: string }> {
    const path = join(this.storage.incoming, randomUUID());
    await writeFile(path, file.content, { mode: 0o600 });
    return { originalname: file.name, path };
  }
}

function judged(f: Finding): string {
  return `Looked at record and residuals; within what this material shows. Seen: ${f.seen}`.slice(0, 2000);
}
