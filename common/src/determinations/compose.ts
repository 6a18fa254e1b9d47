/**
 * One determination from the adopted fits of one specimen on one basis.
 *
 * One fit: its result stands as it is. Several: the mean of the measured pair is taken and the budgets are merged by input,
 * yᵢ linear in its inputs, ȳ = (1/n) Σ yᵢ, ∂ȳ/∂x = (1/n) Σ ∂yᵢ/∂x. An input that several fits share (same key, value and
 * uncertainty: a calibration, the specimen's length) enters once, so that common terms are never divided by √n
 * (JCGM 100 5.2.2). Static fits average E and ν and derive G and K; dynamic ones average G and K, which stay
 * well conditioned as ν → 0.5, and derive E and ν.
 */
import type { BudgetLine, ElasticResult, Finding } from '../contract/result';
import type { Basis, ConstantName } from '../contract/vocabulary';
import { finding } from '../findings/findings';
import { elasticResult } from '../uncertainty/elastic-result';
import { Model, type Term } from '../uncertainty/model';

export interface AdoptedFit {
  readonly id: string;
  readonly result: ElasticResult;
}

export interface Agreement {
  constant: ConstantName;
  fits: [string, string];
  values: [number, number];
  /** |difference| over its expanded uncertainty (k = 2), common terms cancelled; agrees when ≤ 1. */
  en: number;
  agrees: boolean;
}

const inputIdentity = (line: BudgetLine): string => JSON.stringify([line.input, line.value, line.standardUncertainty]);

function measuredPair(basis: Basis): readonly [ConstantName, ConstantName] {
  return basis === 'static' ? ['E', 'nu'] : ['G', 'K'];
}

/** Whether each pair of fits agrees on each measured constant, judged by the uncertainty of the difference. */
export function agreements(fits: readonly AdoptedFit[], basis: Basis): Agreement[] {
  const found: Agreement[] = [];
  fits.forEach((a, i) => {
    for (const b of fits.slice(i + 1)) {
      for (const constant of measuredPair(basis)) {
        const agreement = agreementOf(a, b, constant);
        if (agreement !== null) found.push(agreement);
      }
    }
  });
  return found;
}

function agreementOf(a: AdoptedFit, b: AdoptedFit, constant: ConstantName): Agreement | null {
  const [x, y] = [a.result.constants[constant], b.result.constants[constant]];
  if (x === null || y === null) return null;
  const sensitivities = new Map<string, { difference: number; u: number }>();
  const add = (line: BudgetLine, factor: number) => {
    const key = inputIdentity(line);
    const entry = sensitivities.get(key) ?? { difference: 0, u: line.standardUncertainty };
    entry.difference += factor * (line.sensitivity[constant] ?? 0);
    sensitivities.set(key, entry);
  };
  a.result.budget.forEach((line) => add(line, 1));
  b.result.budget.forEach((line) => add(line, -1));
  const u = Math.sqrt([...sensitivities.values()].reduce((sum, s) => sum + (s.difference * s.u) ** 2, 0));
  const difference = Math.abs(x.value - y.value);
  const en = u > 0 ? difference / (2 * u) : difference > 0 ? Infinity : 0;
  return { constant, fits: [a.id, b.id], values: [x.value, y.value], en, agrees: en <= 1 };
}

/** Gives every distinct input a key: its own, numbered from the second fit on where fits differ in it. */
function inputKeys(fits: readonly AdoptedFit[]): ReadonlyMap<string, string> {
  const keys = new Map<string, string>();
  const uses = new Map<string, number>();
  for (const line of fits.flatMap((f) => f.result.budget)) {
    const identity = inputIdentity(line);
    if (keys.has(identity)) continue;
    const n = (uses.get(line.input) ?? 0) + 1;
    uses.set(line.input, n);
    keys.set(identity, n === 1 ? line.input : `${line.input}.${n}`);
  }
  return keys;
}

function meanTerm(model: Model, fits: readonly AdoptedFit[], constant: ConstantName, keys: ReadonlyMap<string, string>): Term | null {
  const having = fits.filter((f) => f.result.constants[constant] !== null);
  if (having.length === 0) return null;
  let sum = model.constant(0);
  for (const { result } of having) {
    let value = model.constant(result.constants[constant]?.value ?? Number.NaN);
    for (const line of result.budget) {
      const c = line.sensitivity[constant];
      if (c === null || c === 0) continue;
      const input = model.input({
        key: keys.get(inputIdentity(line)) ?? line.input, label: line.label, unit: line.unit, value: line.value, standardUncertainty: line.standardUncertainty,
        type: line.type, distribution: line.distribution, degreesOfFreedom: line.degreesOfFreedom ?? Infinity, source: line.source,
      });
      value = value.plus(input.minus(line.value).times(c));
    }
    sum = sum.plus(value);
  }
  return sum.over(having.length);
}

function disagreementFindings(found: readonly Agreement[]): Finding[] {
  return found
    .filter((a) => !a.agrees)
    .map((a) => finding('FITS_DISAGREE', a.constant, `${a.constant}: ${a.values[0].toPrecision(5)} and ${a.values[1].toPrecision(5)} differ by ${a.en.toFixed(1)} times the expanded uncertainty of their difference`));
}

/**
 * @param fits adopted fits of one specimen, all of `basis`; at least one
 * @returns the determination's result; findings are those of the fits, each once, and where fits disagree
 * @throws RangeError when no fit is given or one is of another basis
 */
export function composeDetermination(fits: readonly AdoptedFit[], basis: Basis, seed: number): ElasticResult {
  const first = fits[0];
  if (first === undefined) throw new RangeError('A determination needs at least one adopted fit');
  if (fits.some((f) => f.result.basis !== basis)) throw new RangeError('Static and dynamic fits are never mixed');
  if (fits.length === 1) {
    const { basis: of, constants, correlation, budget, monteCarlo, findings } = first.result;
    return { basis: of, constants, correlation, budget, monteCarlo, findings };
  }
  const model = new Model();
  const keys = inputKeys(fits);
  const [one, other] = measuredPair(basis);
  const a = meanTerm(model, fits, one, keys);
  const b = meanTerm(model, fits, other, keys);
  const constants = basis === 'static' ? fromEandNu(a, b) : fromGandK(a, b);
  const findings = uniqueFindings([...fits.flatMap((f) => f.result.findings), ...disagreementFindings(agreements(fits, basis))]);
  return elasticResult({ basis, constants, origin: first.result.basis === 'static' ? STATIC_ORIGIN : DYNAMIC_ORIGIN, findings, seed });
}

const STATIC_ORIGIN = { E: 'measured', nu: 'measured', G: 'derived', K: 'derived' } as const;
const DYNAMIC_ORIGIN = { E: 'derived', nu: 'derived', G: 'measured', K: 'derived' } as const;

function fromEandNu(E: Term | null, nu: Term | null) {
  if (E === null || nu === null) return { E, nu, G: null, K: null };
  return { E, nu, G: E.over(nu.plus(1).times(2)), K: E.over(nu.times(-2).plus(1).times(3)) };
}

function fromGandK(G: Term | null, K: Term | null) {
  if (G === null || K === null) return { E: null, nu: null, G, K };
  const stiff = K.times(3).plus(G);
  return { E: K.times(G).times(9).over(stiff), nu: K.times(3).minus(G.times(2)).over(stiff.times(2)), G, K };
}

function uniqueFindings(all: readonly Finding[]): Finding[] {
  const seen = new Set<string>();
  return all.filter((f) => {
    const key = JSON.stringify([f.code, f.subject, f.seen]);
    return !seen.has(key) && seen.add(key) !== undefined;
  });
}

