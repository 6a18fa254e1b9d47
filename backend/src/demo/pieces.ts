/** Test pieces of the demo: true dimensions, and what a technician reads of them. */
import type { Bench, Series } from './bench';
import type { InstrumentKey } from './equipment';
import type { Truth } from './truths';

export interface Cylinder {
  /** True, m. */
  readonly length: number;
  readonly diameter: number;
}

export interface Bar extends Omit<Cylinder, 'diameter'> {
  readonly width: number;
  readonly thickness: number;
}

/** How far the stations lie from the mean, in steps of the instrument. */
const SPREAD = [1, -1, 2, -2, 0, 1, -1, 0];

function readOff(trueValue: number, n: number, step: number): number[] {
  const centre = SPREAD.slice(0, n).reduce((a, b) => a + b, 0) / n;
  return SPREAD.slice(0, n).map((s) => Number((Math.round(trueValue / step + s - centre) * step).toFixed(6)));
}

function lengths(quantity: Series['quantity'], metres: number, n: number, instrument: InstrumentKey, step: number): Series {
  return { quantity, instrument, unit: 'mm', values: readOff(metres * 1e3, n, step) };
}

export const areaOf = (piece: Cylinder | Bar): number => ('diameter' in piece ? (Math.PI / 4) * piece.diameter ** 2 : piece.width * piece.thickness);
export const massOf = (piece: Cylinder | Bar, { density }: Truth): number => density * areaOf(piece) * piece.length;

/** Reads every dimension and the mass, each at its stations. */
export async function measurePiece(bench: Bench, specimenId: string, piece: Cylinder | Bar, truth: Truth, by: { length: InstrumentKey; step: number; mass: InstrumentKey }): Promise<void> {
  const dimension = (quantity: Series['quantity'], value: number, n: number) => lengths(quantity, value, n, by.length, by.step);
  const across = 'diameter' in piece ? [dimension('diameter', piece.diameter, 6)] : [dimension('width', piece.width, 3), dimension('thickness', piece.thickness, 3)];
  const heavy = by.mass === 'heavyBalance';
  const mass = massOf(piece, truth);
  await bench.measure(specimenId, [
    dimension('length', piece.length, 4), ...across,
    { quantity: 'mass', instrument: by.mass, unit: heavy ? 'kg' : 'g', values: [Number(heavy ? (Math.round(mass * 2e3) / 2e3).toFixed(4) : (mass * 1e3).toFixed(2))] },
  ]);
}
