/** Samples of pulse waveforms, each in the layout of another unit. */
import { irwinHall, syntheticWaveform } from '@strainwright/common/pulse/synthetic-waveform';
import { runOf } from './made-records';
import type { Content } from './stress-strain-files';
import { ZERO, type SampleRun } from './truths';
import { at, comma, workbook } from './writing';

interface Unit {
  readonly samplingRate: number;
  readonly samples: number;
  /** Hz. */
  readonly frequency: number;
  /** Standard deviation of the coupling's delay, s. */
  readonly recoupling: number;
}

const FAST: Unit = { samplingRate: 200e6, samples: 3600, frequency: 2e6, recoupling: 2e-9 };
const SLOW: Unit = { samplingRate: 20e6, samples: 4000, frequency: 150e3, recoupling: 30e-9 };

/** Arrival of a wave through the specimen, the unit's own delay included. */
function arrivals({ truth: { E, nu }, density = 0, sizes }: SampleRun): { P: number; S: number } {
  const G = E / (2 * (1 + nu));
  const M = (E * (1 - nu)) / ((1 + nu) * (1 - 2 * nu));
  const length = sizes.length ?? 0;
  return { P: ZERO.P + length / Math.sqrt(M / density), S: ZERO.S + length / Math.sqrt(G / density) };
}

function traces(run: SampleRun, wave: 'P' | 'S', count: number, seed: number, { recoupling, ...unit }: Unit) {
  const { P, S } = arrivals(run);
  const jitter = irwinHall(seed);
  return Array.from({ length: count }, (_, k) => syntheticWaveform({
    ...unit, arrival: (wave === 'P' ? P : S) + recoupling * jitter(), periods: 3, kind: 'damped', amplitude: 0.8, noise: 0.0015, seed: seed + k + 1,
    ...(wave === 'S' ? { precursor: { arrival: P, amplitude: 0.03, frequency: unit.frequency } } : {}),
  }));
}

function glass(wave: 'P' | 'S', seed: number): Content {
  const made = traces(runOf('glass-p.csv'), wave, 3, seed, FAST);
  return ['Time (µs),Shot 1 (V),Shot 2 (V),Shot 3 (V)', ...Array.from({ length: FAST.samples }, (_, i) => [(i * 0.005).toFixed(3), ...made.map((t) => at(t.amplitude, i).toFixed(5))].join(','))].join('\n');
}

function nickelP(): Content {
  const made = traces(runOf('nickel-p.xlsx'), 'P', 4, 300, FAST);
  return workbook({ Data: [['Pulse unit PU-2, longitudinal'], ['Time', 'Ch 1', 'Ch 2', 'Ch 3', 'Ch 4'], ['µs', 'mV', 'mV', 'mV', 'mV'], ...Array.from({ length: FAST.samples }, (_, i) => [Number((i * 0.005).toFixed(3)), ...made.map((t) => Number((at(t.amplitude, i) * 1000).toFixed(3)))])] });
}

function nickelS(): Content {
  const made = traces(runOf('nickel-s.txt'), 'S', 3, 400, FAST);
  return ['Pulse unit PU-2', 'Mode: shear', 'Gain: 32 dB', 'Averages: 64', 'Time [s];Trace 1 [V];Trace 2 [V];Trace 3 [V]', ...Array.from({ length: FAST.samples }, (_, i) => [(i * 5e-9).toExponential(4).replace('.', ','), ...made.map((t) => comma(at(t.amplitude, i), 6))].join(';'))].join('\n');
}

function concreteScopeP(): Content {
  const [made] = traces(runOf('concrete-scope-p.csv'), 'P', 1, 500, SLOW);
  const settings = ['Record Length,4000,points', 'Sample Interval,5.0E-08,s', 'Vertical Units,V,', 'Vertical Scale,0.2,', 'Probe,10,', 'Averages,256,'];
  return Array.from(made?.amplitude ?? [], (v, i) => `${settings[i] ?? ',,'},${(i / SLOW.samplingRate).toExponential(7)},${v.toFixed(5)}`).join('\r\n');
}

function concreteScopeS(): Content {
  const made = traces(runOf('concrete-scope-s.tsv'), 'S', 2, 600, SLOW);
  const head = ['Unité à impulsions', 'Nr\tTime (ms)\tCoupling 1 (mV)\tCoupling 2 (mV)'];
  return Buffer.from([...head, ...Array.from({ length: SLOW.samples }, (_, i) => [i + 1, comma((i / SLOW.samplingRate) * 1e3, 5), ...made.map((t) => comma(at(t.amplitude, i) * 1000, 2))].join('\t'))].join('\r'), 'latin1');
}

export const PULSE_FILES: Readonly<Record<string, () => Content>> = {
  'glass-p.csv': () => glass('P', 100), 'glass-s.csv': () => glass('S', 200), 'nickel-p.xlsx': nickelP, 'nickel-s.txt': nickelS, 'concrete-scope-p.csv': concreteScopeP, 'concrete-scope-s.tsv': concreteScopeS,
};
