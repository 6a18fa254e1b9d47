/** Raw files of the demo, worded as instruments word theirs; made from synthetic records of known truth. */
import { irwinHall, syntheticWaveform } from '@strainwright/common/pulse/synthetic-waveform';
import { syntheticRecord, type RecordSpec } from '@strainwright/common/stress-strain/synthetic-record';
import type { FilePurpose } from '@strainwright/common/contract/runs';

export interface RawFile {
  readonly name: string;
  readonly purpose: FilePurpose;
  readonly content: string;
}

export interface PulseShot {
  /** s from the trigger to the onset. */
  readonly arrival: number;
  /** Hz. */
  readonly frequency: number;
  readonly samplingRate: number;
  readonly samples: number;
  readonly seed: number;
}

const TRACES = 6;
/** Each coupling shifts the onset a little: standard deviation, as a share of a period. */
const RECOUPLING = 0.003;

/** A waveform file: six traces, coupled anew for each. */
export function waveformFile(name: string, purpose: FilePurpose, shot: PulseShot): RawFile {
  const shift = irwinHall(shot.seed);
  const traces = Array.from({ length: TRACES }, (_, i) => syntheticWaveform({
    ...shot, arrival: shot.arrival + (RECOUPLING * shift()) / shot.frequency, periods: 4, kind: 'damped', amplitude: 0.8, noise: 0.002, seed: shot.seed + 101 * (i + 1), quantisation: { bits: 12, fullScale: 1 },
  }));
  const head = ['Pulse capture', `Shot,${purpose}`, ['Time (µs)', ...traces.map((_, i) => `Trace ${i + 1} (V)`)].join(',')];
  const rows = Array.from(traces[0]?.time ?? [], (t, row) => [(t * 1e6).toFixed(3), ...traces.map((trace) => (trace.amplitude[row] ?? 0).toFixed(5))].join(','));
  return { name, purpose, content: `${[...head, ...rows].join('\n')}\n` };
}

/** Load in kN and strain in µε of two opposed gauges and a transverse one, with a comma for the decimal mark. */
export function gaugeRecordFile(name: string, spec: RecordSpec): RawFile {
  const r = syntheticRecord(spec);
  const number = (x: number, digits: number) => x.toFixed(digits).replace('.', ',');
  const head = ['Compression test', `Rows;${spec.rows}`, 'Time;Force;Strain 1;Strain 2;Transverse strain', 's;kN;µε;µε;µε'];
  const rows = Array.from(r.time, (t, i) => [number(t, 2), number((r.force[i] ?? 0) / 1e3, 4), number((r.axial1[i] ?? 0) * 1e6, 2), number((r.axial2[i] ?? 0) * 1e6, 2), number((r.transverse[i] ?? 0) * 1e6, 2)].join(';'));
  return { name, purpose: 'record', content: `${[...head, ...rows].join('\r\n')}\r\n` };
}

/** Load in N, axial extension in mm over a gauge length, transverse strain in µε, separated by tabs. */
export function extensometerRecordFile(name: string, spec: RecordSpec, gaugeLength: number): RawFile {
  const r = syntheticRecord(spec);
  const head = ['Time (s)\tLoad (N)\tExtension (mm)\tTransverse strain (µε)'];
  const rows = Array.from(r.time, (t, i) => [t.toFixed(2), (r.force[i] ?? 0).toFixed(2), ((r.axial1[i] ?? 0) * gaugeLength * 1e3).toFixed(6), ((r.transverse[i] ?? 0) * 1e6).toFixed(3)].join('\t'));
  return { name, purpose: 'record', content: `${[...head, ...rows].join('\n')}\n` };
}
