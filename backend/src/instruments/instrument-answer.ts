import type { Calibration, Instrument } from '@strainwright/common/contract/instruments';
import { fromSI } from '@strainwright/common/quantities/units';
import type { calibrations, instruments } from '../database/schema/instruments';
import { calibrationState, inForce } from './calibration-state';
import { differenceFromSI, storedUnit } from './instrument-units';

export type InstrumentRow = typeof instruments.$inferSelect;
export type CalibrationRow = typeof calibrations.$inferSelect & { enteredBy: string };

/** A double holds fifteen to seventeen digits; the last of them are residue of going through SI and back. */
const tidy = (value: number): number => Number(value.toPrecision(14));

/** An instrument as people see it: resolution and range in its own unit, calibrations newest first, its state on `today`. */
export function instrumentAnswer(row: InstrumentRow, calibrations: readonly CalibrationRow[], today: string): Instrument {
  const current = inForce(calibrations, today);
  const inOwnUnit = (si: number | null) => (si === null ? null : tidy(fromSI(si, row.unit)));
  return {
    id: row.id, name: row.name, kind: row.kind, maker: row.maker, model: row.model, serial: row.serial, location: row.location, unit: row.unit,
    resolution: tidy(differenceFromSI(row.resolution, storedUnit(row.unit))), rangeLow: inOwnUnit(row.rangeLow), rangeHigh: inOwnUnit(row.rangeHigh),
    inService: row.inService, calibrations: calibrations.map(calibrationAnswer), dueOn: current?.dueOn ?? null, calibrationState: calibrationState(current, today), version: row.version,
  };
}

function calibrationAnswer(row: CalibrationRow): Calibration {
  return {
    id: row.id, calibratedOn: row.calibratedOn, dueOn: row.dueOn, certificate: row.certificate, laboratory: row.laboratory, relative: row.relative,
    expandedUncertainty: row.expandedUncertainty, coverageFactor: row.coverageFactor, correction: row.correction, enteredBy: row.enteredBy, enteredAt: row.enteredAt.toISOString(),
  };
}
