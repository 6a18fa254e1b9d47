/**
 * Load and strain records whose E and ν are known, for samples, demo and tests. Force rises evenly in time to the peak. Strain over
 * stress: ε(σ) = σ/E + ε_toe(1 − e^(−σ/σ_toe)) + c·max(0, σ − σ_knee)²/E, so that the slope is E wherever the toe has died out and
 * the knee is not reached. Opposed gauges differ by bending; noise is normal. Same spec, same record on every machine.
 */
import { irwinHall } from '../pulse/synthetic-waveform';

export interface RecordSpec {
  readonly rows: number;
  /** s between rows. */
  readonly interval: number;
  /** Pa and 1. */
  readonly E: number;
  readonly nu: number;
  readonly peakStress: number;
  /** Cross-section, m². */
  readonly area: number;
  /** Seating: strain taken up, and the stress (Pa) over which it fades. */
  readonly toe?: { readonly strain: number; readonly stress: number };
  /** Softening above a stress (Pa); `curvature` in 1/Pa. */
  readonly knee?: { readonly stress: number; readonly curvature: number };
  /** Half the difference of two opposed axial gauges over their mean. */
  readonly bending?: number;
  /** Standard deviations: N, and strain. */
  readonly noise: { readonly force: number; readonly strain: number };
  readonly seed: number;
}

export interface SyntheticRecord {
  /** s, N and strain; loading positive, transverse strain negative. */
  readonly time: Float64Array;
  readonly force: Float64Array;
  readonly axial1: Float64Array;
  readonly axial2: Float64Array;
  readonly transverse: Float64Array;
}

/** Axial strain at a stress. */
export function strainAt({ E, toe, knee }: RecordSpec, stress: number): number {
  const seating = toe === undefined ? 0 : toe.strain * (1 - Math.exp(-stress / toe.stress));
  const softening = knee === undefined ? 0 : (knee.curvature * Math.max(0, stress - knee.stress) ** 2) / E;
  return stress / E + seating + softening;
}

export function syntheticRecord(spec: RecordSpec): SyntheticRecord {
  const { rows, interval, nu, peakStress, area, noise } = spec;
  const random = irwinHall(spec.seed);
  const make = () => new Float64Array(rows);
  const record = { time: make(), force: make(), axial1: make(), axial2: make(), transverse: make() };
  const bending = spec.bending ?? 0;
  for (let i = 0; i < rows; i += 1) {
    const stress = (peakStress * i) / (rows - 1);
    const strain = strainAt(spec, stress);
    record.time[i] = i * interval;
    record.force[i] = stress * area + noise.force * random();
    record.axial1[i] = strain * (1 + bending) + noise.strain * random();
    record.axial2[i] = strain * (1 - bending) + noise.strain * random();
    record.transverse[i] = -nu * strain + noise.strain * random();
  }
  return record;
}
