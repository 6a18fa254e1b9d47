/** Every sample file imports with the right layout proposed unasked, and its constants cover the truth of the generator. */
import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { evaluatePulse } from '@strainwright/common/pulse/evaluate-pulse';
import { toSI } from '@strainwright/common/quantities/units';
import { evaluateStressStrain } from '@strainwright/common/stress-strain/evaluate-stress-strain';
import { CONSTANTS } from '@strainwright/common/contract/vocabulary';
import type { FitResult } from '@strainwright/common/contract/result';
import { inspectRawFile, readRawFile } from '../../backend/src/raw-files/raw-file';
import { SAMPLE_FILES } from './generate';
import { INSTRUMENTS, readingsOf, SAMPLE_RUNS, type ExpectedFile, type SampleRun } from './truths';

jest.setTimeout(60_000);

const SAMPLES = join(__dirname, '..', '..', 'samples');
const pathOf = (name: string) => join(SAMPLES, name);
const FILES = SAMPLE_RUNS.flatMap((run) => run.files);
const PERFORMED_AT = '2026-06-01T10:00:00Z';

describe('the samples', () => {
  it('are at least ten, each in a layout of its own', () => {
    expect(FILES.length).toBeGreaterThanOrEqual(10);
    expect(new Set(FILES.map((f) => f.oddity)).size).toBe(FILES.length);
  });

  it('are what their generator makes, to the byte, and nothing else', async () => {
    expect(readdirSync(SAMPLES).sort()).toEqual(Object.keys(SAMPLE_FILES).sort());
    for (const [name, make] of Object.entries(SAMPLE_FILES)) expect([name, Buffer.from(await make()).equals(readFileSync(pathOf(name)))]).toEqual([name, true]);
  });
});

describe.each(FILES)('$name ($oddity)', (file: ExpectedFile) => {
  it('is proposed with its layout unasked', async () => {
    const { proposal } = await inspectRawFile(pathOf(file.name), { waveform: file.purpose !== 'record' });
    expect(proposal.layout).toMatchObject(file.layout);
    expect(proposal.layout.columns.map((c) => (c.channel === 'ignore' ? ['ignore', '', 1] : [c.channel, c.unit, c.sign]))).toEqual(file.columns);
    expect(proposal.confidence < 0.6).toBe(file.asks ?? false);
  });

  it('is read without a problem', async () => {
    const { proposal } = await inspectRawFile(pathOf(file.name), { waveform: file.purpose !== 'record' });
    const read = await readRawFile(pathOf(file.name), proposal.layout);
    expect(read.problems).toEqual([]);
    expect(read.rows).toBeGreaterThan(700);
  });
});

async function evaluate(run: SampleRun): Promise<FitResult> {
  const specimen = { shape: run.shape, materialClass: run.materialClass };
  const read = await Promise.all(run.files.map(async (file) => {
    const { proposal } = await inspectRawFile(pathOf(file.name), { waveform: file.purpose !== 'record' });
    return { file, columns: (await readRawFile(pathOf(file.name), proposal.layout)).columns };
  }));
  if (run.record.kind === 'pulse') {
    const { length = 0, width = 0, thickness = 0, diameter = 0 } = run.sizes;
    const mass = (run.density ?? 0) * length * (run.shape === 'cylinder' ? (Math.PI / 4) * diameter ** 2 : width * thickness);
    const waveforms = read.map(({ file, columns }) => {
      const time = columns.find((c) => c.mapping.channel === 'time');
      const seconds = (time?.values ?? new Float64Array(0)).map((t) => toSI(t, time?.mapping.unit ?? 's'));
      return { purpose: file.purpose, traces: columns.filter((c) => c.mapping.channel === 'trace').map((c) => ({ name: c.mapping.heading, time: seconds, amplitude: c.values })) };
    });
    return evaluatePulse({ specimen, readings: readingsOf({ ...run, sizes: { ...run.sizes, mass } }), record: run.record, settings: { kind: 'pulse', arrivals: [], picker: 'AIC' }, performedAt: PERFORMED_AT, timeInstrument: INSTRUMENTS.pulse, waveforms, seed: 7 });
  }
  const channels = (read[0]?.columns ?? []).map(({ mapping, values }) => ({ channel: mapping.channel, unit: mapping.unit, sign: mapping.sign, values }));
  return evaluateStressStrain({ specimen, readings: readingsOf(run), record: run.record, settings: { kind: 'stress-strain', region: { by: 'automatic' } }, performedAt: PERFORMED_AT, instruments: { force: INSTRUMENTS.force, axial: INSTRUMENTS.axial, transverse: INSTRUMENTS.transverse }, channels, seed: 7 });
}

describe.each([...SAMPLE_RUNS])('$title', (run: SampleRun) => {
  it('has constants that cover the truth within their expanded uncertainty, and no stop', async () => {
    const result = await evaluate(run);
    const { E, nu } = run.truth;
    const truth = { E, nu, G: E / (2 * (1 + nu)), K: E / (3 * (1 - 2 * nu)) };
    for (const name of CONSTANTS) {
      const c = result.constants[name];
      expect(c).not.toBeNull();
      expect(Math.abs((c?.value ?? 0) - truth[name])).toBeLessThanOrEqual(c?.expandedUncertainty ?? 0);
      expect((c?.expandedUncertainty ?? 0) / Math.abs(truth[name])).toBeLessThan(0.06);
    }
    expect(result.findings.filter((f) => f.severity === 'stop')).toEqual([]);
  });
});
