/**
 * Propagation of distributions, JCGM 101: adaptive (7.9), seeded, joint for all outputs. Trials come in batches of
 * M = max(⌈100/(1 − p)⌉, 10⁴); after h ≥ 2 batches the standard deviation of the mean over batches of each output's
 * estimate, standard uncertainty and both interval ends is formed, and the trials end when twice each is below the
 * numerical tolerance. Intervals are the shortest 95 % (5.3.4). Where an input is drawn from t with ν ≤ 4, the spread of the standard
 * uncertainty over batches has no finite expectation, nor with ν ≤ 2 that of the mean: these are then not waited for.
 */
import { mean } from '../statistics/descriptive';
import type { Model, Term } from './model';
import { RandomStream } from './random-stream';
import { hasFewDegreesOfFreedom, Sampler } from './sampling';

const BATCH = 10_000;
const PROBABILITY = 0.95;
/** Settles the interval ends of an ordinary model to well within δ; beyond it a fit only takes longer. */
const MOST_TRIALS = 400_000;

export interface Propagated {
  readonly mean: number;
  readonly standardUncertainty: number;
  readonly low: number;
  readonly high: number;
}

export interface MonteCarlo {
  readonly trials: number;
  readonly stable: boolean;
  readonly outputs: readonly Propagated[];
  /** Of each output: twice the standard deviation of the worse interval end's mean over batches. */
  readonly endsWithin: readonly number[];
  /** Correlation matrix of the outputs over all trials. */
  readonly correlation: readonly (readonly number[])[];
}

export interface MonteCarloOptions {
  readonly seed: number;
  readonly maximumTrials?: number;
  /** Absolute numerical tolerance of each output. */
  readonly tolerances: readonly number[];
  /** Draws normal what would be drawn from t. */
  readonly asNormal?: boolean;
  readonly onProgress?: (fraction: number) => void;
}

/**
 * JCGM 101 7.9.2: u written as c·10^ℓ with c of `figures` digits; δ = ½·10^ℓ.
 * @throws RangeError unless u > 0
 */
export function numericalTolerance(u: number, figures = 1): number {
  if (!(u > 0)) throw new RangeError('A tolerance needs an uncertainty above zero');
  let exponent = Math.floor(Math.log10(u)) - (figures - 1);
  if (Math.round(u / 10 ** exponent) >= 10 ** figures) exponent += 1;
  return 0.5 * 10 ** exponent;
}

/** Shortest interval that holds the share p of sorted values. */
export function shortestInterval(sorted: Float64Array, p = PROBABILITY): { low: number; high: number } {
  const inside = Math.min(Math.ceil(p * sorted.length), sorted.length - 1);
  let best = Infinity;
  let from = 0;
  for (let i = 0; i + inside < sorted.length; i += 1) {
    const width = (sorted[i + inside] ?? Infinity) - (sorted[i] ?? -Infinity);
    if (width < best) {
      best = width;
      from = i;
    }
  }
  return { low: sorted[from] ?? Number.NaN, high: sorted[from + inside] ?? Number.NaN };
}

/** Evaluates the model's graph over arrays of trials. */
class Evaluator {
  private readonly registers: Float64Array[];

  constructor(private readonly model: Model, readonly inputs: readonly Float64Array[], length: number) {
    this.registers = Array.from({ length: model.size }, (_, i) => {
      const { operation, parameter } = model.node(i);
      if (operation === 'input') return inputs[parameter] ?? new Float64Array(length);
      return operation === 'constant' ? new Float64Array(length).fill(parameter) : new Float64Array(length);
    });
  }

  values(index: number): Float64Array {
    return this.registers[index] ?? new Float64Array(0);
  }

  run(): void {
    for (let k = 0; k < this.model.size; k += 1) {
      const { operation, left, right, parameter } = this.model.node(k);
      if (operation === 'input' || operation === 'constant') continue;
      const [out, a, b] = [this.values(k), this.values(left), operation === 'power' ? null : this.values(right)];
      evaluate(operation, out, a, b, parameter);
    }
  }
}

function evaluate(operation: 'add' | 'subtract' | 'multiply' | 'divide' | 'power', out: Float64Array, a: Float64Array, b: Float64Array | null, n: number): void {
  const length = out.length;
  if (b === null && n === 2) for (let i = 0; i < length; i += 1) out[i] = (a[i] as number) * (a[i] as number);
  else if (b === null) for (let i = 0; i < length; i += 1) out[i] = (a[i] as number) ** n;
  else if (operation === 'add') for (let i = 0; i < length; i += 1) out[i] = (a[i] as number) + (b[i] as number);
  else if (operation === 'subtract') for (let i = 0; i < length; i += 1) out[i] = (a[i] as number) - (b[i] as number);
  else if (operation === 'multiply') for (let i = 0; i < length; i += 1) out[i] = (a[i] as number) * (b[i] as number);
  else for (let i = 0; i < length; i += 1) out[i] = (a[i] as number) / (b[i] as number);
}

function summary(values: Float64Array): Propagated {
  const m = mean(values);
  let squares = 0;
  for (let i = 0; i < values.length; i += 1) squares += ((values[i] as number) - m) ** 2;
  const standardUncertainty = Math.sqrt(squares / (values.length - 1));
  return { mean: m, standardUncertainty, ...(shortestFromTails(values, m, standardUncertainty) ?? shortestInterval(values.slice().sort())) };
}

/** Beyond this many standard uncertainties lie about 8 % of a normal distribution on each side: more than the 5 % needed. */
const TAIL = 1.4;

/**
 * The same interval from the two tails alone: its lower end is among the lowest share 1 − p of the values, its upper end among
 * the highest, so the middle need not be sorted. Null where a tail is too short for that.
 */
function shortestFromTails(values: Float64Array, m: number, u: number): { low: number; high: number } | null {
  const [below, above] = [m - TAIL * u, m + TAIL * u];
  const lows = values.filter((v) => v < below).sort();
  const highs = values.filter((v) => v > above).sort();
  const inside = Math.min(Math.ceil(PROBABILITY * values.length), values.length - 1);
  const candidates = values.length - inside;
  if (lows.length < candidates || highs.length < candidates) return null;
  let [best, from] = [Infinity, 0];
  for (let i = 0; i < candidates; i += 1) {
    const width = (highs[highs.length - candidates + i] as number) - (lows[i] as number);
    if (width < best) [best, from] = [width, i];
  }
  return { low: lows[from] as number, high: highs[highs.length - candidates + from] as number };
}

type Part = keyof Propagated;

function awaitedParts(model: Model, asNormal: boolean): readonly Part[] {
  const fewest = asNormal ? Infinity : Math.min(Infinity, ...model.inputs.filter(hasFewDegreesOfFreedom).map((input) => input.degreesOfFreedom));
  return [...(fewest > 2 ? (['mean'] as const) : []), ...(fewest > 4 ? (['standardUncertainty'] as const) : []), 'low', 'high'];
}

/** Twice the standard deviation of the mean over h batches of one part of output k. */
function spreadOf(batches: readonly (readonly Propagated[])[], k: number, part: Part): number {
  const h = batches.length;
  const z = batches.map((batch) => batch[k]?.[part] ?? Number.NaN);
  const m = z.reduce((sum, v) => sum + v, 0) / h;
  return 2 * Math.sqrt(z.reduce((sum, v) => sum + (v - m) ** 2, 0) / (h * (h - 1)));
}

function correlationOf(outputs: readonly Float64Array[], summaries: readonly Propagated[]): number[][] {
  return outputs.map((x, i) =>
    outputs.map((y, j) => {
      if (i === j) return 1;
      const [mx, my] = [summaries[i]?.mean ?? 0, summaries[j]?.mean ?? 0];
      let sum = 0;
      for (let t = 0; t < x.length; t += 1) sum += ((x[t] as number) - mx) * ((y[t] as number) - my);
      return sum / (x.length - 1) / ((summaries[i]?.standardUncertainty ?? 1) * (summaries[j]?.standardUncertainty ?? 1));
    }),
  );
}

/** @throws RangeError when outputs and tolerances differ in number or belong to several models */
export function propagateDistributions(outputs: readonly Term[], options: MonteCarloOptions): MonteCarlo {
  const model = outputs[0]?.model;
  if (model === undefined || outputs.length !== options.tolerances.length || outputs.some((o) => o.model !== model)) throw new RangeError('Give outputs of one model, each with a tolerance');
  const maximum = Math.max(2, Math.floor((options.maximumTrials ?? MOST_TRIALS) / BATCH));
  const inputs = model.inputs.map(() => new Float64Array(BATCH));
  const sampler = new Sampler(model, new RandomStream(options.seed), options.asNormal);
  const awaited = awaitedParts(model, options.asNormal ?? false);
  const evaluator = new Evaluator(model, inputs, BATCH);
  const kept: Float64Array[][] = outputs.map(() => []);
  const batches: Propagated[][] = [];
  let stable = false;
  while (batches.length < maximum && !stable) {
    sampler.fill(inputs);
    evaluator.run();
    batches.push(outputs.map((output, k) => {
      const values = evaluator.values(output.index).slice();
      kept[k]?.push(values);
      return summary(values);
    }));
    stable = batches.length > 1 && options.tolerances.every((tolerance, k) => awaited.every((part) => spreadOf(batches, k, part) < tolerance));
    options.onProgress?.(stable ? 1 : batches.length / maximum);
  }
  const all = kept.map((parts) => {
    const joined = new Float64Array(parts.length * BATCH);
    parts.forEach((part, i) => joined.set(part, i * BATCH));
    return joined;
  });
  const summaries = all.map(summary);
  return {
    trials: batches.length * BATCH, stable, outputs: summaries, correlation: correlationOf(all, summaries),
    endsWithin: outputs.map((_, k) => Math.max(spreadOf(batches, k, 'low'), spreadOf(batches, k, 'high'))),
  };
}
