import type { FitResult } from '@strainwright/common/contract/result';
import { EvaluationRefused } from '@strainwright/common/findings/evaluation-refused';
import { finding } from '@strainwright/common/findings/findings';
import { evaluatePulse } from '@strainwright/common/pulse/evaluate-pulse';
import type { Waveform } from '@strainwright/common/pulse/arrivals';
import { toSI } from '@strainwright/common/quantities/units';
import { evaluateStressStrain } from '@strainwright/common/stress-strain/evaluate-stress-strain';
import { TabularRefused } from '@strainwright/common/tabular/tabular-refused';
import type { ReadColumns } from '@strainwright/common/tabular/read-columns';
import { canonicalJson, sha256 } from '../platform/canonical';
import { VERSION } from '../platform/version';
import { columnsOf } from '../raw-files/column-cache';
import type { FitFile, FitJob, FitOutcome, FitTask } from './fit.job';

/** SHA-256 of everything that the result depends on; the raw files by their own. */
function hashOf(job: FitJob): string {
  const { files, cacheFolder: _cache, ...inputs } = job;
  return sha256(canonicalJson({ ...inputs, files: files.map(({ path: _path, ...file }) => file), version: VERSION }));
}

function waveformOf(file: FitFile, read: ReadColumns): Waveform {
  const clock = read.columns.find((c) => c.mapping.channel === 'time');
  if (clock === undefined) throw new EvaluationRefused([finding('CHANNEL_MISSING', file.name, `${file.name} has no time column`)]);
  const { unit } = clock.mapping;
  const time = clock.values.map((t) => toSI(t, unit));
  const traces = read.columns.filter((c) => c.mapping.channel === 'trace').map((c) => ({ name: c.mapping.heading || `column ${c.mapping.column + 1}`, time, amplitude: c.values }));
  return { purpose: file.purpose, traces };
}

/** @throws TabularRefused when what could be read is the lesser part: it may be one end of the record only */
function readable(file: FitFile, columns: ReadColumns): ReadColumns {
  const [first] = columns.problems;
  if (first !== undefined && columns.problemCount > columns.rows) throw new TabularRefused('rows-unreadable', `${file.name}, row ${first.row}: ${first.message}.`);
  return columns;
}

async function evaluate(job: FitJob, seed: number, progress: (fraction: number) => void): Promise<FitResult> {
  const { shape, materialClass, readings, performedAt, instruments, record, settings, findings } = job;
  const read: { file: FitFile; columns: ReadColumns }[] = [];
  for (const file of job.files) read.push({ file, columns: readable(file, await columnsOf(job.cacheFolder, file, (fraction) => progress(0.4 * fraction))) });
  const specimen = { shape, materialClass };
  const later = (fraction: number) => progress(0.4 + 0.6 * fraction);
  const skipped = read.filter((r) => r.columns.problemCount > 0).map(({ file, columns }) =>
    finding('ROWS_SKIPPED', file.name, `${columns.problemCount} rows of ${file.name} left out; row ${columns.problems[0]?.row ?? 0}: ${columns.problems[0]?.message ?? ''}`));
  let result: FitResult;
  if (record.kind === 'pulse' && settings.kind === 'pulse') {
    result = evaluatePulse({ specimen, readings, record, settings, performedAt, timeInstrument: instruments.time, waveforms: read.map(({ file, columns }) => waveformOf(file, columns)), seed }, later);
  } else if (record.kind === 'stress-strain' && settings.kind === 'stress-strain') {
    const source = read.find((r) => r.file.purpose === 'record');
    if (source === undefined) throw new EvaluationRefused([finding('RECORD_MISSING', 'record', 'The run has no record')]);
    const channels = source.columns.columns.map(({ mapping, values }) => ({ channel: mapping.channel, unit: mapping.unit, sign: mapping.sign, values }));
    result = evaluateStressStrain({ specimen, readings, record, settings, performedAt, instruments, channels, seed }, later);
  } else throw new Error('Settings and record are of different kinds');
  return { ...result, findings: [...findings, ...skipped, ...result.findings] };
}

/** Computes one fit in a worker thread. The seed of the trials comes from the inputs: the same inputs give the same bytes. */
export default async function runFitTask({ job, progress }: FitTask): Promise<FitOutcome> {
  const inputsSha256 = hashOf(job);
  try {
    const result = await evaluate(job, Number.parseInt(inputsSha256.slice(0, 8), 16) | 0, (fraction) => progress.postMessage(fraction));
    return { state: 'done', result, inputsSha256 };
  } catch (error) {
    if (error instanceof EvaluationRefused) return { state: 'failed', error: error.message, findings: [...error.findings], inputsSha256 };
    if (error instanceof TabularRefused) return { state: 'failed', error: error.message, findings: [], inputsSha256 };
    throw error;
  }
}
