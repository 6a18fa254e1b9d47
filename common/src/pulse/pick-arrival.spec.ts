import { pickArrival, type ArrivalPick, type Search } from './pick-arrival';
import { pickFindings } from './pick-findings';
import { syntheticWaveform, type WaveformSpec } from './synthetic-waveform';

const PERIOD = 1e-6;
const base: WaveformSpec = { samplingRate: 1e8, samples: 2400, arrival: 8.437e-6, frequency: 1e6, periods: 3, kind: 'damped', amplitude: 1, noise: 0.003, seed: 7 };
const first: Search = { gate: -Infinity, picker: 'AIC', dominant: false };

function pick(spec: Partial<WaveformSpec>, search: Partial<Search> = {}, change: (x: number, i: number) => number = (x) => x): ArrivalPick | null {
  const { time, amplitude } = syntheticWaveform({ ...base, ...spec });
  return pickArrival({ name: 'trace', time, amplitude: amplitude.map(change) }, { ...first, ...search });
}

/** Error in periods. */
const errorOf = (found: ArrivalPick | null, arrival = base.arrival): number => ((found?.time ?? Number.NaN) - arrival) / PERIOD;
const seeds = Array.from({ length: 40 }, (_, i) => i + 1);
const codes = (found: ArrivalPick | null) => (found === null ? [] : pickFindings('trace', found).map((f) => f.code));

describe('pickArrival', () => {
  it.each(['AIC', 'threshold'] as const)('%s: sharp onsets of signal to noise 100 and more lie within 0.1 period, wherever between the samples', (picker) => {
    for (const seed of seeds) {
      const arrival = base.arrival + seed * 1.37e-9;
      for (const noise of [0.001, 0.004]) expect(Math.abs(errorOf(pick({ noise, seed, arrival }, { picker }), arrival))).toBeLessThan(0.1);
    }
  });

  it('signal to noise 20: within half a period or marked as uncertain', () => {
    for (const seed of seeds) {
      const found = pick({ noise: 0.05, kind: 'burst', seed });
      expect(Math.abs(errorOf(found)) <= 0.5 || codes(found).includes('ARRIVAL_UNCERTAIN')).toBe(true);
    }
  });

  it('says how far picks scatter', () => {
    const found = seeds.map((seed) => pick({ noise: 0.004, seed }));
    const errors = found.map((p) => errorOf(p));
    const mean = errors.reduce((a, b) => a + b, 0) / errors.length;
    const scatter = Math.sqrt(errors.reduce((sum, e) => sum + (e - mean) ** 2, 0) / (errors.length - 1));
    const stated = found.reduce((sum, p) => sum + (p?.standardUncertainty ?? 0), 0) / found.length / PERIOD;
    expect(scatter / stated).toBeGreaterThan(0.5);
    expect(scatter / stated).toBeLessThan(1.2);
  });

  it('finds the first arrival, not the largest: a later wave five times as large changes nothing', () => {
    expect(errorOf(pick({ echo: { delay: 6.3e-6, factor: 5 } }))).toBeCloseTo(errorOf(pick({})), 1);
  });

  it('takes a pulse upside down, and one on an offset, for what it is', () => {
    expect(errorOf(pick({}, {}, (x) => -x))).toBeCloseTo(errorOf(pick({})), 9);
    expect(errorOf(pick({}, {}, (x) => x + 3))).toBeCloseTo(errorOf(pick({})), 6);
  });

  it('bears drift', () => {
    expect(Math.abs(errorOf(pick({ drift: 0.2 })))).toBeLessThan(0.1);
  });

  it('bears a record that begins a few samples before the onset', () => {
    expect(Math.abs(errorOf(pick({ arrival: 0.303e-6 }), 0.303e-6))).toBeLessThan(0.05);
  });

  it('finds S behind P and its coda once the gate is set', () => {
    for (const seed of seeds) {
      const spec = { arrival: 15.48e-6, samples: 2800, seed, precursor: { arrival: 8.475e-6, amplitude: 0.1, frequency: 1e6 } };
      expect(Math.abs(errorOf(pick(spec, { dominant: true, gate: 8.475e-6 * 1.1547 }), spec.arrival))).toBeLessThan(0.1);
    }
  });

  it('finds nothing in noise, in silence, or where the wave is there from the start', () => {
    expect(pick({ amplitude: 0 })).toBeNull();
    expect(pick({ amplitude: 0, noise: 0 })).toBeNull();
    expect(pick({ arrival: 0.03e-6 })).toBeNull();
    expect(pick({ samples: 30 })).toBeNull();
  });

  it('finds the onset in quantised silence, where the variance before it is zero', () => {
    expect(Math.abs(errorOf(pick({ noise: 0, quantisation: { bits: 10, fullScale: 1 } })))).toBeLessThan(0.05);
  });
});

describe('pickFindings', () => {
  it('has nothing to say of a clean pick', () => {
    expect(codes(pick({}))).toEqual([]);
  });

  it('tells of clipping, coarse steps and few samples', () => {
    expect(codes(pick({}, {}, (x) => Math.max(-0.2, Math.min(0.2, x))))).toContain('RECORD_CLIPPED');
    expect(codes(pick({ quantisation: { bits: 5, fullScale: 1 } }))).toContain('RECORD_COARSE');
    expect(codes(pick({ samplingRate: 8e6, samples: 300 }))).toContain('TOO_FEW_SAMPLES');
  });

  it('tells of pickers a quarter of a period apart', () => {
    const found = pick({});
    if (found === null) throw new Error('No pick');
    expect(pickFindings('trace', { ...found, pickerDifference: 0.26 * PERIOD }).map((f) => f.code)).toEqual(['PICKERS_DISAGREE']);
    expect(pickFindings('trace', { ...found, pickerDifference: -0.24 * PERIOD }).map((f) => f.code)).toEqual([]);
  });
});
