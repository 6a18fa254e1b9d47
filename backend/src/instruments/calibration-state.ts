import type { Instrument } from '@strainwright/common/contract/instruments';

export type CalibrationState = Instrument['calibrationState'];
export const CALIBRATION_STATES = ['in calibration', 'due soon', 'lapsed', 'never calibrated'] as const satisfies readonly CalibrationState[];

/** Days before its due date from which a calibration is "due soon". */
export const DUE_SOON_DAYS = 30;

/** Order of preference: the latest calibration, and of one day's the one entered last, which corrects those before it. */
interface Dated { readonly calibratedOn: string; readonly enteredAt: Date | string }

/** The calibration in force on a day: the latest made on or before it; undefined when there was none yet. */
export function inForce<C extends Dated>(calibrations: readonly C[], on: string): C | undefined {
  let best: C | undefined;
  for (const c of calibrations) {
    if (c.calibratedOn > on) continue;
    if (best === undefined || c.calibratedOn > best.calibratedOn || (c.calibratedOn === best.calibratedOn && c.enteredAt > best.enteredAt)) best = c;
  }
  return best;
}

/** How an instrument stands on a day by the calibration then in force; the due date itself still counts as in calibration. */
export function calibrationState(current: { readonly dueOn: string } | undefined, on: string): CalibrationState {
  if (current === undefined) return 'never calibrated';
  if (current.dueOn < on) return 'lapsed';
  return current.dueOn <= daysAfter(on, DUE_SOON_DAYS) ? 'due soon' : 'in calibration';
}

/** An ISO date some days later. */
export function daysAfter(day: string, days: number): string {
  const date = new Date(`${day}T00:00:00Z`);
  date.setUTCDate(date.getUTCDate() + days);
  return date.toISOString().slice(0, 10);
}
