/**
 * Draws from the distributions of a model's inputs (JCGM 101 clause 6.4): normal; scaled and shifted t where the degrees of
 * freedom are few; rectangular, triangular and arcsine of the half-width that has the stated standard uncertainty.
 * Correlated inputs are drawn jointly normal through the Cholesky factor of their correlation matrix (6.4.8).
 */
import type { InputSpec, Model } from './model';
import type { RandomStream } from './random-stream';

/** Beyond this many degrees of freedom t is drawn as normal: its 95 % quantile is then within 0.03 % of it. */
const ENOUGH = 2000;

function fillOne(input: InputSpec, out: Float64Array, random: RandomStream): void {
  const { value, standardUncertainty: u, distribution, degreesOfFreedom } = input;
  const few = (distribution === 't' || distribution === 'normal') && degreesOfFreedom < ENOUGH;
  for (let i = 0; i < out.length; i += 1) {
    if (u === 0) out[i] = value;
    else if (few) out[i] = value + u * random.studentT(degreesOfFreedom);
    else if (distribution === 'rectangular') out[i] = value + u * Math.sqrt(3) * (2 * random.uniform() - 1);
    else if (distribution === 'triangular') out[i] = value + u * Math.sqrt(6) * (random.uniform() + random.uniform() - 1);
    else if (distribution === 'arcsine') out[i] = value + u * Math.SQRT2 * Math.sin(Math.PI * (2 * random.uniform() - 1));
    else out[i] = value + u * random.normal();
  }
}

/** Positions of inputs that are correlated with another. */
export function correlatedInputs(model: Model): number[] {
  return [...new Set([...model.correlations.keys()].flatMap((key) => key.split(',').map(Number)))].sort((a, b) => a - b);
}

/** Lower triangular L with L Lᵀ = R. @throws RangeError when R is not positive semidefinite */
function cholesky(r: readonly (readonly number[])[]): number[][] {
  const n = r.length;
  const L = Array.from({ length: n }, () => new Array<number>(n).fill(0));
  const get = (i: number, j: number) => L[i]?.[j] ?? 0;
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let sum = r[i]?.[j] ?? 0;
      for (let k = 0; k < j; k += 1) sum -= get(i, k) * get(j, k);
      const row = L[i];
      if (row === undefined) continue;
      if (i === j) {
        if (sum < -1e-9) throw new RangeError('The correlations contradict one another');
        row[j] = Math.sqrt(Math.max(sum, 0));
      } else row[j] = get(j, j) > 0 ? sum / get(j, j) : 0;
    }
  }
  return L;
}

export class Sampler {
  private readonly joint: readonly number[];
  private readonly factor: readonly (readonly number[])[];

  constructor(private readonly model: Model, private readonly random: RandomStream) {
    this.joint = correlatedInputs(model);
    this.factor = cholesky(this.joint.map((i) => this.joint.map((j) => model.correlation(i, j))));
  }

  /** Fills one array of trials for each input, all of the same length. */
  fill(trials: readonly Float64Array[]): void {
    this.model.inputs.forEach((input, i) => {
      const out = trials[i];
      if (out !== undefined && !this.joint.includes(i)) fillOne(input, out, this.random);
    });
    if (this.joint.length > 0) this.fillJoint(trials);
  }

  private fillJoint(trials: readonly Float64Array[]): void {
    const count = trials[0]?.length ?? 0;
    const z = new Float64Array(this.joint.length);
    for (let trial = 0; trial < count; trial += 1) {
      for (let k = 0; k < z.length; k += 1) z[k] = this.random.normal();
      this.joint.forEach((i, k) => {
        const input = this.model.inputs[i];
        const out = trials[i];
        if (input === undefined || out === undefined) return;
        let drawn = 0;
        for (let m = 0; m <= k; m += 1) drawn += (this.factor[k]?.[m] ?? 0) * (z[m] ?? 0);
        out[trial] = input.value + input.standardUncertainty * drawn;
      });
    }
  }
}
