import { fitResult } from '../contract/result';
import type { Region } from '../contract/runs';
import { EvaluationRefused } from '../findings/evaluation-refused';
import type { InstrumentState } from '../specimens/instrument-state';
import { firstOrder } from '../uncertainty/first-order';
import { RandomStream } from '../uncertainty/random-stream';
import { evaluateStressStrain, fitRecord, type StressStrainInput } from './evaluate-stress-strain';

const E = 70e9;
const NU = 0.33;
const SIDE = 0.01;

const instrument = (id: string, expandedUncertainty: number, relative = true, resolution = 0): InstrumentState => ({
  id, name: id, resolution, rangeLow: null, rangeHigh: null,
  calibration: { calibratedOn: '2025-01-10', dueOn: '2026-01-09', expandedUncertainty, relative, coverageFactor: 2, correction: 0 },
});
const caliper = instrument('caliper', 2e-5, false);
const instruments = { force: instrument('load cell', 0.005), axial: instrument('extensometer', 0.005), transverse: instrument('gauge', 0.005) };

interface Change {
  readonly strains?: number[];
  readonly stressAt?: (strain: number, row: number) => number;
  readonly region?: Region;
  readonly input?: Partial<StressStrainInput>;
}

const even = (rows: number, end: number): number[] => Array.from({ length: rows }, (_, i) => (end * i) / (rows - 1));

/** A square bar pulled to a strain of 0.2 %, a little noise on the stress. */
function run({ strains = even(300, 0.002), stressAt = (v) => E * v, region = { by: 'automatic' }, input = {} }: Change = {}): StressStrainInput {
  const random = new RandomStream(11);
  const values = (of: (strain: number, row: number) => number) => Float64Array.from(strains, of);
  return {
    specimen: { shape: 'prism', materialClass: 'metal' }, performedAt: '2025-05-05T10:00:00Z', seed: 3, instruments,
    readings: (['width', 'thickness'] as const).map((quantity, i) => ({ id: `${i}`, quantity, station: 1, value: SIDE, readAt: '2025-05-05T09:00:00Z', instrument: caliper })),
    record: { kind: 'stress-strain', axialGaugeLength: 0.05, transverseGaugeLength: null, compressive: false },
    settings: { kind: 'stress-strain', region },
    channels: [
      { channel: 'force', unit: 'N', sign: 1, values: values((v, i) => (stressAt(v, i) + 5e4 * random.normal()) * SIDE ** 2) },
      { channel: 'axial1', unit: 'mm', sign: 1, values: values((v) => 50 * v) },
      { channel: 'transverse1', unit: 'µε', sign: 1, values: values((v) => -NU * v * 1e6) },
    ],
    ...input,
  };
}

function withChannel(base: StressStrainInput, channel: string, change: (values: Float64Array) => Float64Array): StressStrainInput {
  return { ...base, channels: base.channels.map((c) => (c.channel === channel ? { ...c, values: change(c.values) } : c)) };
}

const codes = (input: StressStrainInput): string[] => fitRecord(input).findings.map((f) => f.code);

function refusal(input: StressStrainInput): string {
  try {
    fitRecord(input);
  } catch (error) {
    if (error instanceof EvaluationRefused) return error.findings.map((f) => `${f.code}: ${f.action}`).join();
    throw error;
  }
  return 'not refused';
}

describe('evaluateStressStrain', () => {
  it('answers as the contract says, with E and ν measured and G and K derived', () => {
    const told: number[] = [];
    const result = evaluateStressStrain(run(), (fraction) => told.push(fraction));
    expect(fitResult.parse(result)).toEqual(result);
    const { constants, detail } = result;
    expect(Math.abs(constants.E!.value / E - 1)).toBeLessThan(1e-3);
    expect(constants.nu!.value).toBeCloseTo(NU, 3);
    expect(constants.G!.value / (constants.E!.value / (2 * (1 + constants.nu!.value))) - 1).toBeCloseTo(0, 12);
    expect(constants.K!.value / (constants.E!.value / (3 * (1 - 2 * constants.nu!.value))) - 1).toBeCloseTo(0, 12);
    expect(Object.values(constants).map((c) => c!.origin)).toEqual(['measured', 'measured', 'derived', 'derived']);
    expect(detail.kind === 'stress-strain' && detail.alternatives.length).toBeLessThanOrEqual(60);
    expect(told.length).toBeGreaterThan(1);
    expect(told.every((f, i) => f <= 1 && (i === 0 || f >= told[i - 1]!))).toBe(true);
  });

  it('fits the same record to the same bits', () => {
    const [once, again] = [fitRecord(run()), fitRecord(run())];
    expect(again.detail).toEqual(once.detail);
    expect(again.constants.E!.model.inputs).toEqual(once.constants.E!.model.inputs);
  });
});

describe('the budget', () => {
  const relativeU = (input: StressStrainInput, constant: 'E' | 'nu') => {
    const { value, standardUncertainty } = firstOrder(fitRecord(input).constants[constant]!);
    return standardUncertainty / value;
  };

  it('adds force, strain, gauge length and area to the slope', () => {
    // U = 0.5 % of force and strain (k = 2), 20 µm of each side, one caliper for both sides, ±0.1 % of the gauge length.
    const expected = Math.hypot(0.0025, 0.0025, 2 * (1e-5 / SIDE), 0.001 / Math.sqrt(3));
    const u = relativeU(run(), 'E');
    expect(u).toBeGreaterThan(expected);
    expect(u).toBeLessThan(1.03 * expected);
  });

  it('frees ν of a calibration that both strains share', () => {
    const strainUnits = run({ input: { record: { ...run().record, axialGaugeLength: null }, instruments: { ...instruments, transverse: instruments.axial } } });
    const shared = { ...strainUnits, channels: strainUnits.channels.map((c) => (c.channel === 'axial1' ? { ...c, unit: '%', values: c.values.map((v) => v * 2) } : c)) };
    expect(relativeU(shared, 'nu')).toBeLessThan(1e-4);
    expect(relativeU({ ...shared, instruments }, 'nu')).toBeCloseTo(Math.hypot(0.0025, 0.0025), 4);
  });

  it('applies the corrections of the calibrations', () => {
    const corrected = { ...instruments, force: { ...instruments.force, calibration: { ...instruments.force.calibration!, correction: 0.01 } } };
    const [plain, more] = [run(), run({ input: { instruments: corrected } })].map((i) => fitRecord(i).constants.E!.value);
    expect(more! / plain!).toBeCloseTo(1.01, 10);
  });

  it('leaves the area out where the file gives stress', () => {
    const base = run();
    const stress = { ...base, readings: [], channels: base.channels.map((c) => (c.channel === 'force' ? { ...c, channel: 'stress' as const, unit: 'Pa', values: c.values.map((v) => v / SIDE ** 2) } : c)) };
    const { constants, detail, findings } = fitRecord(stress);
    expect(Math.abs(constants.E!.value / E - 1)).toBeLessThan(1e-3);
    expect(detail.area).toBeNull();
    expect(findings.map((f) => f.code)).toContain('STRESS_FROM_FILE');
    expect(constants.E!.model.inputs.some((i) => i.key.includes('width'))).toBe(false);
  });

  it('grows with the choice of window where the record curves', () => {
    const curved = run({ stressAt: (v) => E * v * (1 - 60 * v), region: { by: 'by hand', from: 0.0002, to: 0.0018, reason: 'for the test' } });
    const choice = fitRecord(curved).constants.E!.model.inputs.find((i) => i.key === 'window.axial');
    expect(choice!.standardUncertainty / (E * SIDE ** 2)).toBeGreaterThan(0.002);
  });
});

describe('findings', () => {
  it('are none for a sound record', () => {
    // One reading of each side is the only thing to note.
    expect([...new Set(codes(run()))]).toEqual(['READINGS_FEW']);
  });

  it.each<[string, StressStrainInput]>([
    ['TOE_IN_WINDOW', run({ stressAt: (v) => (v < 8e-4 ? (E * v * v) / 1.6e-3 : E * (v - 4e-4)), region: { by: 'by hand', from: 1e-4, to: 0.0018, reason: 'for the test' } })],
    ['YIELD_IN_WINDOW', run({ stressAt: (v) => E * Math.min(v, 0.0014 + 0.3 * (v - 0.0014)), region: { by: 'by hand', from: 1e-4, to: 0.0019, reason: 'for the test' } })],
    ['RESIDUALS_TREND', run({ stressAt: (v) => E * v * (1 - 60 * v), region: { by: 'by hand', from: 1e-4, to: 0.0019, reason: 'for the test' } })],
    ['WINDOW_FEW_POINTS', run({ strains: even(60, 0.002), region: { by: 'by hand', from: 0.001, to: 0.0012, reason: 'for the test' } })],
    ['WINDOW_SHORT_RANGE', run({ region: { by: 'by hand', from: 0.001, to: 0.0012, reason: 'for the test' } })],
    ['WINDOW_BY_HAND', run({ region: { by: 'by hand', from: 0.0005, to: 0.0015, reason: 'for the test' } })],
    ['LOW_CORRELATION', run({ stressAt: (v, i) => E * v + (i % 4 < 2 ? 6e6 : -6e6) })],
    ['NO_LINEAR_REGION', run({ strains: even(300, 0.01), stressAt: (v) => 1e9 * Math.sqrt(v) })],
    ['OUTLIERS_IN_WINDOW', run({ stressAt: (v, i) => E * v + (i === 150 ? 3e7 : 0), region: { by: 'by hand', from: 1e-4, to: 0.0019, reason: 'for the test' } })],
    ['CYCLES_FOUND', run({ strains: [...even(100, 0.002), ...even(100, 0.002).reverse(), ...even(100, 0.002)] })],
    ['TRANSVERSE_MISSING', { ...run(), channels: run().channels.slice(0, 2) }],
    ['TRANSVERSE_SIGN', withChannel(run(), 'transverse1', (values) => values.map((v) => -v))],
    ['RECORD_QUANTISED', withChannel(run(), 'axial1', (values) => values.map((v) => Math.round(v / 0.005) * 0.005))],
    ['RECORD_SATURATED', withChannel(run(), 'axial1', (values) => values.map((v) => Math.min(v, 0.08)))],
    ['INSTRUMENT_MISSING', run({ input: { instruments: { ...instruments, force: null } } })],
    ['OUT_OF_CALIBRATION', run({ input: { performedAt: '2026-03-01T10:00:00Z' } })],
    ['OUTSIDE_CALIBRATED_RANGE', run({ input: { instruments: { ...instruments, force: { ...instruments.force, rangeLow: 100, rangeHigh: 5000 } } } })],
  ])('tell %s', (code, input) => {
    expect(codes(input)).toContain(code);
  });

  it('tell bending of opposed gauges', () => {
    const base = run();
    const second = { ...base.channels[1]!, channel: 'axial2' as const, values: base.channels[1]!.values.map((v) => 0.7 * v) };
    const { findings, detail } = fitRecord({ ...base, channels: [...base.channels, second] });
    expect(detail.bending).toBeCloseTo((100 * 0.3) / 1.7, 6);
    expect(findings.map((f) => f.code)).toContain('GAUGES_DISAGREE');
  });

  it('tell noisy strain, and what it would have taken from E', () => {
    const random = new RandomStream(4);
    const noisy = withChannel(run({ strains: even(2000, 0.002) }), 'axial1', (values) => values.map((v) => v + 50 * 3e-5 * random.normal()));
    const { findings, constants } = fitRecord(noisy);
    expect(findings.map((f) => f.code)).toContain('RECORD_NOISY');
    expect(Math.abs(constants.E!.value / E - 1)).toBeLessThan(0.004);
  });
});

describe('refusals', () => {
  it.each<[string, StressStrainInput]>([
    ['AREA_MISSING', run({ input: { readings: [] } })],
    ['GAUGE_LENGTH_MISSING', run({ input: { record: { ...run().record, axialGaugeLength: null } } })],
    ['RECORD_MISSING', run({ strains: [] })],
    ['STRAIN_CONSTANT', withChannel(run(), 'axial1', (values) => values.map(() => 0.1))],
    ['STRAIN_CONSTANT', withChannel(run(), 'force', (values) => values.map(() => 7))],
    ['SIGN_REVERSED', withChannel(run(), 'axial1', (values) => values.map((v) => -v))],
    ['SIGN_REVERSED', withChannel(run(), 'force', (values) => values.map((v) => -v))],
    ['WINDOW_OUTSIDE_RECORD', run({ region: { by: 'chord between strains', from: 0.0005, to: 0.0025 } })],
    ['WINDOW_OUTSIDE_RECORD', run({ region: { by: 'chord between stresses', from: 20e6, to: 400e6 } })],
    ['WINDOW_OUTSIDE_RECORD', run({ region: { by: 'by hand', from: 0.01, to: 0.02, reason: 'for the test' } })],
    ['WINDOW_OUTSIDE_RECORD', run({ region: { by: 'by hand', from: 0.001, to: 0.001, reason: 'for the test' } })],
    ['WINDOW_OUTSIDE_RECORD', run({ strains: [0, 0.001, 0.002] })],
  ])('with %s', (code, input) => {
    expect(refusal(input)).toContain(code);
  });

  it('says to turn the sign of a reversed channel', () => {
    expect(refusal(withChannel(run(), 'axial1', (values) => values.map((v) => -v)))).toMatch(/turn the sign/i);
  });
});

describe('compression', () => {
  it('gives the same constants whichever way the file counts', () => {
    const turned = ['force', 'axial1', 'transverse1'].reduce((input, channel) => withChannel(input, channel, (values) => values.map((v) => -v)), run());
    const [plain, negative] = [run(), turned].map(fitRecord);
    expect(negative!.constants.E!.value).toBe(plain!.constants.E!.value);
    expect(negative!.constants.nu!.value).toBe(plain!.constants.nu!.value);
    expect(negative!.findings.map((f) => f.code)).toContain('SIGNS_TURNED');
  });

  it('takes a window typed with the file’s negative strains', () => {
    const turned = ['force', 'axial1', 'transverse1'].reduce((input, channel) => withChannel(input, channel, (values) => values.map((v) => -v)), run({ region: { by: 'by hand', from: -0.0005, to: -0.0015, reason: 'for the test' } }));
    expect(fitRecord(turned).detail.window.strainFrom).toBeCloseTo(0.0005, 5);
  });
});
