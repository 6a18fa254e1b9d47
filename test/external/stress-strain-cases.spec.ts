/**
 * Stress–strain cases whose answers are known from outside: O… computed in 40-digit arithmetic for this project, P… printed in a textbook
 * (recalled from memory, their arithmetic redone). Closed forms agree to 1e-10, regressions to 1e-9, P… to the printed digits.
 */
import type { Region } from '@strainwright/common/contract/runs';
import type { ReadingQuantity, Shape } from '@strainwright/common/contract/vocabulary';
import type { InstrumentState } from '@strainwright/common/specimens/instrument-state';
import { durbinWatson, lagOne } from '@strainwright/common/statistics/autocorrelation';
import { leastSquares, leastSquaresThroughOrigin, residualsOf } from '@strainwright/common/statistics/least-squares';
import { huber, theilSen } from '@strainwright/common/statistics/robust';
import { fitRecord, type FittedRecord } from '@strainwright/common/stress-strain/evaluate-stress-strain';
import { regression } from '@strainwright/common/stress-strain/line-fit';
import cases from './stress-strain-cases.json';

const CLOSED_FORM = 1e-10;
const REGRESSION = 1e-9;

function expectRelative(value: number, expected: number | string, tolerance: number): void {
  expect(Math.abs(value / Number(expected) - 1)).toBeLessThan(tolerance);
}

const exact: InstrumentState = {
  id: 'exact', name: 'exact', resolution: 0, rangeLow: null, rangeHigh: null,
  calibration: { calibratedOn: '2025-01-01', dueOn: '2025-12-31', expandedUncertainty: 1e-6, relative: true, coverageFactor: 2, correction: 0 },
};

interface Record {
  readonly strain: readonly number[];
  readonly strainUnit: string;
  readonly load: readonly number[];
  readonly loadUnit: string;
  readonly transverse?: readonly number[];
  readonly transverseUnit?: string;
  readonly axialGaugeLength?: number;
  readonly transverseGaugeLength?: number;
  readonly shape?: Shape;
  readonly dimensions?: Partial<globalThis.Record<ReadingQuantity, number>>;
}

/** The program's own way from a record to the constants. */
function fit(record: Record, region: Region): FittedRecord {
  const values = (list: readonly number[]) => Float64Array.from(list);
  return fitRecord({
    specimen: { shape: record.shape ?? 'cylinder', materialClass: 'metal' }, performedAt: '2025-06-01T00:00:00Z', seed: 1,
    readings: Object.entries(record.dimensions ?? {}).map(([quantity, value], i) => ({ id: `${i}`, quantity: quantity as ReadingQuantity, station: 1, value, readAt: '2025-06-01T00:00:00Z', instrument: exact })),
    record: { kind: 'stress-strain', axialGaugeLength: record.axialGaugeLength ?? null, transverseGaugeLength: record.transverseGaugeLength ?? null, compressive: false },
    settings: { kind: 'stress-strain', region }, instruments: { force: exact, axial: exact, transverse: exact },
    channels: [
      { channel: record.loadUnit === 'MPa' ? 'stress' : 'force', unit: record.loadUnit, sign: 1, values: values(record.load) },
      { channel: 'axial1', unit: record.strainUnit, sign: 1, values: values(record.strain) },
      // The cases count contraction positive.
      ...(record.transverse === undefined ? [] : [{ channel: 'transverse1' as const, unit: record.transverseUnit ?? 'µε', sign: -1 as const, values: values(record.transverse) }]),
    ],
  });
}

const byHand = (from: number, to: number): Region => ({ by: 'by hand', from, to, reason: 'window of the case' });
const valueOf = (fitted: FittedRecord, constant: 'E' | 'nu'): number => fitted.constants[constant]?.value ?? Number.NaN;

describe('O07, a clean line (computed, 40 digits)', () => {
  const { input, answer } = cases.O07;
  const stress = input.stress_MPa.map(Number);
  const fitted = fit({ strain: input.strain_microstrain, strainUnit: 'µε', load: stress, loadUnit: 'MPa' }, byHand(0, 0.001));
  const line = leastSquares(input.strain_microstrain.map((v) => v * 1e-6), stress);

  it('gives E, its standard uncertainty, intercept, r and residual deviation', () => {
    expectRelative(valueOf(fitted, 'E') / 1e6, answer.E_MPa, REGRESSION);
    expectRelative(fitted.detail.axial.slopeUncertainty / 1e6, answer.u_E_MPa, REGRESSION);
    expectRelative(fitted.detail.axial.intercept / 1e6, answer.intercept_MPa, REGRESSION);
    expectRelative(fitted.detail.axial.correlationCoefficient, answer.r, REGRESSION);
    expectRelative(fitted.detail.axial.residualStandardDeviation / 1e6, answer.resid_sd_MPa, REGRESSION);
    expectRelative(line.interceptUncertainty, answer.u_intercept, REGRESSION);
  });

  it('gives the coefficient of variation of the slope both ways', () => {
    expectRelative((100 * line.slopeUncertainty) / line.slope, answer.cv_slope_percent_se_over_slope, REGRESSION);
    // 1/r² − 1 loses digits near r = 1.
    expectRelative(100 * Math.sqrt((1 / line.correlationCoefficient ** 2 - 1) / (line.points - 2)), answer.cv_slope_percent_from_r, 1e-7);
  });

  it('gives the slope through the origin', () => {
    expectRelative(leastSquaresThroughOrigin(input.strain_microstrain.map((v) => v * 1e-6), stress).slope, answer.slope_through_origin_MPa, REGRESSION);
  });
});

describe('O08, toe and yield (computed, 40 digits)', () => {
  const { input, answer } = cases.O08;
  const record: Record = { strain: input.strain, strainUnit: 'mm/mm', load: input.stress_MPa, loadUnit: 'MPa' };
  const E = (region: Region) => valueOf(fit(record, region), 'E') / 1e6;

  it('gives E and the toe strain from the straight part', () => {
    const fitted = fit(record, byHand(0.001, 0.0025));
    expectRelative(valueOf(fitted, 'E') / 1e6, answer.E_OLS_0p10_0p25pct, REGRESSION);
    expectRelative(fitted.detail.toeStrain, answer.toe_offset_strain, REGRESSION);
  });

  it('gives the wrong E of windows that hold toe or yield, and says which', () => {
    const toe = fit(record, byHand(0, 0.0025));
    expectRelative(valueOf(toe, 'E') / 1e6, answer.E_OLS_0_0p25pct_wrong, REGRESSION);
    expect(toe.findings.map((f) => f.code)).toContain('TOE_IN_WINDOW');
    const yielding = fit(record, byHand(0.0005, 0.008));
    expectRelative(valueOf(yielding, 'E') / 1e6, answer.E_OLS_0p05_0p8_wrong, REGRESSION);
    expect(yielding.findings.map((f) => f.code)).toContain('YIELD_IN_WINDOW');
  });

  it('gives the chord, and the secant before and after toe correction', () => {
    expectRelative(E({ by: 'chord between strains', from: 0.0005, to: 0.0025 }), answer.chord_0p05_0p25pct_uncorrected, CLOSED_FORM);
    expectRelative(E({ by: 'chord between strains', from: 0, to: 0.0025 }), answer.secant_0p25pct_uncorrected, CLOSED_FORM);
    const { detail } = fit(record, byHand(0.001, 0.0025));
    expectRelative(161 / (0.0025 - detail.toeStrain), answer.secant_0p25pct_toe_corrected, REGRESSION);
  });

  it('finds the straight part by itself', () => {
    const fitted = fit(record, { by: 'automatic' });
    expectRelative(valueOf(fitted, 'E') / 1e6, answer.E_OLS_0p10_0p25pct, 1e-4);
    expect(fitted.detail.window.strainFrom).toBeGreaterThanOrEqual(0.00035);
    expect(fitted.detail.window.strainTo).toBeLessThanOrEqual(0.0031);
  });
});

describe('O09, gross outliers (computed, 40 digits)', () => {
  const { input, answer } = cases.O09;
  const strain = input.strain_microstrain.map((v) => v * 1e-6);
  const without = (values: readonly number[]) => values.filter((_, i) => ![7, 19, 33].includes(i));
  const fitted = fit({ strain: input.strain_microstrain, strainUnit: 'µε', load: input.stress_MPa, loadUnit: 'MPa' }, byHand(0, 0.001));

  it('gives the least-squares slope, and points at the three rows', () => {
    expectRelative(valueOf(fitted, 'E') / 1e6, answer.E_OLS, REGRESSION);
    expectRelative(leastSquares(strain, input.stress_MPa).slopeUncertainty, answer.u_OLS, REGRESSION);
    expect(fitted.findings.find((f) => f.code === 'OUTLIERS_IN_WINDOW')?.seen).toMatch(/^3 of 41 rows .*\(row 8, 20, 34\)$/);
  });

  it('gives the slopes that outliers do not move', () => {
    expectRelative(theilSen(strain, input.stress_MPa).slope, answer.E_TheilSen, REGRESSION);
    const robust = huber(strain, input.stress_MPa);
    expectRelative(robust.slope, answer.E_Huber_k1p345_MAD0p6745, REGRESSION);
    expectRelative(robust.intercept, answer.Huber_intercept, REGRESSION);
    expectRelative(robust.scale, answer.Huber_scale_MPa, REGRESSION);
  });

  it('gives the line through the other rows', () => {
    const line = leastSquares(without(strain), without(input.stress_MPa));
    expectRelative(line.slope, answer.E_OLS_outliers_removed, REGRESSION);
    expectRelative(line.slopeUncertainty, answer.u_OLS_removed, REGRESSION);
    expectRelative(line.residualStandardDeviation, answer.resid_sd_removed, REGRESSION);
  });
});

describe('O10, three cycles with hysteresis (computed, 40 digits)', () => {
  const { input, answer } = cases.O10;
  const rows = input.cycles.flatMap((c) => [...c.load, ...c.unload]) as [number, number][];
  const record: Record = { strain: rows.map((r) => r[0]), strainUnit: 'µε', load: rows.map((r) => r[1]), loadUnit: 'MPa' };

  it.each([0, 1, 2])('gives the loading and unloading slopes of cycle %p', (cycle) => {
    const slope = (points: number[][]) => {
      const within = points.filter(([, stress]) => stress! >= 4 && stress! <= 16);
      const [x, y] = [0, 1].map((k) => Float64Array.from(within, (p) => p[k]! * (k === 0 ? 1e-6 : 1)));
      return regression({ x: x!, y: y!, t: null }, 0, within.length - 1).axial.slope;
    };
    expectRelative(slope(input.cycles[cycle]!.load), answer.cycles[cycle]!.E_load_MPa_4_16, REGRESSION);
    expectRelative(slope(input.cycles[cycle]!.unload), answer.cycles[cycle]!.E_unload_MPa_4_16, REGRESSION);
  });

  it('fits the last loading of the whole record, never the cloud of all cycles', () => {
    const last = input.cycles[2]!.load as [number, number][];
    const ends = [4, 16].map((stress) => last.find((r) => r[1] === stress)![0] * 1e-6);
    const fitted = fit(record, byHand(ends[0]!, ends[1]!));
    expectRelative(valueOf(fitted, 'E') / 1e6, answer.mean_load_slope_cycles_2_3, REGRESSION);
    expect(fitted.detail.axial.points).toBe(13);
    expect(fitted.findings.find((f) => f.code === 'CYCLES_FOUND')?.seen).toMatch(/^3 loadings/);
  });
});

describe('O14, chord of a concrete cylinder (computed, 40 digits)', () => {
  const { input, answer } = cases.O14;
  const record: Record = {
    strain: input.axial_microstrain, strainUnit: 'µε', load: input.load_kN, loadUnit: 'kN', transverse: input.transverse_microstrain, dimensions: { diameter: input.diameter_mm / 1000 },
  };
  const area = (Math.PI / 4) * (input.diameter_mm / 1000) ** 2;

  it('takes 40 % of the ultimate stress', () => {
    expectRelative((input.ultimate_kN * 1e3) / area / 1e6, answer.fc_MPa, CLOSED_FORM);
    expectRelative((0.4 * input.ultimate_kN * 1e3) / area / 1e6, answer.S2_MPa, CLOSED_FORM);
  });

  it('gives E and ν between the stress at 50 µε and 40 % of the ultimate', () => {
    const at50 = fit(record, { by: 'chord between strains', from: 50e-6, to: 500e-6 }).detail.window.stressFrom;
    expectRelative(at50 / 1e6, answer.S1_MPa, CLOSED_FORM);
    const fitted = fit(record, { by: 'chord between stresses', from: at50, to: (0.4 * input.ultimate_kN * 1e3) / area });
    expectRelative(valueOf(fitted, 'E') / 1e6, answer.E_MPa, CLOSED_FORM);
    expectRelative(valueOf(fitted, 'nu'), answer.nu, CLOSED_FORM);
    expectRelative(fitted.detail.window.strainTo * 1e6, answer.eps2, CLOSED_FORM);
    expect(Math.floor(valueOf(fitted, 'E') / 200e6) * 200).toBe(answer.E_rounded_nearest_200MPa);
  });
});

describe('O17, residuals that follow one another (computed, 40 digits)', () => {
  const { input, answer } = cases.O17;
  const x = input.strain_microstrain;
  const line = leastSquares(x, input.stress_MPa);
  const residuals = residualsOf(line, x, input.stress_MPa);

  it('gives slope, ordinary standard error, lag-1 correlation and Durbin–Watson', () => {
    expectRelative(line.slope, answer.slope, REGRESSION);
    expectRelative(line.slopeUncertainty, answer.se_OLS, REGRESSION);
    expectRelative(lagOne(residuals), answer.lag1_r, REGRESSION);
    expectRelative(durbinWatson(residuals), answer.durbin_watson, REGRESSION);
    expectRelative(Math.sqrt((1 + lagOne(residuals)) / (1 - lagOne(residuals))), answer.factor_sqrt_1pr_1mr, REGRESSION);
  });

  it('puts the AR(1) sandwich, not the ordinary standard error, into the budget', () => {
    const { detail, constants } = fit({ strain: x, strainUnit: 'µε', load: input.stress_MPa, loadUnit: 'MPa' }, byHand(0, 0.00098));
    expectRelative(detail.axial.slopeUncertainty / 1e12, answer.se_AR1_sandwich, REGRESSION);
    const slope = constants.E?.model.inputs.find((i) => i.key === 'slope.axial');
    expectRelative((slope?.standardUncertainty ?? Number.NaN) / 1e12, answer.se_AR1_sandwich, REGRESSION);
  });
});

describe('textbook problems (from memory, their arithmetic redone)', () => {
  const steps = Array.from({ length: 21 }, (_, i) => i / 20);

  it('P01, the elongation of a copper bar', () => {
    const { input, published_answer: published } = cases.P01;
    const fitted = fit({
      strain: steps.map((s) => (s * input.stress_MPa * input.L0_mm) / (input.E_GPa * 1e3)), strainUnit: 'mm', axialGaugeLength: input.L0_mm / 1e3,
      load: steps.map((s) => s * input.stress_MPa), loadUnit: 'MPa',
    }, { by: 'automatic' });
    expect(((input.L0_mm * input.stress_MPa * 1e6) / valueOf(fitted, 'E')).toFixed(2)).toBe(published.elongation_mm.toFixed(2));
  });

  it('P02, the force that narrows a brass rod', () => {
    const { input, published_answer: published } = cases.P02;
    const narrowing = Number(input.delta_d_mm);
    const area = (Math.PI / 4) * (input.d_mm / 1e3) ** 2;
    const strain = narrowing / input.d_mm / input.nu;
    const fitted = fit({
      strain: steps.map((s) => s * strain * 1e6), strainUnit: 'µε', load: steps.map((s) => s * strain * input.E_GPa * 1e9 * area), loadUnit: 'N',
      transverse: steps.map((s) => s * narrowing), transverseUnit: 'mm', transverseGaugeLength: input.d_mm / 1e3, dimensions: { diameter: input.d_mm / 1e3 },
    }, { by: 'automatic' });
    const force = (narrowing / input.d_mm / valueOf(fitted, 'nu')) * valueOf(fitted, 'E') * area;
    expect(Number(force.toPrecision(2))).toBe(published.F_N);
  });

  it('P05, the strain of an aluminium bar', () => {
    const { input, published_answer: published } = cases.P05;
    const area = 10e-3 * 12.7e-3;
    const fitted = fit({
      strain: steps.map((s) => (s * input.F_N) / area / (input.E_GPa * 1e9)), strainUnit: 'mm/mm', load: steps.map((s) => s * input.F_N), loadUnit: 'N',
      shape: 'prism', dimensions: { width: 10e-3, thickness: 12.7e-3 },
    }, { by: 'chord between strains', from: 0.001, to: 0.004 });
    expect(Number((input.F_N / area / valueOf(fitted, 'E')).toPrecision(2))).toBe(Number(published.strain));
  });
});
