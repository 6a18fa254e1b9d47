/**
 * A stress–strain run of known constants, with everything that spoils one: seating, yield, noise that follows itself, noisy strain,
 * steps, and instruments and a caliper whose scale errors are drawn from the uncertainties that their calibrations state.
 */
import type { InstrumentState } from '@strainwright/common/specimens/instrument-state';
import type { StressStrainInput } from '@strainwright/common/stress-strain/evaluate-stress-strain';
import type { Region } from '@strainwright/common/contract/runs';
import { RandomStream } from '@strainwright/common/uncertainty/random-stream';

export interface Variant {
  readonly name: string;
  readonly rows: number;
  /** Strain at which seating ends, at which yield begins, at which the record ends. */
  readonly toe: number;
  readonly yield: number;
  readonly end: number;
  /** Standard deviation of the stress noise as a share of the stress at yield, and its lag-1 correlation. */
  readonly stressNoise: number;
  readonly correlation: number;
  /** Standard deviation of strain noise, axial and transverse. */
  readonly strainNoise: number;
  /** Steps of the axial strain, 0 for none. */
  readonly strainStep: number;
}

export interface Truth {
  readonly E: number;
  readonly nu: number;
  readonly G: number;
  readonly K: number;
}

const DIAMETER = 0.0125;
const GAUGE_LENGTH = 0.05;
const READINGS = 6;

function instrument(id: string, expandedUncertainty: number, resolution: number, relative = true): InstrumentState {
  return {
    id, name: id, resolution, rangeLow: null, rangeHigh: null,
    calibration: { calibratedOn: '2025-02-03', dueOn: '2026-02-02', expandedUncertainty, relative, coverageFactor: 2, correction: 0 },
  };
}

const INSTRUMENTS = {
  force: instrument('load cell', 0.005, 1), axial: instrument('extensometer', 0.006, 1e-8), transverse: instrument('strain gauge', 0.008, 1e-7),
};
const CALIPER = instrument('caliper', 2e-5, 1e-6, false);

function stressAt(strain: number, E: number, v: Variant): number {
  if (strain < v.toe) return (E * strain * strain) / (2 * v.toe);
  const linear = E * (Math.min(strain, v.yield) - v.toe / 2);
  const hardening = 0.3 * E * (v.yield - v.toe / 2);
  return strain <= v.yield ? linear : linear + hardening * (1 - Math.exp((-E * (strain - v.yield)) / hardening));
}

/** The same seed gives the same record. @param regionOf the window, which a method may lay down by the stiffness */
export function staticRecord(v: Variant, regionOf: (E: number) => Region, seed: number): { input: StressStrainInput; truth: Truth } {
  const random = new RandomStream(seed);
  const E = 60e9 + 150e9 * random.uniform();
  const nu = 0.2 + 0.2 * random.uniform();
  const scaleError = (state: InstrumentState) => (random.normal() * (state.calibration?.expandedUncertainty ?? 0)) / 2;
  const [force, axial, transverse, caliper] = [INSTRUMENTS.force, INSTRUMENTS.axial, INSTRUMENTS.transverse, CALIPER].map(scaleError) as [number, number, number, number];
  const gaugeLength = GAUGE_LENGTH * (1 + 0.001 * (2 * random.uniform() - 1));
  const area = (Math.PI / 4) * DIAMETER ** 2;
  const amplitude = v.stressNoise * stressAt(v.yield, E, v);
  const [forces, extensions, contractions] = [new Float64Array(v.rows), new Float64Array(v.rows), new Float64Array(v.rows)];
  const stepped = (value: number) => (v.strainStep > 0 ? Math.round(value / v.strainStep) * v.strainStep : value);
  let noise = random.normal();
  for (let i = 0; i < v.rows; i += 1) {
    const strain = (v.end * i) / (v.rows - 1);
    forces[i] = ((stressAt(strain, E, v) + amplitude * noise) * area) / (1 + force) / 1000;
    extensions[i] = stepped(((strain + v.strainNoise * random.normal()) * gaugeLength) / GAUGE_LENGTH / (1 + axial)) * GAUGE_LENGTH * 1000;
    contractions[i] = ((-nu * strain + v.strainNoise * random.normal()) / (1 + transverse)) * 1e6;
    noise = v.correlation * noise + Math.sqrt(1 - v.correlation ** 2) * random.normal();
  }
  const readings = Array.from({ length: READINGS }, (_, i) => ({
    id: `${i}`, quantity: 'diameter' as const, station: i + 1, value: DIAMETER - caliper + 1e-5 * random.normal(), readAt: '2025-06-02T08:00:00Z', instrument: CALIPER,
  }));
  return {
    truth: { E, nu, G: E / (2 * (1 + nu)), K: E / (3 * (1 - 2 * nu)) },
    input: {
      specimen: { shape: 'cylinder', materialClass: 'metal' }, readings, performedAt: '2025-06-02T09:00:00Z', seed, instruments: INSTRUMENTS,
      record: { kind: 'stress-strain', axialGaugeLength: GAUGE_LENGTH, transverseGaugeLength: null, compressive: false }, settings: { kind: 'stress-strain', region: regionOf(E) },
      channels: [
        { channel: 'force', unit: 'kN', sign: 1, values: forces },
        { channel: 'axial1', unit: 'mm', sign: 1, values: extensions },
        { channel: 'transverse1', unit: 'µε', sign: 1, values: contractions },
      ],
    },
  };
}
