/** What is doubtful about the readings of one quantity, each judged with the instrument as it was on the day of the reading. */
import type { Finding } from '../contract/result';
import type { ReadingQuantity } from '../contract/vocabulary';
import { finding } from '../findings/findings';
import { mean, range, standardDeviation } from '../statistics/descriptive';
import { outlierOf } from '../statistics/outlier';
import { calibrationFindings, rangeFindings } from './instrument-state';
import type { ReadingState } from './measure-specimen';

/** SI, as results name it. */
export const UNIT_OF_READING: Readonly<Record<ReadingQuantity, string>> = { length: 'm', diameter: 'm', width: 'm', thickness: 'm', mass: 'kg', massInWater: 'kg', waterTemperature: 'K' };

/** Factors that a wrong unit leaves behind. */
const UNIT_FACTORS = [10, 25.4, 100, 1000];
/** Buoyancy can lift more than the specimen weighs, and a temperature is no size. */
const MAY_BE_NEGATIVE: readonly ReadingQuantity[] = ['massInWater', 'waterTemperature'];

function shown(quantity: ReadingQuantity, value: number): string {
  const unit = UNIT_OF_READING[quantity];
  if (unit === 'm') return `${(value * 1000).toPrecision(5)} mm`;
  return unit === 'kg' ? `${(value * 1000).toPrecision(5)} g` : `${(value - 273.15).toFixed(1)} °C`;
}

/** Stations that differ by a unit's factor, stand apart, or scatter widely; in this order, the gravest only. */
function spreadFindings(quantity: ReadingQuantity, values: readonly number[], resolution: number): Finding[] {
  const [low, high] = [Math.min(...values), Math.max(...values)];
  const factor = low > 0 && quantity !== 'waterTemperature' ? UNIT_FACTORS.find((f) => Math.abs(high / low / f - 1) < 0.15) : undefined;
  if (factor !== undefined) return [finding('UNIT_SUSPECT', quantity, `${quantity}: ${shown(quantity, low)} and ${shown(quantity, high)} differ by a factor of about ${factor}`)];
  const outlier = outlierOf(values);
  // Readings a step or two apart show the instrument's grain, not an outlier.
  if (outlier !== null && range(values) > 3 * resolution) return [finding('REPLICATE_OUTLIER', quantity, `${shown(quantity, outlier.value)} among ${values.length} readings of ${quantity}: ${outlier.G.toFixed(2)} standard deviations from the mean (Grubbs, 1 %)`)];
  if (values.length < 3 || quantity === 'waterTemperature') return [];
  const s = standardDeviation(values);
  return s > 0.02 * Math.abs(mean(values)) ? [finding('NOT_UNIFORM', quantity, `${quantity}: s = ${(100 * s / mean(values)).toFixed(1)} % of the mean`)] : [];
}

export function readingFindings(quantity: ReadingQuantity, readings: readonly ReadingState[]): Finding[] {
  const values = readings.map((r) => r.value);
  const bad = MAY_BE_NEGATIVE.includes(quantity) ? undefined : values.find((v) => !(v > 0));
  return [
    ...readings.flatMap((r) => [...calibrationFindings(r.instrument, r.readAt), ...rangeFindings(r.instrument, [r.value], (v) => shown(quantity, v))]),
    ...(bad === undefined ? [] : [finding('READING_NOT_POSITIVE', quantity, `${quantity}: ${shown(quantity, bad)}`)]),
    ...(readings.length === 1 && UNIT_OF_READING[quantity] === 'm' ? [finding('READINGS_FEW', quantity, `One reading of ${quantity}`)] : []),
    ...spreadFindings(quantity, values, Math.max(...readings.map((r) => r.instrument.resolution))),
  ];
}
