/** Records of the samples' specimens, with scale errors inside what the calibrations of their instruments state. */
import { irwinHall } from '@strainwright/common/pulse/synthetic-waveform';
import { syntheticRecord, type RecordSpec, type SyntheticRecord } from '@strainwright/common/stress-strain/synthetic-record';
import { INSTRUMENTS, SAMPLE_RUNS, type SampleRun } from './truths';

function scales(seed: number) {
  const draw = irwinHall(seed);
  const half = (instrument: (typeof INSTRUMENTS)['force']) => ((instrument.calibration?.expandedUncertainty ?? 0) / 2) * draw() * 0.7;
  return { force: 1 + half(INSTRUMENTS.force), axial: 1 + half(INSTRUMENTS.axial), transverse: 1 + half(INSTRUMENTS.transverse) };
}

export function runOf(file: string): SampleRun {
  const found = SAMPLE_RUNS.find((r) => r.files.some((f) => f.name === file));
  if (found === undefined) throw new Error(`No truth for ${file}`);
  return found;
}

export function areaOf({ shape, sizes }: SampleRun): number {
  return shape === 'cylinder' ? (Math.PI / 4) * (sizes.diameter ?? 0) ** 2 : (sizes.width ?? 0) * (sizes.thickness ?? 0);
}

function madeOf(run: SampleRun, seed: number, changes: Partial<RecordSpec>): SyntheticRecord {
  const area = areaOf(run);
  const peakStress = changes.peakStress ?? 60e6;
  return syntheticRecord({ rows: 1200, interval: 0.1, ...run.truth, area, peakStress, noise: { force: peakStress * area * 2e-5, strain: (peakStress / run.truth.E) * 1e-4 }, seed, ...changes });
}

function misread(made: SyntheticRecord, seed: number): SyntheticRecord {
  const { force, axial, transverse } = scales(seed);
  return { time: made.time, force: made.force.map((f) => f / force), axial1: made.axial1.map((e) => e / axial), axial2: made.axial2.map((e) => e / axial), transverse: made.transverse.map((e) => e / transverse) };
}

export const recordOf = (run: SampleRun, seed: number, changes: Partial<RecordSpec>): SyntheticRecord => misread(madeOf(run, seed, changes), seed);

/** Loaded and unloaded `cycles` times; the last unloading is left out. */
export function cyclesOf(run: SampleRun, seed: number, cycles: number, changes: Partial<RecordSpec>): SyntheticRecord {
  const parts = Array.from({ length: 2 * cycles - 1 }, (_, k) => {
    const part = madeOf(run, seed + k, changes);
    const turn = (values: Float64Array) => (k % 2 === 0 ? [...values] : [...values].reverse());
    return { force: turn(part.force), axial1: turn(part.axial1), axial2: turn(part.axial2), transverse: turn(part.transverse) };
  });
  const joined = (channel: 'force' | 'axial1' | 'axial2' | 'transverse') => Float64Array.from(parts.flatMap((p) => p[channel]));
  const force = joined('force');
  const interval = changes.interval ?? 0.1;
  return misread({ time: force.map((_, i) => i * interval), force, axial1: joined('axial1'), axial2: joined('axial2'), transverse: joined('transverse') }, seed);
}
