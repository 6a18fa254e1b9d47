import { fitResult } from '../contract/result';
import type { PulseRecord, PulseSettings } from '../contract/runs';
import { EvaluationRefused } from '../findings/evaluation-refused';
import type { InstrumentState } from '../specimens/instrument-state';
import type { ReadingState } from '../specimens/measure-specimen';
import { firstOrder } from '../uncertainty/first-order';
import type { Waveform } from './arrivals';
import { evaluatePulse, fitPulse, type PulseInput } from './evaluate-pulse';
import { syntheticWaveform } from './synthetic-waveform';

const DAY = '2025-06-02';
const instrument = (id: string, expandedUncertainty: number, relative: boolean, resolution: number): InstrumentState => ({
  id, name: id, resolution, rangeLow: null, rangeHigh: null, calibration: { calibratedOn: '2025-01-10', dueOn: '2026-01-09', expandedUncertainty, relative, coverageFactor: 2, correction: 0 },
});
const caliper = instrument('caliper', 2e-5, false, 1e-5);
const balance = instrument('balance', 2e-5, false, 1e-5);
const pulseUnit = instrument('pulse unit', 2e-4, true, 1e-8);

const reading = (quantity: ReadingState['quantity'], station: number, value: number, by = caliper): ReadingState => ({ id: `${quantity} ${station}`, quantity, station, value, readAt: `${DAY}T08:00:00Z`, instrument: by });
/** Glass: 60 mm long, 50 mm across, 2500 kg/m³. */
const READINGS = [
  ...[0.06, 0.06001, 0.05999].map((v, i) => reading('length', i + 1, v)), ...[0.05, 0.05001, 0.04999].map((v, i) => reading('diameter', i + 1, v)),
  reading('mass', 1, (2500 * Math.PI * 0.05 ** 2 * 0.06) / 4, balance),
];
const V = { P: 5800, S: 3430 };
const ZERO = { P: 2.1e-6, S: 2.6e-6 };
const TRANSIT = { P: 0.06 / V.P, S: 0.06 / V.S };
const SPREAD = [-1e-8, 0, 1e-8];

function input(change: { record?: Partial<PulseRecord>; settings?: Partial<PulseSettings>; run?: Partial<PulseInput> } = {}): PulseInput {
  const wave = (name: 'P' | 'S') => ({ readings: SPREAD.map((d) => TRANSIT[name] + ZERO[name] + d), zero: { by: 'face to face' as const, readings: SPREAD.map((d) => ZERO[name] + d) } });
  return {
    specimen: { shape: 'cylinder', materialClass: 'glass' }, readings: READINGS, performedAt: `${DAY}T09:00:00Z`, timeInstrument: pulseUnit, waveforms: [], seed: 3,
    record: { kind: 'pulse', frequency: 1e6, timeResolution: 1e-8, zeroDeterminedAt: `${DAY}T08:30:00Z`, P: wave('P'), S: wave('S'), ...change.record },
    settings: { kind: 'pulse', arrivals: [], picker: 'AIC', ...change.settings }, ...change.run,
  };
}

function shots(purpose: Waveform['purpose'], arrival: number, precursor: number | null = null, noise = 0.003): Waveform {
  return {
    purpose,
    traces: [1, 2, 3].map((n) => ({
      name: `shot ${n}`,
      ...syntheticWaveform({
        samplingRate: 1e8, samples: 4000, arrival: arrival + n * 1e-9, frequency: 1e6, periods: 3, kind: 'damped', amplitude: 0.9, noise, seed: 40 + n + purpose.length * 7 + (purpose.endsWith('S') ? 900 : 0),
        precursor: precursor === null ? undefined : { arrival: precursor, amplitude: 0.05, frequency: 1e6 },
      }),
    })),
  };
}
const NOTHING_TYPED = { P: { readings: [], zero: null }, S: { readings: [], zero: null } };
const WAVEFORMS = [shots('waveform P', TRANSIT.P + ZERO.P), shots('waveform S', TRANSIT.S + ZERO.S, TRANSIT.P + ZERO.S), shots('zero P', ZERO.P), shots('zero S', ZERO.S)];

const G = 2500 * V.S ** 2;
const K = 2500 * (V.P ** 2 - (4 / 3) * V.S ** 2);
const TRUTH = { E: (9 * K * G) / (3 * K + G), nu: (3 * K - 2 * G) / (6 * K + 2 * G), G, K };

const codes = (run: PulseInput): string[] => fitPulse(run).findings.map((f) => f.code);
function refusalOf(run: PulseInput): string[] {
  try {
    fitPulse(run);
  } catch (error) {
    if (error instanceof EvaluationRefused) return error.findings.map((f) => f.code);
    throw error;
  }
  return [];
}

describe('evaluatePulse', () => {
  // Many readings: with few, t distributions make the trials long.
  const ten = Array.from({ length: 10 }, (_, i) => (i - 4.5) * 2e-9);
  const wave = (name: 'P' | 'S') => ({ readings: ten.map((d) => TRANSIT[name] + ZERO[name] + d), zero: { by: 'face to face' as const, readings: ten.map((d) => ZERO[name] + d) } });
  const run = input({ record: { P: wave('P'), S: wave('S') } });
  const seen: number[] = [];
  const result = evaluatePulse(run, (fraction) => seen.push(fraction));

  it('answers in the contract’s form', () => {
    expect(fitResult.parse(result)).toEqual(result);
  });

  it('gives the constants of typed times', () => {
    for (const name of ['E', 'nu', 'G', 'K'] as const) expect(result.constants[name]!.value / TRUTH[name]).toBeCloseTo(1, 9);
    expect(result.constants.G!.origin).toBe('measured');
    expect(result.constants.E!.origin).toBe('derived');
    expect(result.findings.filter((f) => f.severity !== 'note')).toEqual([]);
  });

  it('the same inputs give the same bytes', () => {
    expect(JSON.stringify(evaluatePulse(run))).toBe(JSON.stringify(result));
  });

  it('tells of its progress up to the end, never backwards', () => {
    expect([...seen].sort((a, b) => a - b)).toEqual(seen);
    expect(seen.at(-1)).toBe(1);
  });
});

describe('fitPulse', () => {
  it('gives the constants of picked times within their uncertainty', () => {
    const { constants, detail, findings } = fitPulse(input({ record: NOTHING_TYPED, run: { waveforms: WAVEFORMS } }));
    for (const name of ['E', 'nu', 'G', 'K'] as const) expect(Math.abs(constants[name].value - TRUTH[name])).toBeLessThan(2 * firstOrder(constants[name]).standardUncertainty);
    expect(detail.picks.map((p) => `${p.wave} ${p.trace} ${p.picker}`)).toEqual(['P', 'S'].flatMap((w) => [1, 2, 3].map((n) => `${w} shot ${n} AIC`)));
    expect(findings.filter((f) => f.severity !== 'note')).toEqual([]);
  });

  it('gates S by a typed P as well', () => {
    const { detail } = fitPulse(input({ record: { S: { readings: [], zero: { by: 'face to face', readings: [ZERO.S] } } }, run: { waveforms: WAVEFORMS.filter((w) => w.purpose === 'waveform S') } }));
    expect(detail.S.velocity.value / V.S).toBeCloseTo(1, 2);
  });

  it('takes an arrival set by hand, with the uncertainty of an eye', () => {
    const time = TRANSIT.P + ZERO.P + 0.2e-6;
    const set = { wave: 'P' as const, trace: 'shot 2', time, reason: 'ringing before the onset' };
    const run = input({ record: NOTHING_TYPED, run: { waveforms: WAVEFORMS }, settings: { arrivals: [set] } });
    const { detail, findings } = fitPulse(run);
    expect(detail.picks[1]).toMatchObject({ time, picker: 'by hand' });
    expect(detail.P.readings[1]).toBe(time);
    expect(findings.map((f) => f.code)).toContain('ARRIVAL_BY_HAND');
    expect(detail.P.transitTime.standardUncertainty).toBeGreaterThan(fitPulse(input({ record: NOTHING_TYPED, run: { waveforms: WAVEFORMS } })).detail.P.transitTime.standardUncertainty);
  });

  it('sets by hand what no picker finds', () => {
    const blind = [shots('waveform P', 1, null, 0.1), ...WAVEFORMS.slice(1)];
    const run = (arrivals: PulseSettings['arrivals']) => input({ record: NOTHING_TYPED, run: { waveforms: blind }, settings: { arrivals } });
    expect(refusalOf(run([]))).toEqual(['ARRIVAL_NOT_FOUND']);
    const { detail } = fitPulse(run([1, 2, 3].map((n) => ({ wave: 'P', trace: `shot ${n}`, time: TRANSIT.P + ZERO.P, reason: 'seen after averaging' }))));
    // A tenth of a 1 µs period to either side, rectangular.
    expect(detail.P.transitTime.standardUncertainty).toBeGreaterThanOrEqual(1e-7 / Math.sqrt(3));
  });

  it('keeps the zero time’s uncertainty whole however many readings there are', () => {
    const many = Array.from({ length: 50 }, () => TRANSIT.P + ZERO.P);
    const { detail } = fitPulse(input({ record: { timeResolution: 0, P: { readings: many, zero: { by: 'face to face', readings: SPREAD.map((d) => ZERO.P + d) } } } }));
    expect(detail.P.transitTime.standardUncertainty).toBeGreaterThanOrEqual(1e-8 / Math.sqrt(3));
  });

  it('density in water leaves E its L², density by dimensions L¹', () => {
    const weighed = [...READINGS.filter((r) => r.quantity !== 'diameter'), reading('massInWater', 1, READINGS.at(-1)!.value * 0.6, balance), reading('waterTemperature', 1, 293.15, instrument('thermometer', 0.1, false, 0.1))];
    const exponent = (readings: ReadingState[]) => {
      const { constants, detail } = fitPulse(input({ run: { readings } }));
      const first = firstOrder(constants.E);
      const i = constants.E.model.inputs.findIndex((one) => one.key === 'length.resolution');
      return ((first.sensitivities[i] ?? 0) * detail.length.value) / first.value;
    };
    expect(exponent(READINGS)).toBeCloseTo(1, 9);
    expect(exponent(weighed)).toBeCloseTo(2, 9);
  });
});

describe('findings of a pulse run', () => {
  const P = input().record.P;
  const S = input().record.S;
  const times = (values: readonly number[]) => ({ ...P, readings: values.map((d) => TRANSIT.P + ZERO.P + d) });

  it.each<[string, Parameters<typeof input>[0]]>([
    ['ZERO_TIME_MISSING', { record: { S: { ...S, zero: null } } }],
    ['ZERO_TIME_OLD', { record: { zeroDeterminedAt: '2025-05-31T08:00:00Z' } }],
    ['ZERO_TIME_UNDATED', { record: { zeroDeterminedAt: null } }],
    ['ZERO_TIMES_EQUAL', { record: { S: { ...S, zero: P.zero } } }],
    ['FREQUENCY_MISSING', { record: { frequency: null } }],
    ['PATH_SHORTER_THAN_WAVELENGTH', { record: { frequency: 54e3 } }],
    ['LATERAL_SIZE_BELOW_WAVELENGTH', { record: { frequency: 54e3 } }],
    ['LATERAL_SIZE_BELOW_FIVE_WAVELENGTHS', { record: { frequency: 250e3 }, run: { specimen: { shape: 'cylinder', materialClass: 'rock' } } }],
    ['VELOCITY_OUTSIDE_CLASS', { run: { specimen: { shape: 'cylinder', materialClass: 'polymer' } } }],
    ['RECOUPLINGS_FEW', { record: { P: times([0, 1e-8]) } }],
    ['CYCLE_SKIPPED', { record: { P: times([0, 1e-8, 1e-6]) } }],
    ['TIME_OUTLIER', { record: { P: times([0, 1e-8, -1e-8, 0.5e-8, -0.5e-8, 2e-7]) } }],
    ['INSTRUMENT_MISSING', { run: { timeInstrument: null } }],
    ['OUT_OF_CALIBRATION', { run: { performedAt: '2026-02-01T09:00:00Z' } }],
    ['OUTSIDE_CALIBRATED_RANGE', { run: { timeInstrument: { ...pulseUnit, rangeHigh: 15e-6 } } }],
    ['VELOCITY_RATIO_LOW', { record: { S: { ...S, readings: SPREAD.map((d) => TRANSIT.P * 1.3 + ZERO.S + d) } } }],
    ['VELOCITY_RATIO_IMPOSSIBLE', { record: { S: { ...S, readings: SPREAD.map((d) => TRANSIT.P * 1.1 + ZERO.S + d) } } }],
  ])('%s', (code, change) => {
    expect(codes(input())).not.toContain(code);
    expect(codes(input(change))).toContain(code);
  });

  it('computes without a zero time, and stops', () => {
    const { findings } = fitPulse(input({ record: { P: { ...P, zero: null } } }));
    expect(findings.find((f) => f.code === 'ZERO_TIME_MISSING')?.severity).toBe('stop');
  });

  it('tells of rows lost from a trace', () => {
    const holed = WAVEFORMS.map((w, i) => (i > 0 ? w : { ...w, traces: w.traces.map((t) => ({ ...t, time: t.time.filter((_, k) => k < 500 || k > 510), amplitude: t.amplitude.filter((_, k) => k < 500 || k > 510) })) }));
    const { detail, findings } = fitPulse(input({ record: NOTHING_TYPED, run: { waveforms: holed } }));
    expect(findings.map((f) => f.code)).toContain('SAMPLES_MISSING');
    expect(detail.P.velocity.value / V.P).toBeCloseTo(1, 2);
  });

  it.each<[string, Parameters<typeof input>[0]]>([
    ['READINGS_MISSING', { run: { readings: READINGS.filter((r) => r.quantity !== 'mass') } }],
    ['ARRIVAL_MISSING', { record: { P: { ...P, readings: [] } } }],
    ['TRANSIT_TIME_NOT_POSITIVE', { record: { P: { ...P, zero: { by: 'face to face', readings: [30e-6] } } } }],
    ['VELOCITY_RATIO_IMPOSSIBLE', { record: { S: { ...S, readings: [TRANSIT.P * 0.9 + ZERO.S] } } }],
    ['ARRIVAL_UNKNOWN_TRACE', { settings: { arrivals: [{ wave: 'P', trace: 'shot 9', time: 1e-5, reason: 'by eye' }] } }],
    ['READING_NOT_POSITIVE', { run: { readings: READINGS.map((r) => (r.quantity === 'mass' ? { ...r, value: -r.value } : r)) } }],
  ])('refuses with %s', (code, change) => {
    expect(refusalOf(input(change))).toContain(code);
  });

  it('refuses an arrival by hand that could belong to either of two traces, and a trace of one sample', () => {
    const alike = WAVEFORMS.map((w, i) => (i > 0 ? w : { ...w, traces: w.traces.map((t) => ({ ...t, name: 'CH1' })) }));
    expect(refusalOf(input({ record: NOTHING_TYPED, run: { waveforms: alike }, settings: { arrivals: [{ wave: 'P', trace: 'CH1', time: 1e-5, reason: 'by eye' }] } }))).toEqual(['ARRIVAL_UNKNOWN_TRACE']);
    const short = WAVEFORMS.map((w, i) => (i > 0 ? w : { ...w, traces: w.traces.map((t) => ({ ...t, time: t.time.slice(0, 1), amplitude: t.amplitude.slice(0, 1) })) }));
    expect(refusalOf(input({ record: NOTHING_TYPED, run: { waveforms: short } }))).toEqual(['ARRIVAL_NOT_FOUND']);
  });

  it('refuses a trace whose time runs backwards', () => {
    const back = WAVEFORMS.map((w, i) => (i > 0 ? w : { ...w, traces: w.traces.map((t) => ({ ...t, time: t.time.map((v, k) => (k === 700 ? v - 1e-6 : v)) })) }));
    expect(refusalOf(input({ record: NOTHING_TYPED, run: { waveforms: back } }))).toEqual(['TIME_NOT_MONOTONIC']);
  });
});
