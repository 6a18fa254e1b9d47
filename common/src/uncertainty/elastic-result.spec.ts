import { elasticResult as schema, type Finding } from '../contract/result';
import { CONSTANTS } from '../contract/vocabulary';
import { constantsOfEandNu, constantsOfVelocities } from '../elasticity/constants-of-terms';
import { EvaluationRefused } from '../findings/evaluation-refused';
import { finding } from '../findings/findings';
import { elasticResult } from './elastic-result';
import { Model, type InputSpec, type Term } from './model';

const input = (model: Model, key: string, value: number, u: number, more: Partial<InputSpec> = {}): Term =>
  model.input({ key, label: key, unit: '1', value, standardUncertainty: u, type: 'B', distribution: 'normal', degreesOfFreedom: Infinity, source: 'test', ...more });
const ORIGIN = { E: 'measured', nu: 'measured', G: 'derived', K: 'derived' } as const;
const codes = (findings: readonly Finding[]) => findings.map((f) => `${f.code} ${f.subject}`);

function fromEandNu(E: number, uE: number, nu: number, uNu: number, maximumTrials?: number) {
  const model = new Model();
  return elasticResult({ basis: 'static', constants: constantsOfEandNu(input(model, 'E', E, uE), input(model, 'nu', nu, uNu)), origin: ORIGIN, findings: [], seed: 1, maximumTrials });
}

describe('elasticResult', () => {
  it('states value, uncertainty, correlations, budget and Monte Carlo of a metal, and has nothing to warn of', () => {
    const result = fromEandNu(70e9, 0.7e9, 0.33, 0.005);
    expect(schema.parse(result)).toEqual(result);
    expect(result.findings).toEqual([]);
    expect(result.monteCarlo).toMatchObject({ seed: 1, agrees: true });
    const { E, nu, G, K } = result.constants;
    expect(E).toMatchObject({ value: 70e9, standardUncertainty: 0.7e9, degreesOfFreedom: null, unit: 'Pa', origin: 'measured' });
    expect(E?.coverageFactor).toBeCloseTo(1.96, 3);
    expect(nu).toMatchObject({ unit: '1', origin: 'measured' });
    expect(G).toMatchObject({ unit: 'Pa', origin: 'derived' });
    // (u(K)/K)² = (u(E)/E)² + (2u(ν)/(1 − 2ν))²
    expect((K?.standardUncertainty ?? 0) / (K?.value ?? 1)).toBeCloseTo(Math.hypot(0.01, 0.01 / 0.34), 12);
    for (const name of CONSTANTS) {
      const c = result.constants[name];
      const half = ((c?.interval.high ?? 0) - (c?.interval.low ?? 0)) / 2;
      expect(half / (c?.expandedUncertainty ?? 1)).toBeCloseTo(1, 1);
      expect(result.budget.reduce((sum, line) => sum + (line.contribution[name] ?? 0), 0)).toBeCloseTo(100, 10);
    }
  });

  it('gives the correlation matrix that the shared inputs make', () => {
    const { correlation } = fromEandNu(70e9, 0.7e9, 0.33, 0.005);
    const G = { E: 0.01, nu: -0.005 / 1.33 };
    const K = { E: 0.01, nu: 0.01 / 0.34 };
    expect(correlation[0]).toEqual([1, 0, expect.closeTo(G.E / Math.hypot(G.E, G.nu), 10), expect.closeTo(K.E / Math.hypot(K.E, K.nu), 10)]);
    expect(correlation[2]?.[3]).toBeCloseTo((G.E * K.E + G.nu * K.nu) / Math.hypot(G.E, G.nu) / Math.hypot(K.E, K.nu), 10);
    expect(correlation).toEqual(correlation.map((_, i) => correlation.map((row) => row[i])));
  });

  it('leaves out what the run cannot tell', () => {
    const result = elasticResult({ basis: 'static', constants: constantsOfEandNu(input(new Model(), 'E', 70e9, 1e9), null), origin: ORIGIN, findings: [finding('TRANSVERSE_MISSING', 'transverse', 'none')], seed: 1 });
    expect(result.constants).toMatchObject({ nu: null, G: null, K: null });
    expect(result.correlation).toEqual([[1, null, null, null], [null, null, null, null], [null, null, null, null], [null, null, null, null]]);
    expect(result.budget[0]?.contribution).toEqual({ E: expect.closeTo(100, 10), nu: null, G: null, K: null });
    expect(result.monteCarlo.comparison).toMatchObject({ nu: null, G: null, K: null });
    expect(codes(result.findings)).toEqual(['TRANSVERSE_MISSING transverse']);
  });

  it('ends, and says what it found, where ν close to 0.5 spreads K without bound', () => {
    const result = fromEandNu(3e6, 3e4, 0.49, 0.01, 200_000);
    expect(schema.parse(result)).toEqual(result);
    expect(codes(result.findings)).toEqual(expect.arrayContaining(['NU_ILL_CONDITIONED nu', 'MONTE_CARLO_DISAGREES K', 'MONTE_CARLO_UNSTABLE Monte Carlo']));
    expect(result.monteCarlo).toMatchObject({ agrees: false, trials: 200_000 });
    expect(result.monteCarlo.comparison.E?.agrees).toBe(true);
    expect(result.findings.find((f) => f.code === 'MONTE_CARLO_DISAGREES')?.seen).toContain('second order');
  });

  it('judges the propagation apart from few readings: their long tails widen the interval and are a note, no disagreement', () => {
    const run = (degreesOfFreedom: number) => {
      const model = new Model();
      const E = input(model, 'a', 70e9, 0.5e9, { distribution: 't', degreesOfFreedom }).plus(input(model, 'b', 0, 0.5e9, { distribution: 't', degreesOfFreedom }));
      return elasticResult({ basis: 'static', constants: { E, nu: null, G: null, K: null }, origin: ORIGIN, findings: [], seed: 1 });
    };
    const few = run(3);
    expect(few.monteCarlo.agrees).toBe(true);
    expect(codes(few.findings)).toEqual(['FEW_DEGREES_OF_FREEDOM E']);
    expect(few.findings[0]?.severity).toBe('note');
    const width = (result: typeof few) => (result.constants.E?.interval.high ?? 0) - (result.constants.E?.interval.low ?? 0);
    // The 97.5 % point of the sum of two t of 3 degrees of freedom is 4.5876, by quadrature of their convolution.
    expect(Math.abs(width(few) / (2 * 0.5e9) / 4.5876 - 1)).toBeLessThan(0.03);
    expect(few.constants.E).toMatchObject({ degreesOfFreedom: expect.closeTo(6, 9), coverageFactor: expect.closeTo(2.4469, 4) });
    expect(run(60).findings).toEqual([]);
  });

  it.each([
    { nu: 0.52, u: 0.01, expected: ['NU_OUTSIDE_RANGE nu', 'MODULUS_NOT_POSITIVE K'] },
    { nu: -0.35, u: 0.01, expected: ['NU_NEGATIVE nu'] },
    { nu: -0.005, u: 0.01, expected: [] },
    { nu: -1.2, u: 0.01, expected: ['NU_OUTSIDE_RANGE nu', 'MODULUS_NOT_POSITIVE G'] },
  ])('judges ν = $nu', ({ nu, u, expected }) => {
    expect(codes(fromEandNu(70e9, 1e9, nu, u, 20_000).findings).filter((code) => !code.startsWith('MONTE_CARLO'))).toEqual(expected);
  });

  it('refuses where a constant has no finite value', () => {
    const refused = (() => {
      try {
        return fromEandNu(70e9, 1e9, 0.5, 0.01);
      } catch (error) {
        return error;
      }
    })();
    expect(refused).toBeInstanceOf(EvaluationRefused);
    expect(refused instanceof EvaluationRefused ? codes(refused.findings) : []).toEqual(['CONSTANT_UNBOUNDED K']);
    const none = { E: null, nu: null, G: null, K: null };
    expect(() => elasticResult({ basis: 'static', constants: none, origin: ORIGIN, findings: [], seed: 1 })).toThrow(RangeError);
  });

  it('takes a calibration that two readings share as one input, in the budget once', () => {
    const model = new Model();
    const zero = input(model, 'zero', 0, 1e-8);
    const [tP, tS] = [model.constant(8.5e-6).minus(zero), model.constant(15.5e-6).minus(zero)];
    const result = elasticResult({ basis: 'dynamic', constants: constantsOfVelocities(model.constant(7850), model.constant(0.05).over(tP), model.constant(0.05).over(tS)), origin: ORIGIN, findings: [], seed: 1 });
    expect(result.budget.map((line) => line.input)).toEqual(['zero']);
    for (const row of result.correlation) for (const r of row) expect(Math.abs(r ?? 0)).toBeCloseTo(1, 12);
  });

  it('is the same, byte for byte, for the same seed, and tells its progress to the end', () => {
    const progress: number[] = [];
    const run = () => {
      const model = new Model();
      return elasticResult({ basis: 'static', constants: constantsOfEandNu(input(model, 'E', 70e9, 1e9), input(model, 'nu', 0.3, 0.01, { distribution: 't', degreesOfFreedom: 9 })), origin: ORIGIN, findings: [], seed: 42, maximumTrials: 60_000, onProgress: (f) => progress.push(f) });
    };
    expect(JSON.stringify(run())).toBe(JSON.stringify(run()));
    expect(progress.at(-1)).toBe(1);
    expect(progress.slice(0, progress.indexOf(1))).toEqual(progress.slice(0, progress.indexOf(1)).sort((a, b) => a - b));
  });
});
