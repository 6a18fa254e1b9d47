/** Trials for the constants of one result: the intervals to state, and whether they bear the first order out. */
import type { Finding, MonteCarloCheck, PerConstant } from '../contract/result';
import { CONSTANTS, type ConstantName } from '../contract/vocabulary';
import { finding } from '../findings/findings';
import { coverageFactor, type FirstOrder } from './first-order';
import type { Term } from './model';
import { numericalTolerance, propagateDistributions, type MonteCarlo } from './monte-carlo';
import { hasFewDegreesOfFreedom } from './sampling';
import { secondOrderUncertainty } from './second-order';

/** A constant that the run determines. */
export interface Known {
  readonly name: ConstantName;
  readonly term: Term;
  readonly first: FirstOrder;
  /** k of the first order. */
  readonly factor: number;
}

export interface Trials {
  /** Behind the stated intervals: inputs of few degrees of freedom drawn from t. */
  readonly stated: MonteCarlo;
  /** Behind the comparison: those inputs drawn normal. The same as `stated` where there are none. */
  readonly compared: MonteCarlo;
  /** δ of each constant: half a unit of the first figure of u (JCGM 101 7.9.2). */
  readonly tolerances: readonly number[];
}

export interface TrialOptions {
  readonly seed: number;
  readonly maximumTrials?: number;
  readonly onProgress?: (fraction: number) => void;
}

/** Interval ends that are only stated settle to this share of U, or to δ/5 where that is more. */
const STATED_WITHIN = 0.03;

/** Trials that are compared settle to δ/5 (JCGM 101 8.2). */
export function propagate(known: readonly Known[], { seed, maximumTrials, onProgress }: TrialOptions): Trials {
  const outputs = known.map((k) => k.term);
  const tolerances = known.map(({ first: { standardUncertainty: u } }) => (u > 0 ? numericalTolerance(u) : Number.MIN_VALUE));
  const settled = tolerances.map((delta) => delta / 5);
  const run = (asNormal: boolean, within: readonly number[], from: number, to: number) =>
    propagateDistributions(outputs, { seed, maximumTrials, asNormal, tolerances: within, onProgress: (fraction) => onProgress?.(from + (to - from) * fraction) });
  if (outputs[0]?.model.inputs.some(hasFewDegreesOfFreedom) !== true) {
    const trials = run(false, settled, 0, 1);
    return { stated: trials, compared: trials, tolerances };
  }
  const stated = run(false, known.map(({ factor, first }, i) => Math.max(settled[i] ?? 0, STATED_WITHIN * factor * first.standardUncertainty)), 0, 0.3);
  return { stated, compared: run(true, settled, 0.3, 1), tolerances };
}

/**
 * JCGM 101 8.1. What is compared is the propagation: y ± 1.96 u against trials of the same standard uncertainties. With the t
 * distributions of few readings the two intervals differ even for a plain sum (effective degrees of freedom against long tails),
 * which says nothing of the model; a finding of its own tells of that.
 */
export function comparison(known: readonly Known[], { stated, compared, tolerances }: Trials, seed: number): MonteCarloCheck {
  const compare = (name: ConstantName) => {
    const i = known.findIndex((one) => one.name === name);
    const [k, p, tolerance] = [known[i], compared.outputs[i], tolerances[i]];
    if (k === undefined || p === undefined || tolerance === undefined) return null;
    const U = coverageFactor(Infinity) * k.first.standardUncertainty;
    const [lowDifference, highDifference] = [Math.abs(k.first.value - U - p.low), Math.abs(k.first.value + U - p.high)];
    return { lowDifference, highDifference, tolerance, agrees: lowDifference <= tolerance && highDifference <= tolerance };
  };
  const perName: PerConstant<ReturnType<typeof compare>> = { E: compare('E'), nu: compare('nu'), G: compare('G'), K: compare('K') };
  return { trials: stated.trials, seed, agrees: CONSTANTS.every((name) => perName[name]?.agrees ?? true), comparison: perName };
}

export function monteCarloFindings(known: readonly Known[], check: MonteCarloCheck, trials: Trials): Finding[] {
  const disagreeing = known.flatMap((k) => {
    const c = check.comparison[k.name];
    return c === null || c.agrees ? [] : [finding('MONTE_CARLO_DISAGREES', k.name, disagreement(k, c))];
  });
  return [...disagreeing, ...longTails(known, trials), ...unsettled(trials)];
}

/** Says as well what curvature of the model would account for, where that can be told. */
function disagreement({ name, term, first }: Known, c: { lowDifference: number; highDifference: number; tolerance: number }): string {
  const [scale, unit] = name === 'nu' ? [1, ''] : [1e9, ' GPa'];
  const text = (value: number) => `${(value / scale).toPrecision(2)}${unit}`;
  const second = secondOrderUncertainty(term);
  const curvature = second === null ? '' : `; the terms of second order alone take u from ${text(first.standardUncertainty)} to ${text(second)}`;
  return `The ends of the 95 % intervals of ${name} differ by ${text(c.lowDifference)} and ${text(c.highDifference)}, more than ${text(c.tolerance)}${curvature}`;
}

/** From this share on the longer tails of few readings are worth a word. */
const WIDER = 1.1;

function longTails(known: readonly Known[], { stated, compared }: Trials): Finding[] {
  if (stated === compared) return [];
  const widths = known.map(({ name, first, factor }, i) => {
    const { low = Number.NaN, high = Number.NaN } = stated.outputs[i] ?? {};
    return { name, ratio: (high - low) / (2 * factor * first.standardUncertainty) };
  });
  const [widest] = widths.sort((a, b) => b.ratio - a.ratio);
  if (widest === undefined || !(widest.ratio > WIDER)) return [];
  return [finding('FEW_DEGREES_OF_FREEDOM', widest.name, `The Monte Carlo interval of ${widest.name} is ${widest.ratio.toFixed(1)} times as wide as ± U`)];
}

function unsettled({ stated, compared, tolerances }: Trials): Finding[] {
  const settled = (trials: MonteCarlo) => trials.stable || trials.endsWithin.every((within, i) => within <= (tolerances[i] ?? 0));
  return settled(stated) && settled(compared) ? [] : [finding('MONTE_CARLO_UNSTABLE', 'Monte Carlo', `${Math.max(stated.trials, compared.trials)} trials`)];
}
