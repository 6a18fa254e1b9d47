/** Makes samples/: seeded, so that the same files come out on every machine. Run by `npm run samples`. */
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { syntheticWaveform, irwinHall } from '@strainwright/common/pulse/synthetic-waveform';
import { syntheticRecord, type RecordSpec, type SyntheticRecord } from '@strainwright/common/stress-strain/synthetic-record';
import excel from 'exceljs';
import { INSTRUMENTS, SAMPLE_RUNS, ZERO, type SampleRun } from './truths';

const folder = join(__dirname, '..', '..', 'samples');
const LBF = 0.45359237 * 9.80665;
const PSI = LBF / 0.0254 ** 2;

/** Scale errors drawn inside what the calibrations state. */
function scales(seed: number) {
  const draw = irwinHall(seed);
  const half = (instrument: (typeof INSTRUMENTS)['force']) => ((instrument.calibration?.expandedUncertainty ?? 0) / 2) * draw() * 0.7;
  return { force: 1 + half(INSTRUMENTS.force), axial: 1 + half(INSTRUMENTS.axial), transverse: 1 + half(INSTRUMENTS.transverse) };
}

function areaOf({ shape, sizes }: SampleRun): number {
  return shape === 'cylinder' ? (Math.PI / 4) * (sizes.diameter ?? 0) ** 2 : (sizes.width ?? 0) * (sizes.thickness ?? 0);
}

function recordOf(run: SampleRun, seed: number, changes: Partial<RecordSpec>): SyntheticRecord {
  const area = areaOf(run);
  const peakStress = changes.peakStress ?? 60e6;
  const made = syntheticRecord({ rows: 1200, interval: 0.1, ...run.truth, area, peakStress, noise: { force: peakStress * area * 2e-5, strain: (peakStress / run.truth.E) * 1e-4 }, seed, ...changes });
  const { force, axial, transverse } = scales(seed);
  return { time: made.time, force: made.force.map((f) => f / force), axial1: made.axial1.map((e) => e / axial), axial2: made.axial2.map((e) => e / axial), transverse: made.transverse.map((e) => e / transverse) };
}

const runOf = (file: string): SampleRun => {
  const found = SAMPLE_RUNS.find((r) => r.files.some((f) => f.name === file));
  if (found === undefined) throw new Error(`No truth for ${file}`);
  return found;
};
const at = (values: Float64Array, i: number): number => values[i] ?? Number.NaN;
const save = (name: string, content: string | Uint8Array) => writeFileSync(join(folder, name), content);
const comma = (n: number, digits: number) => n.toFixed(digits).replace('.', ',');
const clock = (s: number) => new Date(Date.UTC(2026, 5, 1, 10, 0, 0) + s * 1000).toISOString().slice(11, 23);
const rows = (record: SyntheticRecord, line: (i: number) => string) => Array.from(record.time, (_, i) => line(i));

function stressStrain(): void {
  let r = recordOf(runOf('granite-core.csv'), 11, { peakStress: 70e6, toe: { strain: 60e-6, stress: 3e6 } });
  save('granite-core.csv', Buffer.from(['Zeit [s];Kraft [kN];Dehnung längs [µm/m];Dehnung quer [µm/m]', ...rows(r, (i) => [comma(at(r.time, i), 2), comma(-at(r.force, i) / 1e3, 4), comma(-at(r.axial1, i) * 1e6, 2), comma(-at(r.transverse, i) * 1e6, 2)].join(';'))].join('\r\n'), 'latin1'));

  r = recordOf(runOf('concrete-cylinder.tsv'), 12, { peakStress: 13e6, bending: 0.04 });
  save('concrete-cylinder.tsv', Buffer.from(`\ufeff${['Clock\tLoad\tSG1 axial\tSG2 axial\tSG3 lateral', 'hh:mm:ss\tkN\tµε\tµε\tµε', ...rows(r, (i) => [clock(at(r.time, i)), (at(r.force, i) / 1e3).toFixed(3), (at(r.axial1, i) * 1e6).toFixed(2), (at(r.axial2, i) * 1e6).toFixed(2), (at(r.transverse, i) * 1e6).toFixed(2)].join('\t'))].join('\r\n')}`, 'utf16le'));

  r = recordOf(runOf('aluminium-tension.csv'), 13, { peakStress: 160e6, knee: { stress: 130e6, curvature: 4e-9 } });
  save('aluminium-tension.csv', [...['Tensile test', 'Operator,TO', 'Specimen,AL-2', 'Rate,0.5 mm/min', 'Grip,wedge', 'Cell,50 kN', 'Extensometer,EX-2', 'Lateral,EX-5', 'Temperature,23', 'Humidity,45', 'Comment,second pull', ''], 'Time (s),Load (kN),Extension (mm),Transverse (mm)',
    ...rows(r, (i) => [at(r.time, i).toFixed(1), (at(r.force, i) / 1e3).toFixed(5), (at(r.axial1, i) * 50).toFixed(6), (at(r.transverse, i) * 12.5).toFixed(7)].join(','))].join('\n'));

  r = recordOf(runOf('nickel-tension.txt'), 14, { peakStress: 250e6, rows: 900 });
  save('nickel-tension.txt', ['Time|Load|Extension|Lateral', 's|lbf|in|in', ...rows(r, (i) => [at(r.time, i).toFixed(1), (at(r.force, i) / LBF).toFixed(3), (at(r.axial1, i) * 2).toFixed(8), (at(r.transverse, i) * 0.5).toFixed(9)].join('|'))].join('\n'));

  const glass = runOf('glass-stress.csv');
  r = recordOf(glass, 15, { peakStress: 90e6, toe: { strain: 40e-6, stress: 4e6 } });
  save('glass-stress.csv', ['Compressive stress (MPa),Axial strain (%),Transverse strain (%)', ...rows(r, (i) => [(at(r.force, i) / areaOf(glass) / 1e6).toFixed(4), (at(r.axial1, i) * 100).toFixed(6), (at(r.transverse, i) * 100).toFixed(6)].join(','))].join('\n'));

  r = recordOf(runOf('aluminium-crosshead.csv'), 16, { peakStress: 140e6, bending: 0.03 });
  save('aluminium-crosshead.csv', `\ufeff${['"Time, s","Crosshead (mm)","Force (N)","Strain 1 (µm/m)","Strain 2 (µm/m)","Lateral strain (µm/m)"', ...rows(r, (i) => [at(r.time, i).toFixed(2), (at(r.axial1, i) * 140 + at(r.force, i) * 2e-5).toFixed(5), at(r.force, i).toFixed(2), (at(r.axial1, i) * 1e6).toFixed(2), (at(r.axial2, i) * 1e6).toFixed(2), (at(r.transverse, i) * 1e6).toFixed(2)].join(','))].join('\n')}`);

  r = recordOf(runOf('concrete-repeated.txt'), 17, { peakStress: 14e6, bending: 0.05 });
  const head = ['', 'Time/s   Load/kN   Axial1/µε   Axial2/µε   Lateral/µε'];
  const lines = rows(r, (i) => [at(r.time, i).toFixed(1), (at(r.force, i) / 1e3).toFixed(4), (at(r.axial1, i) * 1e6).toFixed(2), (at(r.axial2, i) * 1e6).toFixed(2), (at(r.transverse, i) * 1e6).toFixed(2)].map((c) => c.padStart(11)).join(' '));
  save('concrete-repeated.txt', ['Compression frame 2', ...head, ...lines.slice(0, 500), ...head, ...lines.slice(500), '', 'End of test, specimen not broken'].join('\r\n'));

  const granite = runOf('granite-long.csv');
  r = recordOf(granite, 18, { peakStress: 80e6, rows: 20_000, interval: 0.005 });
  save('granite-long.csv', ['Elapsed time (s),Axial stress (ksi),Axial strain (mm/mm),Lateral strain (mm/mm)', ...rows(r, (i) => [at(r.time, i).toFixed(3), (at(r.force, i) / areaOf(granite) / PSI / 1000).toFixed(5), at(r.axial1, i).toFixed(9), at(r.transverse, i).toFixed(9)].join(','))].join('\n'));
}

async function workbook(name: string, table: readonly (readonly (string | number)[])[]): Promise<void> {
  const book = new excel.Workbook();
  book.created = new Date(Date.UTC(2026, 5, 1));
  book.modified = book.created;
  book.addWorksheet('Data').addRows(table.map((row) => [...row]));
  save(name, new Uint8Array(await book.xlsx.writeBuffer()));
}

/** Arrival of a wave through the specimen, the unit's own delay included. */
function arrivals({ truth: { E, nu }, density = 0, sizes }: SampleRun): { P: number; S: number } {
  const G = E / (2 * (1 + nu));
  const M = (E * (1 - nu)) / ((1 + nu) * (1 - 2 * nu));
  const length = sizes.length ?? 0;
  return { P: ZERO.P + length / Math.sqrt(M / density), S: ZERO.S + length / Math.sqrt(G / density) };
}

function traces(run: SampleRun, wave: 'P' | 'S', count: number, seed: number) {
  const { P, S } = arrivals(run);
  const jitter = irwinHall(seed);
  return Array.from({ length: count }, (_, k) => syntheticWaveform({
    samplingRate: 200e6, samples: 3600, arrival: (wave === 'P' ? P : S) + 2e-9 * jitter(), frequency: 2e6, periods: 3, kind: 'damped', amplitude: 0.8, noise: 0.0015, seed: seed + k + 1,
    ...(wave === 'S' ? { precursor: { arrival: P, amplitude: 0.03, frequency: 2e6 } } : {}),
  }));
}

async function pulse(): Promise<void> {
  const glass = runOf('glass-p.csv');
  for (const [name, wave, seed] of [['glass-p.csv', 'P', 100], ['glass-s.csv', 'S', 200]] as const) {
    const made = traces(glass, wave, 3, seed);
    save(name, ['Time (µs),Shot 1 (V),Shot 2 (V),Shot 3 (V)', ...Array.from({ length: 3600 }, (_, i) => [(i * 0.005).toFixed(3), ...made.map((t) => at(t.amplitude, i).toFixed(5))].join(','))].join('\n'));
  }
  const nickel = runOf('nickel-p.xlsx');
  const p = traces(nickel, 'P', 4, 300);
  await workbook('nickel-p.xlsx', [['Pulse unit PU-2, longitudinal'], ['Time', 'Ch 1', 'Ch 2', 'Ch 3', 'Ch 4'], ['µs', 'mV', 'mV', 'mV', 'mV'], ...Array.from({ length: 3600 }, (_, i) => [Number((i * 0.005).toFixed(3)), ...p.map((t) => Number((at(t.amplitude, i) * 1000).toFixed(3)))])]);
  const s = traces(nickel, 'S', 3, 400);
  save('nickel-s.txt', ['Pulse unit PU-2', 'Mode: shear', 'Gain: 32 dB', 'Averages: 64', 'Time [s];Trace 1 [V];Trace 2 [V];Trace 3 [V]', ...Array.from({ length: 3600 }, (_, i) => [(i * 5e-9).toExponential(4).replace('.', ','), ...s.map((t) => comma(at(t.amplitude, i), 6))].join(';'))].join('\n'));
}

function readme(): string {
  const table = SAMPLE_RUNS.flatMap((run) => run.files.map((f) => `| ${f.name} | ${run.title} | ${f.oddity} | ${(run.truth.E / 1e9).toFixed(1)} | ${run.truth.nu} | ${(run.truth.E / (2 * (1 + run.truth.nu)) / 1e9).toFixed(2)} | ${(run.truth.E / (3 * (1 - 2 * run.truth.nu)) / 1e9).toFixed(2)} |`));
  return ['# Samples', 'Raw files to try by hand, in the layouts that test frames and pulse units write. All are made by `npm run samples` (test/samples/generate.ts) from the', 'constants in the table; materials and machines are invented. Sizes, gauge lengths, zero times and instruments: test/samples/truths.ts. Pulse zero times, face to face: P 0.350 µs, S 0.520 µs.', '',
    '| file | what | layout | E, GPa | ν | G, GPa | K, GPa |', '|---|---|---|---|---|---|---|', ...table, ''].join('\n');
}

async function main(): Promise<void> {
  mkdirSync(folder, { recursive: true });
  stressStrain();
  const nickel = runOf('nickel-workbook.xlsx');
  const r = recordOf(nickel, 19, { peakStress: 240e6, rows: 800, bending: 0.02 });
  await workbook('nickel-workbook.xlsx', [['Tension, nickel alloy'], [], ['Time', 'Load', 'Axial 1', 'Axial 2', 'Transverse'], ['s', 'kN', 'µε', 'µε', 'µε'], ...Array.from(r.time, (t, i) => [t, at(r.force, i) / 1e3, at(r.axial1, i) * 1e6, at(r.axial2, i) * 1e6, at(r.transverse, i) * 1e6].map((v) => Number(v.toPrecision(8))))]);
  await pulse();
  save('README.md', readme());
}

void main();
