/**
 * From readings to length, cross-section, mass and density, each a term of one measurement model: the length in the density
 * and the length in a velocity are one term, so that what is common to both is treated as common.
 *
 * A quantity's estimate is the mean x̄ of its n readings, each with its instrument's calibration applied. Its inputs: the
 * calibration (one for all readings of an instrument, never divided by √n), the resolution δ (rectangular, δ/√12, taken as
 * common to the readings), and the spread s/√n with n − 1 degrees of freedom, which carries the specimen's non-uniformity.
 */
import type { Finding } from '../contract/result';
import { DIMENSIONS_OF_SHAPE, type MaterialClass, type ReadingQuantity, type Shape } from '../contract/vocabulary';
import { finding } from '../findings/findings';
import { mean as meanOf, range, standardDeviation } from '../statistics/descriptive';
import { firstOrder } from '../uncertainty/first-order';
import { mean, type Model, type Term } from '../uncertainty/model';
import { DENSITY_OF_CLASS, densityInWater, waterRefusal } from './density';
import { calibrationInput, corrected, type InstrumentState } from './instrument-state';
import { readingFindings, UNIT_OF_READING } from './reading-findings';

export interface ReadingState {
  readonly id: string;
  readonly quantity: ReadingQuantity;
  readonly station: number;
  /** SI. */
  readonly value: number;
  readonly readAt: string;
  readonly instrument: InstrumentState;
}

export interface QuantityStatistics {
  quantity: ReadingQuantity;
  n: number;
  mean: number;
  standardDeviation: number | null;
  range: number;
  standardUncertainty: number;
  unit: string;
}

export interface SpecimenMeasurement {
  readonly statistics: readonly QuantityStatistics[];
  readonly terms: Readonly<Partial<Record<ReadingQuantity, Term>>>;
  readonly length: Term | null;
  readonly area: Term | null;
  readonly volume: Term | null;
  readonly mass: Term | null;
  readonly densityByDimensions: Term | null;
  readonly densityInWater: Term | null;
  /** The one with the smaller standard uncertainty. */
  readonly density: Term | null;
  readonly findings: readonly Finding[];
}

function quantityTerm(model: Model, quantity: ReadingQuantity, readings: readonly ReadingState[]): Term {
  const unit = UNIT_OF_READING[quantity];
  const calibrated = readings.map((r) => corrected(model.constant(r.value), calibrationInput(model, r.instrument, unit)));
  let term = mean(calibrated);
  const resolution = Math.max(...readings.map((r) => r.instrument.resolution));
  if (resolution > 0) {
    term = term.plus(model.input({
      key: `${quantity}.resolution`, label: `Resolution of ${quantity}`, unit, value: 0, standardUncertainty: resolution / Math.sqrt(12),
      type: 'B', distribution: 'rectangular', degreesOfFreedom: Infinity, source: `Resolution ${resolution} ${unit}, δ/√12`,
    }));
  }
  if (readings.length >= 2) {
    const s = standardDeviation(readings.map((r) => r.value));
    term = term.plus(model.input({
      key: `${quantity}.spread`, label: `Spread of ${quantity}`, unit, value: 0, standardUncertainty: s / Math.sqrt(readings.length),
      type: 'A', distribution: 't', degreesOfFreedom: readings.length - 1, source: `s/√n of ${readings.length} readings`,
    }));
  }
  return term;
}

function crossSection(shape: Shape, terms: Partial<Record<ReadingQuantity, Term>>): Term | null {
  if (shape === 'cylinder') return terms.diameter === undefined ? null : terms.diameter.power(2).times(Math.PI / 4);
  return terms.width === undefined || terms.thickness === undefined ? null : terms.width.times(terms.thickness);
}

function densityFindings(materialClass: MaterialClass, density: Term, byDimensions: Term | null, inWater: Term | null): Finding[] {
  const found: Finding[] = [];
  const [low, high] = DENSITY_OF_CLASS[materialClass];
  const rho = density.value;
  if (!(rho >= low && rho <= high)) {
    found.push(finding('DENSITY_OUTSIDE_CLASS', 'density', `${rho.toPrecision(4)} kg/m³; ${materialClass} lies between ${low} and ${high} kg/m³`));
    const middle = Math.sqrt(low * high);
    const factor = [10, 100, 1000, 25.4, 25.4 ** 2, 25.4 ** 3].find((f) => [rho * f, rho / f].some((r) => r > low && r < high && Math.abs(Math.log(r / middle)) < 1.2));
    if (factor !== undefined) found.push(finding('UNIT_SUSPECT', 'density', `Density is off by a factor of about ${factor.toPrecision(4)}: a dimension or the mass may stand in the wrong unit`));
  }
  if (byDimensions !== null && inWater !== null) {
    const difference = firstOrder(byDimensions.minus(inWater));
    const en = Math.abs(difference.value) / (2 * difference.standardUncertainty);
    if (en > 1) found.push(finding('DENSITIES_DISAGREE', 'density', `${byDimensions.value.toPrecision(5)} kg/m³ by dimensions, ${inWater.value.toPrecision(5)} kg/m³ in water: ${en.toFixed(1)} times the expanded uncertainty of their difference`));
  }
  return found;
}

/** @param readings those that stand (not superseded), each with its instrument as calibrated on the day of the reading */
export function measureSpecimen(model: Model, shape: Shape, materialClass: MaterialClass, readings: readonly ReadingState[]): SpecimenMeasurement {
  const byQuantity = new Map<ReadingQuantity, ReadingState[]>();
  for (const reading of readings) byQuantity.set(reading.quantity, [...(byQuantity.get(reading.quantity) ?? []), reading]);
  const terms: Partial<Record<ReadingQuantity, Term>> = {};
  const findings: Finding[] = [];
  const statistics: QuantityStatistics[] = [];
  for (const [quantity, group] of byQuantity) {
    const term = quantityTerm(model, quantity, group);
    const values = group.map((r) => r.value);
    terms[quantity] = term;
    findings.push(...readingFindings(quantity, group));
    statistics.push({
      quantity, n: values.length, mean: meanOf(values), standardDeviation: values.length > 1 ? standardDeviation(values) : null, range: range(values),
      standardUncertainty: firstOrder(term).standardUncertainty, unit: UNIT_OF_READING[quantity],
    });
  }
  const length = terms.length ?? null;
  const area = crossSection(shape, terms);
  const volume = length !== null && area !== null ? area.times(length) : null;
  const mass = terms.mass ?? null;
  // m/V as practice has it: the buoyancy of air on the balance, 0.03 % of ρ for stone and 0.1 % for a polymer, is left out.
  const byDimensions = positive(mass !== null && volume !== null ? mass.over(volume) : null);
  const weighed = mass !== null && terms.massInWater !== undefined && terms.waterTemperature !== undefined ? [mass, terms.massInWater, terms.waterTemperature] as const : null;
  const refusal = weighed === null ? null : waterRefusal(...weighed);
  const inWater = weighed === null || refusal !== null ? null : positive(densityInWater(model, ...weighed));
  const density = better(byDimensions, inWater);
  const missing = DIMENSIONS_OF_SHAPE[shape].filter((q) => terms[q] === undefined);
  if (missing.length > 0) findings.push(finding('READINGS_MISSING', missing.join(', '), `No reading of ${missing.join(', ')}`));
  if (refusal !== null) findings.push(finding('WEIGHING_IMPOSSIBLE', 'density in water', refusal));
  if (density !== null) findings.push(...densityFindings(materialClass, density, byDimensions, inWater));
  return { statistics, terms, length: positive(length), area, volume, mass, densityByDimensions: byDimensions, densityInWater: inWater, density, findings: unique(findings) };
}

/** Nothing is computed from a length or density of zero or less; the reading's own finding says why. */
function positive(term: Term | null): Term | null {
  return term !== null && term.value > 0 && Number.isFinite(term.value) ? term : null;
}

function better(a: Term | null, b: Term | null): Term | null {
  if (a === null || b === null) return a ?? b;
  return firstOrder(a).standardUncertainty <= firstOrder(b).standardUncertainty ? a : b;
}

function unique(findings: readonly Finding[]): Finding[] {
  return [...new Map(findings.map((f) => [`${f.code} ${f.subject}`, f])).values()];
}
