/** What a force, extension or strain instrument puts into the budget: its calibration as a factor on readings, and its resolution. */
import { calibrationInput, type InstrumentState } from '../specimens/instrument-state';
import type { Model, Term } from '../uncertainty/model';

/** Half-width of a class 1 instrument, ±1 % of the reading (ISO 7500-1, ISO 9513, from memory); taken where no calibration is known. */
const CLASS_ONE = 0.01;

export type Role = 'force' | 'axial' | 'transverse';
export const ROLE_NAMES: Readonly<Record<Role, string>> = { force: 'force', axial: 'axial strain', transverse: 'transverse strain' };

/**
 * The factor that turns a reading into the best estimate of what was read: 1 + relative correction, u = U/k. An absolute calibration
 * shifts all readings alike and drops out of slopes, save for its uncertainty, taken relative to the greatest reading. The input is
 * the instrument's, so that axial and transverse strain read by one instrument share it, and ν is free of it.
 * @param unit SI unit of readings, @param greatest reading in the window
 */
export function calibrationFactor(model: Model, role: Role, instrument: InstrumentState | null, unit: string, greatest: number): Term {
  const calibration = instrument === null ? null : calibrationInput(model, instrument, unit);
  if (calibration !== null) {
    const { term, relative } = calibration;
    return relative ? term.plus(1) : term.minus(term.value).over(greatest).plus(1);
  }
  return model.input({
    key: `calibration.${instrument?.id ?? role}.assumed`, label: `Calibration of ${instrument?.name ?? ROLE_NAMES[role]}, assumed`, unit: '1', value: 0,
    standardUncertainty: CLASS_ONE / Math.sqrt(3), type: 'B', distribution: 'rectangular', degreesOfFreedom: Infinity, source: 'No calibration known: ±1 % assumed, as of class 1',
  }).plus(1);
}

/** The reading's steps: value 0, u = δ/√12; null without steps. */
export function resolutionTerm(model: Model, role: Role, unit: string, step: number): Term | null {
  if (!(step > 0)) return null;
  return model.input({
    key: `${role}.resolution`, label: `Resolution of ${ROLE_NAMES[role]}`, unit, value: 0, standardUncertainty: step / Math.sqrt(12), type: 'B', distribution: 'rectangular',
    degreesOfFreedom: Infinity, source: `Steps of ${step.toPrecision(2)} ${unit}, δ/√12: the greater of the instrument's resolution and those seen in the record`,
  });
}

const GAUGE_LENGTH_SHARE = 0.001;

/** Gauge length over its nominal value, where the channel is an extension; ±0.1 % is assumed for the setting of the knife edges. */
export function gaugeLengthRatio(model: Model, role: 'axial' | 'transverse', gaugeLength: number): Term {
  return model.input({
    key: `gaugeLength.${role}`, label: `Gauge length of ${ROLE_NAMES[role]}`, unit: 'm', value: gaugeLength, standardUncertainty: (GAUGE_LENGTH_SHARE * gaugeLength) / Math.sqrt(3),
    type: 'B', distribution: 'rectangular', degreesOfFreedom: Infinity, source: 'Setting of the gauge length, ±0.1 % assumed',
  }).over(gaugeLength);
}
