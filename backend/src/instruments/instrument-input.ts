import type { z } from 'zod';
import type { newCalibration } from '@strainwright/common/contract/instruments';
import type { InstrumentKind } from '@strainwright/common/contract/vocabulary';
import { unit, unitsOf, type Unit } from '@strainwright/common/quantities/units';
import { invalid } from '../platform/problem';
import { DIMENSIONS_OF_KIND, differenceToSI, storedUnit } from './instrument-units';

type NewCalibration = z.infer<typeof newCalibration>;

/** @throws Problem 422 at `unit` when the unit is unknown, or none that this kind of instrument reads in */
export function checkedUnit(kind: InstrumentKind, symbol: string): Unit {
  const found = unit(symbol);
  const dimensions = DIMENSIONS_OF_KIND[kind];
  if (found !== undefined && dimensions.includes(found.dimension)) return found;
  const choices = dimensions.flatMap(unitsOf).map((u) => u.symbol);
  throw invalid('unit', `A ${kind} reads in ${choices.join(', ')}`);
}

/** @throws Problem 422 at the field that cannot be right */
export function checkedCalibration(body: NewCalibration, today: string): void {
  if (body.calibratedOn > today) throw invalid('calibratedOn', 'Lies in the future');
  if (body.relative && body.expandedUncertainty >= 1) throw invalid('expandedUncertainty', 'A fraction of the reading: 0.005 for 0.5 %');
  if (body.relative && Math.abs(body.correction) >= 1) throw invalid('correction', 'A fraction of the reading: 0.005 for 0.5 %');
}

/** Uncertainty and correction in SI; fractions stay as they are. */
export function calibrationInSI(body: NewCalibration, symbol: string): NewCalibration {
  if (body.relative) return body;
  const u = storedUnit(symbol);
  return { ...body, expandedUncertainty: differenceToSI(body.expandedUncertainty, u), correction: differenceToSI(body.correction, u) };
}
