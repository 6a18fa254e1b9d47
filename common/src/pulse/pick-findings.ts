/** What is doubtful about one pick. */
import type { Finding } from '../contract/result';
import { finding } from '../findings/findings';
import type { ArrivalPick } from './pick-arrival';

/** Below this the budget holds half a period for a half cycle that may hide, or the pickers are far apart. */
export const LEAST_CONFIDENCE = 0.44;

const us = (s: number) => `${(s * 1e6).toPrecision(3)} µs`;

export function pickFindings(subject: string, pick: ArrivalPick): Finding[] {
  const found: Finding[] = [];
  if (Math.abs(pick.pickerDifference) > pick.period / 4) found.push(finding('PICKERS_DISAGREE', subject, `${subject}: AIC and threshold differ by ${us(pick.pickerDifference)}, period ${us(pick.period)}`));
  if (pick.confidence < LEAST_CONFIDENCE) found.push(finding('ARRIVAL_UNCERTAIN', subject, `${subject}: first peak ${pick.signalToNoise.toFixed(0)} times the noise, pickers ${us(pick.pickerDifference)} apart`));
  if (pick.clipped) found.push(finding('RECORD_CLIPPED', subject, `${subject}: the trace stays at its largest value`));
  if (pick.steps < 16) found.push(finding('RECORD_COARSE', subject, `${subject}: ${pick.steps.toFixed(0)} steps of the converter in the first peak`));
  if (pick.samplesPerPeriod < 10) found.push(finding('TOO_FEW_SAMPLES', subject, `${subject}: ${pick.samplesPerPeriod.toFixed(1)} samples a period`));
  return found;
}
