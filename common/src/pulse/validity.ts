/** The conditions under which the bulk formulas hold, as findings. Limits: methods named in each; common practice where none is. */
import type { Finding } from '../contract/result';
import type { PulseRecord } from '../contract/runs';
import type { MaterialClass } from '../contract/vocabulary';
import { LEAST_VELOCITY_RATIO } from '../elasticity/relations';
import { finding } from '../findings/findings';
import type { ArrivalPick } from './pick-arrival';

const mm = (metres: number) => `${(metres * 1000).toPrecision(3)} mm`;

/** v_P/v_S > 2/√3 ⇔ K > 0; √2 ⇔ ν = 0. The ratio has its own uncertainty: at √2 within it ν is zero, not negative. */
export function ratioFindings(ratio: number, uncertainty: number): Finding[] {
  if (ratio <= LEAST_VELOCITY_RATIO) return [finding('VELOCITY_RATIO_IMPOSSIBLE', 'velocity ratio', `v_P/v_S = ${ratio.toFixed(4)}, at or below 1.1547`)];
  return ratio + 2 * uncertainty < Math.SQRT2 ? [finding('VELOCITY_RATIO_LOW', 'velocity ratio', `v_P/v_S = ${ratio.toFixed(4)}, below 1.4142`)] : [];
}

export interface Geometry {
  readonly length: number;
  /** The least lateral dimension, m; null when unknown. */
  readonly lateral: number | null;
}

/** Path and lateral size against the wavelength (BS 1881-203 and ASTM D2845 conditions, from memory). */
export function wavelengthFindings(geometry: Geometry, wavelengthP: number, materialClass: MaterialClass): Finding[] {
  const found: Finding[] = [];
  if (geometry.length < wavelengthP) found.push(finding('PATH_SHORTER_THAN_WAVELENGTH', 'length', `Path ${mm(geometry.length)}, wavelength ${mm(wavelengthP)}`));
  if (geometry.lateral === null) return found;
  if (geometry.lateral < wavelengthP) found.push(finding('LATERAL_SIZE_BELOW_WAVELENGTH', 'lateral size', `${mm(geometry.lateral)} across, wavelength ${mm(wavelengthP)}`));
  else if (materialClass === 'rock' && geometry.lateral < 5 * wavelengthP) {
    found.push(finding('LATERAL_SIZE_BELOW_FIVE_WAVELENGTHS', 'lateral size', `${mm(geometry.lateral)} across is ${(geometry.lateral / wavelengthP).toFixed(1)} wavelengths`));
  }
  return found;
}

const DAY = 86_400_000;

/** Zero time determined more than a day from the run. */
export function zeroAgeFindings(record: PulseRecord, performedAt: string): Finding[] {
  if (record.zeroDeterminedAt === null) return [];
  const days = Math.abs(Date.parse(performedAt) - Date.parse(record.zeroDeterminedAt)) / DAY;
  return days > 1 ? [finding('ZERO_TIME_OLD', 'zero time', `The zero time is ${days.toFixed(1)} days from the run`)] : [];
}

/** What is doubtful about one pick. */
export function pickFindings(subject: string, pick: ArrivalPick): Finding[] {
  const found: Finding[] = [];
  const us = (s: number) => `${(s * 1e6).toPrecision(3)} µs`;
  if (Math.abs(pick.pickerDifference) > pick.period / 4) found.push(finding('PICKERS_DISAGREE', subject, `${subject}: pickers differ by ${us(pick.pickerDifference)}, period ${us(pick.period)}`));
  if (pick.confidence < 0.45) found.push(finding('ARRIVAL_UNCERTAIN', subject, `${subject}: signal to noise ${pick.signalToNoise.toFixed(0)}, pickers ${us(pick.pickerDifference)} apart`));
  if (pick.clipped) found.push(finding('RECORD_CLIPPED', subject, `${subject}: three samples or more at full scale`));
  if (pick.steps < 16) found.push(finding('RECORD_COARSE', subject, `${subject}: ${pick.steps.toFixed(0)} steps of the converter in the first peak`));
  if (pick.samplesPerPeriod < 10) found.push(finding('TOO_FEW_SAMPLES', subject, `${subject}: ${pick.samplesPerPeriod.toFixed(1)} samples a period`));
  return found;
}
