/** What the first order leaves out: curvature of the model over the width of its inputs. */
import type { Term } from './model';

/** Step of the differences, in standard uncertainties. */
const STEP = 1e-2;

/**
 * Standard uncertainty with the terms of next higher order, for independent normal inputs:
 * u² = Σᵢ fᵢ² uᵢ² + Σᵢ Σⱼ (½ fᵢⱼ² + fᵢ fᵢⱼⱼ) uᵢ² uⱼ² (JCGM 100 5.1.2 Note). fᵢⱼ and fᵢⱼⱼ are central differences of the exact
 * gradient over 0.01 uⱼ. Null where inputs are correlated: the formula does not hold then.
 */
export function secondOrderUncertainty(term: Term): number | null {
  const { model } = term;
  if (model.correlations.size > 0) return null;
  const x = Float64Array.from(model.inputs, (input) => input.value);
  const u = Float64Array.from(model.inputs, (input) => input.standardUncertainty);
  const gradientAt = (j: number, shift: number) => model.gradient(term, model.nodeValues(x.with(j, (x[j] ?? 0) + shift)));
  const first = model.gradient(term);
  let variance = 0;
  first.forEach((f, i) => {
    variance += (f * (u[i] ?? 0)) ** 2;
  });
  u.forEach((uj, j) => {
    const h = STEP * uj;
    if (h === 0) return;
    const above = gradientAt(j, h);
    const below = gradientAt(j, -h);
    first.forEach((f, i) => {
      const mixed = ((above[i] ?? 0) - (below[i] ?? 0)) / (2 * h);
      const third = ((above[i] ?? 0) - 2 * f + (below[i] ?? 0)) / (h * h);
      variance += (0.5 * mixed ** 2 + f * third) * (u[i] ?? 0) ** 2 * uj ** 2;
    });
  });
  return variance >= 0 ? Math.sqrt(variance) : null;
}
