import type { NewReading } from '@strainwright/common/contract/specimens';
import { DIMENSIONS_OF_SHAPE, type InstrumentKind, type ReadingQuantity, type Shape } from '@strainwright/common/contract/vocabulary';
import { unit, unitsOf } from '@strainwright/common/quantities/units';
import { DIMENSION_OF_QUANTITY, KINDS_FOR_QUANTITY } from '../instruments/instrument-units';
import type { FieldError } from '../platform/problem';

export interface UsableInstrument { readonly name: string; readonly kind: InstrumentKind; readonly inService: boolean }
type Typed = Pick<NewReading, 'quantity' | 'value' | 'unit' | 'instrumentId'>;

/** Far outside what a laboratory handles: such a value is a slip, and would only spoil the arithmetic. SI. */
const LIMITS: Readonly<Record<ReadingQuantity, { low: number; high: number; words: string }>> = {
  length: { low: 1e-7, high: 100, words: 'between 0.0001 mm and 100 m' },
  diameter: { low: 1e-7, high: 100, words: 'between 0.0001 mm and 100 m' },
  width: { low: 1e-7, high: 100, words: 'between 0.0001 mm and 100 m' },
  thickness: { low: 1e-7, high: 100, words: 'between 0.0001 mm and 100 m' },
  mass: { low: 1e-9, high: 1e5, words: 'between 0.001 mg and 100 t' },
  massInWater: { low: 1e-9, high: 1e5, words: 'between 0.001 mg and 100 t' },
  waterTemperature: { low: 273.15, high: 313.15, words: 'between 0 °C and 40 °C, where the density of water is known' },
};

const WORDS: Readonly<Record<ReadingQuantity, string>> = {
  length: 'length', diameter: 'diameter', width: 'width', thickness: 'thickness', mass: 'mass', massInWater: 'mass in water', waterTemperature: 'water temperature',
};

/** What of a reading cannot be right, each at its field; empty when it can be stored. */
export function readingFaults(reading: Typed, shape: Shape, instrument: UsableInstrument | undefined): FieldError[] {
  return [...quantityFaults(reading.quantity, shape), ...valueFaults(reading), ...instrumentFaults(reading.quantity, instrument)];
}

function quantityFaults(quantity: ReadingQuantity, shape: Shape): FieldError[] {
  const isSize = DIMENSION_OF_QUANTITY[quantity] === 'length';
  if (!isSize || DIMENSIONS_OF_SHAPE[shape].includes(quantity)) return [];
  return [{ path: 'quantity', message: `A ${shape} has ${DIMENSIONS_OF_SHAPE[shape].join(', ')}, no ${quantity}` }];
}

function valueFaults({ quantity, value, unit: symbol }: Typed): FieldError[] {
  const dimension = DIMENSION_OF_QUANTITY[quantity];
  const typedIn = unit(symbol);
  if (typedIn?.dimension !== dimension) return [{ path: 'unit', message: `A ${WORDS[quantity]} is read in ${unitsOf(dimension).map((u) => u.symbol).join(', ')}` }];
  const si = value * typedIn.factor + typedIn.offset;
  const { low, high, words } = LIMITS[quantity];
  if (dimension !== 'temperature' && !(si > 0)) return [{ path: 'value', message: `A ${WORDS[quantity]} is above zero` }];
  return si >= low && si <= high ? [] : [{ path: 'value', message: `A ${WORDS[quantity]} lies ${words}` }];
}

function instrumentFaults(quantity: ReadingQuantity, instrument: UsableInstrument | undefined): FieldError[] {
  const kinds = KINDS_FOR_QUANTITY[quantity];
  if (instrument === undefined) return [{ path: 'instrumentId', message: 'There is no such instrument' }];
  if (!kinds.includes(instrument.kind)) return [{ path: 'instrumentId', message: `A ${WORDS[quantity]} is read with a ${kinds.join(' or ')}; ${instrument.name} is a ${instrument.kind}` }];
  return instrument.inService ? [] : [{ path: 'instrumentId', message: `${instrument.name} is out of service` }];
}
