/**
 * Statements of conformity to a limit, with the decision rule that the order agreed on (ILAC-G8:09/2019 4.2.2, from memory):
 * the acceptance limit lies inside the tolerance limit by a guard band w.
 *
 * simple: w = 0, up to 50 % risk at the limit. guard band: w = U, at most 2.5 % risk of false acceptance.
 * one-sided 5 %: w = t₀.₉₅(ν_eff)·u, which is 1.645 u for many degrees of freedom.
 * Where the first-order uncertainty does not agree with Monte Carlo, the distances from the value to the ends of the Monte Carlo
 * interval take the place of U, each on its own side, and the standard uncertainty is that distance over 1.96.
 */
import type { ConstantResult } from '../contract/result';
import type { Limit } from '../contract/orders';
import { normalProbability, normalQuantile, tQuantile } from '../statistics/distributions';

export interface Decision {
  readonly conforms: boolean;
  /** P(lower ≤ Y ≤ upper), Y normal about the value (JCGM 106 7.2). */
  readonly probability: number;
  /** The range in which the value is accepted, SI; null where there is no limit. */
  readonly acceptance: { readonly lower: number | null; readonly upper: number | null };
}

interface Side {
  readonly expanded: number;
  readonly standard: number;
}

function sidesOf(c: ConstantResult, validated: boolean): { below: Side; above: Side } {
  const first: Side = { expanded: c.expandedUncertainty, standard: c.standardUncertainty };
  if (validated) return { below: first, above: first };
  const side = (distance: number): Side => ({ expanded: distance, standard: distance / normalQuantile(0.975) });
  return { below: side(c.value - c.interval.low), above: side(c.interval.high - c.value) };
}

function guardBand(rule: Limit['rule'], side: Side, degreesOfFreedom: number | null): number {
  if (rule === 'simple') return 0;
  if (rule === 'guard band') return side.expanded;
  return side.standard * tQuantile(0.95, degreesOfFreedom === null ? Infinity : Math.max(1, Math.floor(degreesOfFreedom)));
}

/** P(Z ≤ z); a value without uncertainty lies on one side for certain. */
function probabilityWithin(distance: number, u: number): number {
  if (u > 0) return normalProbability(distance / u);
  return distance >= 0 ? 1 : 0;
}

/** @param validated whether the first-order interval agrees with the Monte Carlo one */
export function decide(c: ConstantResult, limit: Limit, validated: boolean): Decision {
  const { below, above } = sidesOf(c, validated);
  const lower = limit.lower === null ? null : limit.lower + guardBand(limit.rule, below, c.degreesOfFreedom);
  const upper = limit.upper === null ? null : limit.upper - guardBand(limit.rule, above, c.degreesOfFreedom);
  const aboveLower = limit.lower === null ? 1 : probabilityWithin(c.value - limit.lower, below.standard);
  const belowUpper = limit.upper === null ? 1 : probabilityWithin(limit.upper - c.value, above.standard);
  return {
    conforms: (lower === null || c.value >= lower) && (upper === null || c.value <= upper),
    probability: Math.max(0, aboveLower + belowUpper - 1),
    acceptance: { lower, upper },
  };
}
