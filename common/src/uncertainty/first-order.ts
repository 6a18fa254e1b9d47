/**
 * The law of propagation of uncertainty, first order: u²(y) = Σᵢ Σⱼ cᵢ cⱼ uᵢ uⱼ rᵢⱼ (JCGM 100 5.2.2 eq. 13), with exact
 * sensitivities cᵢ. Effective degrees of freedom after Welch and Satterthwaite, ν = u⁴ / Σ(uᵢ⁴/νᵢ) (G.4.1), for
 * uncorrelated contributions; inputs that are correlated with one another enter as one contribution with the fewest
 * degrees of freedom among them. Truncated down (G.4.1 Note).
 */
import type { Quantity } from '../contract/result';
import { tQuantile } from '../statistics/distributions';
import type { Model, Term } from './model';

export interface FirstOrder {
  readonly value: number;
  readonly standardUncertainty: number;
  /** Infinity when no input has few. */
  readonly degreesOfFreedom: number;
  readonly sensitivities: Float64Array;
}

/** cᵢ uᵢ for every input. */
function contributions(model: Model, sensitivities: Float64Array): Float64Array {
  return Float64Array.from(model.inputs, (input, i) => (sensitivities[i] ?? 0) * input.standardUncertainty);
}

/** Covariance of two quantities with the given sensitivities to the same inputs. */
export function covariance(model: Model, a: Float64Array, b: Float64Array): number {
  const [x, y] = [contributions(model, a), contributions(model, b)];
  let sum = 0;
  for (let i = 0; i < x.length; i += 1) sum += (x[i] ?? 0) * (y[i] ?? 0);
  for (const [key, r] of model.correlations) {
    const [i = 0, j = 0] = key.split(',').map(Number);
    sum += r * ((x[i] ?? 0) * (y[j] ?? 0) + (x[j] ?? 0) * (y[i] ?? 0));
  }
  return sum;
}

function effectiveDegreesOfFreedom(model: Model, sensitivities: Float64Array, variance: number): number {
  let sum = 0;
  for (const group of model.correlationGroups()) {
    const only = sensitivities.map((c, i) => (group.includes(i) ? c : 0));
    const fewest = Math.min(...group.map((i) => model.inputs[i]?.degreesOfFreedom ?? Infinity));
    if (Number.isFinite(fewest)) sum += covariance(model, only, only) ** 2 / fewest;
  }
  return sum > 0 ? variance ** 2 / sum : Infinity;
}

export function firstOrder(term: Term): FirstOrder {
  const { model } = term;
  const sensitivities = model.gradient(term);
  const variance = Math.max(covariance(model, sensitivities, sensitivities), 0);
  return { value: term.value, standardUncertainty: Math.sqrt(variance), degreesOfFreedom: effectiveDegreesOfFreedom(model, sensitivities, variance), sensitivities };
}

/** k for the given coverage probability: t of the degrees of freedom truncated down, at least one. */
export function coverageFactor(degreesOfFreedom: number, probability = 0.95): number {
  const nu = Number.isFinite(degreesOfFreedom) ? Math.max(1, Math.floor(degreesOfFreedom + 1e-9)) : Infinity;
  return tQuantile((1 + probability) / 2, nu);
}

/** The contract's form of one term. `unit` is the SI unit as text. */
export function uncertaintyOf(term: Term, unit: string): Quantity {
  const { value, standardUncertainty, degreesOfFreedom } = firstOrder(term);
  return { value, standardUncertainty, degreesOfFreedom: Number.isFinite(degreesOfFreedom) ? degreesOfFreedom : null, unit };
}
