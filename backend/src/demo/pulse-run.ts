/** A pulse run of the demo: waveforms of both waves, zero times picked face to face. */
import type { PulseRecord } from '@strainwright/common/contract/runs';
import { waveformFile, type RawFile } from './raw-files';
import { velocities, type Truth } from './truths';

/** Delay of transducers, couplant and electronics, s. */
const DELAY = { P: 0.62e-6, S: 1.05e-6 } as const;

export interface Shooting {
  readonly truth: Truth;
  /** True path, m. */
  readonly length: number;
  readonly frequency: number;
  readonly samplingRate: number;
  readonly seed: number;
}

/** Files of one run: the waveforms through the specimen and face to face. */
export function pulseFiles(name: string, { truth, length, frequency, samplingRate, seed }: Shooting): RawFile[] {
  const v = velocities(truth);
  const window = (arrival: number) => Math.ceil((arrival + 12 / frequency) * samplingRate);
  const file = (purpose: 'waveform P' | 'waveform S' | 'zero P' | 'zero S', arrival: number, i: number) =>
    waveformFile(`${name}-${purpose.replace(' ', '-').toLowerCase()}.csv`, purpose, { arrival, frequency, samplingRate, samples: window(arrival), seed: seed + 1000 * i });
  return [
    file('waveform P', length / v.P + DELAY.P, 1), file('waveform S', length / v.S + DELAY.S, 2),
    file('zero P', DELAY.P, 3), file('zero S', DELAY.S, 4),
  ];
}


export function pulseRecord(frequency: number, performedAt: Date): PulseRecord {
  return { kind: 'pulse', frequency, timeResolution: 1e-8, zeroDeterminedAt: performedAt.toISOString(), P: { readings: [], zero: null }, S: { readings: [], zero: null } };
}
