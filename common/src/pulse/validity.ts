/** The conditions under which the bulk formulas hold, as findings. Limits: methods named in each; common practice where none is. */
import type { Finding } from '../contract/result';
import type { PulseRecord } from '../contract/runs';
import type { MaterialClass, Wave } from '../contract/vocabulary';
import { LEAST_VELOCITY_RATIO } from '../elasticity/relations';
import { finding } from '../findings/findings';
import { range } from '../statistics/descriptive';
import { outlierOf } from '../statistics/outlier';

const mm = (metres: number) => `${(metres * 1000).toPrecision(3)} mm`;
const us = (seconds: number) => `${Number((seconds * 1e6).toPrecision(5))} µs`;

/** v_P/v_S > 2/√3 ⇔ K > 0; √2 ⇔ ν = 0. The ratio has its own uncertainty: at √2 within it ν is zero, not negative. */
export function ratioFindings(ratio: number, uncertainty: number): Finding[] {
  if (ratio <= LEAST_VELOCITY_RATIO) return [finding('VELOCITY_RATIO_IMPOSSIBLE', 'velocity ratio', `v_P/v_S = ${ratio.toFixed(4)}, at or below 1.1547`)];
  return ratio + 2 * uncertainty < Math.SQRT2 ? [finding('VELOCITY_RATIO_LOW', 'velocity ratio', `v_P/v_S = ${ratio.toFixed(4)}, below 1.4142`)] : [];
}

/** v_P in m/s, wide on purpose: common practice. */
const VELOCITY_OF_CLASS: Readonly<Record<MaterialClass, readonly [number, number]>> = {
  rock: [600, 8500], concrete: [1000, 6000], metal: [1500, 14000], ceramic: [1500, 19000], glass: [2500, 7500], polymer: [600, 4500],
};

export function velocityFindings(vP: number, materialClass: MaterialClass): Finding[] {
  const [low, high] = VELOCITY_OF_CLASS[materialClass];
  return vP >= low && vP <= high ? [] : [finding('VELOCITY_OUTSIDE_CLASS', 'velocity P', `v_P = ${vP.toPrecision(4)} m/s; ${materialClass} lies between ${low} and ${high} m/s`)];
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

/** How many readings of a wave, and whether they follow one cycle of the pulse. */
export function readingFindings(wave: Wave, times: readonly number[], frequency: number | null, resolution: number): Finding[] {
  const found = times.length < 3 ? [finding('RECOUPLINGS_FEW', wave, `${times.length} reading${times.length === 1 ? '' : 's'} of ${wave}`)] : [];
  const spread = range(times);
  if (frequency !== null && spread > 0.5 / frequency) return [...found, finding('CYCLE_SKIPPED', wave, `Readings of ${wave} spread over ${us(spread)}, half a period is ${us(0.5 / frequency)}`)];
  const outlier = outlierOf(times);
  if (outlier !== null && spread > 2 * resolution) found.push(finding('TIME_OUTLIER', wave, `${us(outlier.value)} among ${times.length} readings of ${wave}: ${outlier.G.toFixed(2)} standard deviations from the mean (Grubbs, 1 %)`));
  return found;
}

const DAY = 86_400_000;

/** Whether each wave has a zero time of its own, not older than a day. `zeros` in s, null for none. */
export function zeroFindings(record: PulseRecord, zeros: Readonly<Record<Wave, number | null>>, performedAt: string): Finding[] {
  const found = (['P', 'S'] as const).filter((wave) => zeros[wave] === null).map((wave) => finding('ZERO_TIME_MISSING', `zero time ${wave}`, `No zero time for ${wave}`));
  if (zeros.P === null && zeros.S === null) return found;
  if (zeros.P === zeros.S && zeros.P !== 0) found.push(finding('ZERO_TIMES_EQUAL', 'zero time', `Both zero times are ${us(zeros.P ?? 0)}`));
  if (record.zeroDeterminedAt === null) return [...found, finding('ZERO_TIME_UNDATED', 'zero time', 'The run does not say when the zero time was determined')];
  const days = Math.abs(Date.parse(performedAt) - Date.parse(record.zeroDeterminedAt)) / DAY;
  return days > 1 ? [...found, finding('ZERO_TIME_OLD', 'zero time', `The zero time is ${days.toFixed(1)} days from the run`)] : found;
}
