/**
 * Waveforms made by another program (Python and NumPy) from the same public arithmetic: this program's generator gives the same samples,
 * and the picker finds their true arrivals. Limits (proposed with the cases): a sharp onset of signal to noise 100 and more within 0.1
 * period, 20 and more within half a period or marked as uncertain.
 */
import { arrivalsOf, shearGate } from '@strainwright/common/pulse/arrivals';
import { LEAST_CONFIDENCE } from '@strainwright/common/pulse/pick-findings';
import { pickArrival, type Picker } from '@strainwright/common/pulse/pick-arrival';
import { syntheticWaveform, type WaveformSpec } from '@strainwright/common/pulse/synthetic-waveform';
import type { Trace } from '@strainwright/common/pulse/trace';
import cases from './waveforms.json';

type Case = (typeof cases)[number];

function specOf({ spec }: Case): WaveformSpec {
  const { fs, N, t0, f, nc, kind, amp, noise, seed, drift, echo, precursor, bits, fullscale } = spec;
  return {
    samplingRate: fs, samples: N, arrival: t0, frequency: f, periods: nc, kind: kind === 'burst' ? 'burst' : 'damped', amplitude: amp, noise, seed, drift,
    echo: echo === undefined ? undefined : { delay: echo[0] ?? 0, factor: echo[1] ?? 0 },
    precursor: precursor === undefined ? undefined : { arrival: precursor[0] ?? 0, amplitude: precursor[1] ?? 0, frequency: precursor[2] ?? 0 },
    quantisation: bits === undefined || fullscale === undefined ? undefined : { bits, fullScale: fullscale },
  };
}

const traceOf = (one: Case): Trace => ({ name: one.name, ...syntheticWaveform(specOf(one)) });
const byName = (start: string): Case => {
  const found = cases.find((c) => c.name.startsWith(start));
  if (found === undefined) throw new Error(`No case ${start}`);
  return found;
};
/** Error of the pick in periods of the case's frequency. */
function errorOf(one: Case, picker: Picker): { error: number; confidence: number } {
  const { precursor } = one.spec;
  // S is sought after the gate that its P arrival sets.
  const pick = pickArrival(traceOf(one), { gate: precursor === undefined ? -Infinity : shearGate(precursor[0] ?? 0, 0, 0), picker, dominant: precursor !== undefined });
  if (pick === null) throw new Error(`Nothing found in ${one.name}`);
  return { error: (pick.time - one.true_arrival_s) * one.spec.f, confidence: pick.confidence };
}

describe.each(cases)('$name', (one) => {
  it('is reproduced sample for sample', () => {
    const { amplitude } = traceOf(one);
    one.samples_first8.forEach((sample, i) => expect(amplitude[i]).toBeCloseTo(sample, 14));
    expect(amplitude.reduce((sum, x) => sum + x, 0)).toBeCloseTo(one.sum, 9);
    expect(amplitude.reduce((sum, x) => sum + x * x, 0)).toBeCloseTo(one.sum_sq, 9);
  });
});

describe.each<Picker>(['AIC', 'threshold'])('%s', (picker) => {
  it.each(['W01', 'W03', 'W04', 'W06'])('%s, signal to noise 100 and more: within 0.1 period', (name) => {
    expect(Math.abs(errorOf(byName(name), picker).error)).toBeLessThan(0.1);
  });

  it.each(['W02', 'W05'])('%s, signal to noise 20: within half a period, and marked as uncertain', (name) => {
    const { error, confidence } = errorOf(byName(name), picker);
    expect(Math.abs(error)).toBeLessThan(0.5);
    expect(confidence).toBeLessThan(LEAST_CONFIDENCE);
  });
});

it('W04 without its gate and its P: the P wave is found, 7 µs early', () => {
  const one = byName('W04');
  const pick = pickArrival(traceOf(one), { gate: -Infinity, picker: 'AIC', dominant: false });
  expect((pick?.time ?? 0) - (one.spec.precursor?.[0] ?? 0)).toBeCloseTo(0, 6);
});

it('W05 is picked with a finding, W03 without: its eight bits are no clipping', () => {
  const codes = (name: string) => arrivalsOf([{ purpose: 'waveform P', traces: [traceOf(byName(name))] }], { purpose: 'waveform P', wave: 'P', settings: { kind: 'pulse', arrivals: [], picker: 'AIC' }, frequency: null, gate: -Infinity }).findings.map((f) => f.code);
  expect(codes('W05')).toContain('ARRIVAL_UNCERTAIN');
  expect(codes('W03')).toEqual([]);
});
