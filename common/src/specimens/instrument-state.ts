/** An instrument as it was on the day it was used: resolution, range and the calibration then in force. */
import type { Finding } from '../contract/result';
import { finding } from '../findings/findings';
import type { Model, Term } from '../uncertainty/model';

export interface CalibrationState {
  /** ISO dates. */
  readonly calibratedOn: string;
  readonly dueOn: string;
  /** SI, or a fraction of the reading when `relative`. */
  readonly expandedUncertainty: number;
  readonly relative: boolean;
  readonly coverageFactor: number;
  /** Added to a reading; a fraction of it when `relative`. */
  readonly correction: number;
}

export interface InstrumentState {
  readonly id: string;
  readonly name: string;
  /** SI; 0 when unknown. */
  readonly resolution: number;
  readonly rangeLow: number | null;
  readonly rangeHigh: number | null;
  readonly calibration: CalibrationState | null;
}

/** Whether the calibration was missing or lapsed on a day (ISO date or instant). */
export function calibrationFindings(instrument: InstrumentState, on: string): Finding[] {
  const day = on.slice(0, 10);
  const { calibration, name } = instrument;
  if (calibration === null) return [finding('CALIBRATION_MISSING', name, `${name} had no calibration on ${day}`)];
  if (day > calibration.dueOn) return [finding('OUT_OF_CALIBRATION', name, `${name}: calibration was due on ${calibration.dueOn}, used on ${day}`)];
  return [];
}

/** Whether values lie in the instrument's range. */
export function rangeFindings(instrument: InstrumentState, values: readonly number[], show: (value: number) => string): Finding[] {
  const outside = values.find((v) => (instrument.rangeLow !== null && v < instrument.rangeLow) || (instrument.rangeHigh !== null && v > instrument.rangeHigh));
  if (outside === undefined) return [];
  const ends = [instrument.rangeLow, instrument.rangeHigh].map((end) => (end === null ? '–' : show(end))).join(' to ');
  return [finding('OUTSIDE_CALIBRATED_RANGE', instrument.name, `${show(outside)} read on ${instrument.name}, range ${ends}`)];
}

/**
 * The calibration as one shared input: an error common to everything that the instrument read under it. Absolute (SI, add it) or
 * relative (multiply by 1 + it). Standard uncertainty U/k, type B, normal. Null without a calibration.
 */
export function calibrationInput(model: Model, instrument: InstrumentState, unit: string): { term: Term; relative: boolean } | null {
  const { calibration } = instrument;
  if (calibration === null) return null;
  const term = model.input({
    key: `calibration.${instrument.id}.${calibration.calibratedOn}${calibration.relative ? '' : `.${unit}`}`, label: `Calibration of ${instrument.name}`, unit: calibration.relative ? '1' : unit,
    value: calibration.correction, standardUncertainty: calibration.expandedUncertainty / calibration.coverageFactor,
    type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: `Calibration of ${calibration.calibratedOn}, U/k`,
  });
  return { term, relative: calibration.relative };
}

/** A reading with the instrument's calibration applied: x(1 + c) or x + c. */
export function corrected(value: Term, calibration: { term: Term; relative: boolean } | null): Term {
  if (calibration === null) return value;
  return calibration.relative ? value.times(calibration.term.plus(1)) : value.plus(calibration.term);
}
