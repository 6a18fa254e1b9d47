import { unit, type Dimension, type Unit } from '@strainwright/common/quantities/units';
import type { InstrumentKind, ReadingQuantity } from '@strainwright/common/contract/vocabulary';

/** What the scale of each kind of instrument may be in. */
export const DIMENSIONS_OF_KIND: Readonly<Record<InstrumentKind, readonly Dimension[]>> = {
  caliper: ['length'],
  micrometer: ['length'],
  balance: ['mass'],
  thermometer: ['temperature'],
  'pulse unit': ['time'],
  'load cell': ['force'],
  extensometer: ['length', 'strain'],
  'strain gauge': ['strain'],
  'test frame': ['force', 'length', 'pressure'],
  'reference bar': ['time', 'length', 'pressure'],
};

/** Which kinds of instrument can read a quantity of a specimen. */
export const KINDS_FOR_QUANTITY: Readonly<Record<ReadingQuantity, readonly InstrumentKind[]>> = {
  length: ['caliper', 'micrometer'],
  diameter: ['caliper', 'micrometer'],
  width: ['caliper', 'micrometer'],
  thickness: ['caliper', 'micrometer'],
  mass: ['balance'],
  massInWater: ['balance'],
  waterTemperature: ['thermometer'],
};

export const DIMENSION_OF_QUANTITY: Readonly<Record<ReadingQuantity, Dimension>> = {
  length: 'length', diameter: 'length', width: 'length', thickness: 'length', mass: 'mass', massInWater: 'mass', waterTemperature: 'temperature',
};

/** The unit of an instrument as stored; its symbol was checked when it was entered. */
export function storedUnit(symbol: string): Unit {
  const found = unit(symbol);
  if (found === undefined) throw new Error(`An instrument is stored with the unknown unit ${symbol}`);
  return found;
}

/** A difference (resolution, uncertainty, correction) in SI: a scale's offset, as of °C, does not enter. */
export const differenceToSI = (value: number, u: Unit): number => value * u.factor;
export const differenceFromSI = (value: number, u: Unit): number => value / u.factor;
