/** The four constants as the contract states them: first order and Monte Carlo side by side, correlations and the whole budget. */
import type { BudgetLine, ConstantResult, ElasticResult, Finding, PerConstant } from '../contract/result';
import { CONSTANTS, type Basis, type ConstantName } from '../contract/vocabulary';
import { EvaluationRefused } from '../findings/evaluation-refused';
import { finding } from '../findings/findings';
import { covariance, coverageFactor, firstOrder, type FirstOrder } from './first-order';
import type { Term } from './model';
import type { Propagated } from './monte-carlo';
import { comparison, monteCarloFindings, propagate, type Known, type TrialOptions } from './monte-carlo-check';

export interface ElasticTerms extends TrialOptions {
  readonly basis: Basis;
  readonly constants: Readonly<Record<ConstantName, Term | null>>;
  readonly origin: Readonly<Record<ConstantName, 'measured' | 'derived'>>;
  readonly findings: readonly Finding[];
}

const finite = (value: number): number | null => (Number.isFinite(value) ? value : null);
const perConstant = <T>(value: (name: ConstantName) => T): PerConstant<T> => ({ E: value('E'), nu: value('nu'), G: value('G'), K: value('K') });

/**
 * @throws EvaluationRefused when a constant is not a finite number, as K is not at ν = 0.5
 * @throws RangeError when no constant is given
 */
export function elasticResult(terms: ElasticTerms): ElasticResult {
  const known = CONSTANTS.flatMap((name): Known[] => {
    const term = terms.constants[name];
    if (term === null) return [];
    const first = firstOrder(term);
    return [{ name, term, first, factor: coverageFactor(first.degreesOfFreedom) }];
  });
  if (known.length === 0) throw new RangeError('No constant to state');
  const unbounded = known.filter((k) => !Number.isFinite(k.first.value) || !Number.isFinite(k.first.standardUncertainty));
  if (unbounded.length > 0) throw new EvaluationRefused([...terms.findings, ...unbounded.map((k) => finding('CONSTANT_UNBOUNDED', k.name, `${k.name} = ${k.first.value}, standard uncertainty ${k.first.standardUncertainty}`))]);
  const trials = propagate(known, terms);
  const monteCarlo = comparison(known, trials, terms.seed);
  return {
    basis: terms.basis,
    constants: perConstant((name) => constantOf(known.find((k) => k.name === name), trials.stated.outputs[known.findIndex((k) => k.name === name)], terms.origin[name])),
    correlation: correlationMatrix(known),
    budget: budgetOf(known),
    monteCarlo,
    findings: [...terms.findings, ...constantFindings(known), ...monteCarloFindings(known, monteCarlo, trials)],
  };
}

function constantOf(known: Known | undefined, propagated: Propagated | undefined, origin: 'measured' | 'derived'): ConstantResult | null {
  if (known === undefined || propagated === undefined) return null;
  const { first, factor, name } = known;
  return {
    value: first.value, standardUncertainty: first.standardUncertainty, expandedUncertainty: factor * first.standardUncertainty, coverageFactor: factor,
    degreesOfFreedom: finite(first.degreesOfFreedom), interval: { low: propagated.low, high: propagated.high }, unit: name === 'nu' ? '1' : 'Pa', origin,
  };
}

function correlationMatrix(known: readonly Known[]): (number | null)[][] {
  return CONSTANTS.map((a) => CONSTANTS.map((b) => {
    const x = known.find((k) => k.name === a);
    const y = known.find((k) => k.name === b);
    if (x === undefined || y === undefined) return null;
    if (a === b) return 1;
    const scale = x.first.standardUncertainty * y.first.standardUncertainty;
    if (scale === 0) return 0;
    return Math.min(1, Math.max(-1, covariance(x.term.model, x.first.sensitivities, y.first.sensitivities) / scale));
  }));
}

function budgetOf(known: readonly Known[]): BudgetLine[] {
  return (known[0]?.term.model.inputs ?? []).map((input, i) => {
    const sensitivity = perConstant((name) => known.find((k) => k.name === name)?.first.sensitivities[i] ?? null);
    const contribution = perConstant((name) => {
      const k = known.find((one) => one.name === name);
      const c = sensitivity[name];
      if (k === undefined || c === null) return null;
      return k.first.standardUncertainty > 0 ? (100 * (c * input.standardUncertainty) ** 2) / k.first.standardUncertainty ** 2 : 0;
    });
    return {
      input: input.key, label: input.label, value: input.value, unit: input.unit, standardUncertainty: input.standardUncertainty, type: input.type,
      distribution: input.distribution, degreesOfFreedom: finite(input.degreesOfFreedom), source: input.source, sensitivity, contribution,
    };
  });
}

function constantFindings(known: readonly Known[]): Finding[] {
  return known.flatMap(({ name, first }) => {
    if (name === 'nu') return nuFindings(first);
    return first.value > 0 ? [] : [finding('MODULUS_NOT_POSITIVE', name, `${name} = ${(first.value / 1e9).toPrecision(3)} GPa`)];
  });
}

function nuFindings(first: FirstOrder): Finding[] {
  const nu = first.value;
  if (!(nu > -1 && nu < 0.5)) return [finding('NU_OUTSIDE_RANGE', 'nu', `ν = ${nu.toFixed(4)}`)];
  // Zero within its own uncertainty is not auxetic.
  if (nu + 2 * first.standardUncertainty < 0) return [finding('NU_NEGATIVE', 'nu', `ν = ${nu.toFixed(4)}`)];
  const amplification = (2 * first.standardUncertainty) / (1 - 2 * nu);
  return amplification > 0.2 ? [finding('NU_ILL_CONDITIONED', 'nu', `ν = ${nu.toFixed(4)}: K is uncertain by ${(100 * amplification).toFixed(0)} % through ν alone`)] : [];
}
