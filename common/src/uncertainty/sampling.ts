/**
 * Draws from the distributions of a model's inputs (JCGM 101 clause 6.4): normal; scaled and shifted t where the degrees of
 * freedom are few; rectangular, triangular and arcsine of the half-width that has the stated standard uncertainty.
 * Correlated inputs are drawn jointly through the Cholesky factor of their correlation matrix (6.4.8): normal, or t with the
 * fewest degrees of freedom among them, the inputs of one group sharing one χ² as those of one regression do.
 */
import type { InputSpec, Model } from './model';
import type { RandomStream } from './random-stream';

/** Beyond this many degrees of freedom t is drawn as normal: its 95 % quantile is then within 0.1 % of it. */
const ENOUGH = 2000;

/** Whether an input is drawn from t. */
export function hasFewDegreesOfFreedom({ standardUncertainty, distribution, degreesOfFreedom }: InputSpec): boolean {
  return standardUncertainty > 0 && (distribution === 't' || distribution === 'normal') && degreesOfFreedom < ENOUGH;
}

function fillOne(input: InputSpec, out: Float64Array, random: RandomStream, few: boolean): void {
  const { value, standardUncertainty: u, distribution, degreesOfFreedom } = input;
  for (let i = 0; i < out.length; i += 1) {
    if (u === 0) out[i] = value;
    else if (few) out[i] = value + u * random.studentT(degreesOfFreedom);
    else if (distribution === 'rectangular') out[i] = value + u * Math.sqrt(3) * (2 * random.uniform() - 1);
    else if (distribution === 'triangular') out[i] = value + u * Math.sqrt(6) * (random.uniform() + random.uniform() - 1);
    else if (distribution === 'arcsine') out[i] = value + u * Math.SQRT2 * Math.sin(Math.PI * (2 * random.uniform() - 1));
    else out[i] = value + u * random.normal();
  }
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
      } else if (get(j, j) > 1e-6) row[j] = sum / get(j, j);
      else if (Math.abs(sum) > 1e-6) throw new RangeError('The correlations contradict one another');
    }
  }
  return L;
}

interface JointDraw {
  readonly inputs: readonly number[];
  readonly factor: readonly (readonly number[])[];
  readonly degreesOfFreedom: number;
}

export class Sampler {
  private readonly alone: readonly number[];
  private readonly joint: readonly JointDraw[];

  /**
   * @param asNormal draws normal what would be drawn from t
   * @throws RangeError when the model's correlations contradict one another
   */
  constructor(private readonly model: Model, private readonly random: RandomStream, private readonly asNormal = false) {
    const groups = model.correlationGroups();
    this.alone = groups.filter((group) => group.length === 1).flat();
    this.joint = groups.filter((group) => group.length > 1).map((inputs) => ({
      inputs,
      factor: cholesky(inputs.map((i) => inputs.map((j) => model.correlation(i, j)))),
      degreesOfFreedom: Math.min(...inputs.map((i) => model.inputs[i]?.degreesOfFreedom ?? Infinity)),
    }));
  }

  /** Fills one array of trials for each input, all of the same length. */
  fill(trials: readonly Float64Array[]): void {
    for (const i of this.alone) {
      const [input, out] = [this.model.inputs[i], trials[i]];
      if (input !== undefined && out !== undefined) fillOne(input, out, this.random, !this.asNormal && hasFewDegreesOfFreedom(input));
    }
    for (const group of this.joint) this.fillJoint(group, trials);
  }

  private fillJoint({ inputs, factor, degreesOfFreedom }: JointDraw, trials: readonly Float64Array[]): void {
    const count = trials[0]?.length ?? 0;
    const z = new Float64Array(inputs.length);
    for (let trial = 0; trial < count; trial += 1) {
      for (let k = 0; k < z.length; k += 1) z[k] = this.random.normal();
      const stretch = !this.asNormal && degreesOfFreedom < ENOUGH ? this.random.studentStretch(degreesOfFreedom) : 1;
      inputs.forEach((i, k) => {
        const [input, out] = [this.model.inputs[i], trials[i]];
        if (input === undefined || out === undefined) return;
        let drawn = 0;
        for (let m = 0; m <= k; m += 1) drawn += (factor[k]?.[m] ?? 0) * (z[m] ?? 0);
        out[trial] = input.value + input.standardUncertainty * stretch * drawn;
      });
    }
  }
}
