/** Density ranges and water: what a plausible density is, and how one is weighed in water. */
import type { MaterialClass } from '../contract/vocabulary';
import type { Model, Term } from '../uncertainty/model';

/** kg/m³, wide on purpose: common practice. */
export const DENSITY_OF_CLASS: Readonly<Record<MaterialClass, readonly [number, number]>> = {
  rock: [1400, 4500], concrete: [300, 4000], metal: [1500, 22700], ceramic: [1500, 16000], glass: [2000, 8000], polymer: [800, 2400],
};

/** Air at about 20 °C and 101 kPa, kg/m³; rectangular ±0.1 covers ordinary laboratories (common practice). */
const AIR = { value: 1.2, halfWidth: 0.1 };

/**
 * Density of air-free water at atmospheric pressure, 0 to 40 °C, kg/m³ (Tanaka, Girard, Davis, Peuto and Bignell 2001,
 * Metrologia 38; coefficients from memory): ρ = a₅[1 − (t + a₁)²(t + a₂)/(a₃(t + a₄))].
 * @param kelvin temperature
 * @throws RangeError outside 0–40 °C
 */
export function waterDensity(kelvin: number): number {
  const t = kelvin - 273.15;
  if (!(t >= 0 && t <= 40)) throw new RangeError('The water formula holds from 0 to 40 °C');
  return 999.97495 * (1 - ((t - 3.983035) ** 2 * (t + 301.797)) / (522528.9 * (t + 69.34881)));
}

/** Why a weighing in water cannot be evaluated, or null. */
export function waterRefusal(mass: Term, massInWater: Term, waterTemperature: Term): string | null {
  if (!(mass.value > massInWater.value)) return `${(massInWater.value * 1000).toPrecision(5)} g in water, ${(mass.value * 1000).toPrecision(5)} g in air`;
  const celsius = waterTemperature.value - 273.15;
  return celsius >= 0 && celsius <= 40 ? null : `Water at ${celsius.toFixed(1)} °C`;
}

/**
 * Density by weighing in air and in water: ρ = (ρ_w − ρ_a) m/(m − m_w) + ρ_a, m the mass in air, m_w the apparent mass in
 * water (Archimedes). Air buoyancy on the specimen is in the formula; that on the balance's weights divides out of m/(m − m_w).
 */
export function densityInWater(model: Model, mass: Term, massInWater: Term, waterTemperature: Term): Term {
  const t = waterTemperature.value;
  const perKelvin = (waterDensity(t + 0.05) - waterDensity(t - 0.05)) / 0.1;
  const formula = model.input({
    key: 'water.density', label: 'Density of water by formula', unit: 'kg/m³', value: waterDensity(t), standardUncertainty: 0.05,
    type: 'B', distribution: 'rectangular', degreesOfFreedom: Infinity, source: 'Tap water and dissolved air, ±0.09 kg/m³ (common practice)',
  });
  const air = model.input({
    key: 'air.density', label: 'Density of air', unit: 'kg/m³', value: AIR.value, standardUncertainty: AIR.halfWidth / Math.sqrt(3),
    type: 'B', distribution: 'rectangular', degreesOfFreedom: Infinity, source: 'Ordinary laboratory, ±0.1 kg/m³ (common practice)',
  });
  const water = formula.plus(waterTemperature.minus(t).times(perKelvin));
  return water.minus(air).times(mass).over(mass.minus(massInWater)).plus(air);
}
