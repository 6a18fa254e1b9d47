/** Noise apart from curvature: what a record does from row to row, not how it bends. */
export interface Noise {
  readonly residuals: Float64Array;
  /** Constants fitted to the rows. */
  readonly fitted: number;
}

/** Noise of y about a smooth curve in x: residuals of a cubic (fewer powers where rows are few), by orthogonal polynomials. */
export function aboutSmoothCurve(x: Float64Array, y: Float64Array): Noise {
  const powers = x.length >= 10 ? 3 : x.length >= 6 ? 2 : 1;
  const residuals = Float64Array.from(y);
  let before = new Float64Array(x.length);
  let basis = new Float64Array(x.length).fill(1);
  let normBefore = 1;
  for (let power = 0; power <= powers; power += 1) {
    let [norm, moment, projection] = [0, 0, 0];
    for (let i = 0; i < x.length; i += 1) {
      norm += basis[i]! ** 2;
      moment += x[i]! * basis[i]! ** 2;
      projection += residuals[i]! * basis[i]!;
    }
    if (!(norm > 0)) return { residuals, fitted: power };
    for (let i = 0; i < x.length; i += 1) residuals[i]! -= (projection / norm) * basis[i]!;
    const next = basis.map((b, i) => (x[i]! - moment / norm) * b - (power === 0 ? 0 : norm / normBefore) * before[i]!);
    [before, basis, normBefore] = [basis, next, norm];
  }
  return { residuals, fitted: powers + 1 };
}
