import type { Quantity } from '@strainwright/common/contract/result';
import type { Reading, SpecimenMeasurementAnswer } from '@strainwright/common/contract/specimens';
import type { MaterialClass, Shape } from '@strainwright/common/contract/vocabulary';
import { measureSpecimen, type ReadingState } from '@strainwright/common/specimens/measure-specimen';
import { uncertaintyOf } from '@strainwright/common/uncertainty/first-order';
import { Model, type Term } from '@strainwright/common/uncertainty/model';
import type { Queries } from '../database/database';
import { instrumentHistory } from '../instruments/instrument-state';
import { dayIn, timeZoneOf } from '../laboratory/laboratory-day';
import { readingsOf } from './reading-answer';

/**
 * The readings that stand, each with its instrument as it was calibrated on the day of the reading: what every evaluation of a
 * specimen starts from. In the order in which they were read.
 */
export async function readingStates(db: Queries, all: readonly Reading[]): Promise<ReadingState[]> {
  const standing = all.filter((reading) => reading.supersededBy === null);
  const history = await instrumentHistory(db, standing.map((reading) => reading.instrumentId));
  const dayOf = dayIn(await timeZoneOf(db));
  return standing.map(({ id, quantity, station, value, readAt, instrumentId }) => {
    const instrument = history.stateOn(instrumentId, dayOf(new Date(readAt)));
    if (instrument === undefined) throw new Error(`Reading ${id} names no instrument`);
    return { id, quantity, station, value, readAt, instrument };
  });
}

/** The readings that stand of one specimen. */
export async function readingStatesOf(db: Queries, specimenId: string): Promise<ReadingState[]> {
  return readingStates(db, await readingsOf(db, specimenId));
}

/** Statistics, area, volume, densities and findings from all readings of a specimen, superseded ones left aside. */
export async function measurementOf(db: Queries, specimen: { shape: Shape; materialClass: MaterialClass }, all: readonly Reading[]): Promise<SpecimenMeasurementAnswer> {
  const states = await readingStates(db, all);
  const measured = measureSpecimen(new Model(), specimen.shape, specimen.materialClass, states);
  const told = (term: Term | null, unit: string): Quantity | null => (term === null ? null : uncertaintyOf(term, unit));
  return {
    statistics: [...measured.statistics],
    area: told(measured.area, 'm²'), volume: told(measured.volume, 'm³'),
    densityByDimensions: told(measured.densityByDimensions, 'kg/m³'), densityInWater: told(measured.densityInWater, 'kg/m³'), density: told(measured.density, 'kg/m³'),
    findings: [...measured.findings],
  };
}
