import { RandomStream } from '../uncertainty/random-stream';
import { BlockMoments, leastResidualWindow, shearTangency, stressKnots } from './least-residual-window';
import { residualSumOf, slopeOf } from './moments';

const E = 70e9;
const TOE = 0.0004;
const YIELD = 0.003;

function stressAt(strain: number): number {
  if (strain < TOE) return (E * strain * strain) / (2 * TOE);
  if (strain <= YIELD) return E * (strain - TOE / 2);
  return E * (YIELD - TOE / 2) + 60e6 * (1 - Math.exp((-E * (strain - YIELD)) / 60e6));
}

function record(strains: ArrayLike<number>, noise: number, seed: number): { x: Float64Array; y: Float64Array } {
  const random = new RandomStream(seed);
  const x = Float64Array.from(strains);
  return { x, y: x.map((v) => stressAt(v) + noise * random.normal()) };
}

const even = (rows: number, end = 0.008): number[] => Array.from({ length: rows }, (_, i) => (end * i) / (rows - 1));

/** The rule as methods give it, without trimming: least q over windows of equal rows, each holding a fifth of the rows. */
function plainLeastResidual(x: Float64Array, y: Float64Array): number {
  const rows = shearTangency(x, y) + 1;
  const blocks = new BlockMoments(x, y, Array.from({ length: 101 }, (_, k) => Math.round((k * rows) / 100)));
  let best = { q: Infinity, slope: Number.NaN };
  for (let i = 0; i <= 80; i += 1) {
    for (let j = i + 20; j <= 100; j += 1) {
      const m = blocks.between(i, j);
      const slope = slopeOf(m);
      const rise = slope * (x[blocks.knots[j]! - 1]! - x[blocks.knots[i]!]!);
      const quarter = Math.round((j - i) / 4);
      const straight = [blocks.between(i, i + quarter), blocks.between(j - quarter, j)].every((part) => Math.abs(slopeOf(part) / slope - 1) <= 0.05);
      const q = Math.sqrt(residualSumOf(m) / (m.n - 2)) / rise;
      if (straight && rise >= 0.4 * (y[rows - 1]! - y[0]!) && q < best.q) best = { q, slope };
    }
  }
  return best.slope;
}

describe('leastResidualWindow', () => {
  it('finds the straight part of an exact record and nothing of toe or yield', () => {
    const { x, y } = record(even(400), 0, 1);
    const choice = leastResidualWindow(x, y)!;
    expect(choice.easing).toBe(0);
    expect(choice.window.slope / E - 1).toBeCloseTo(0, 9);
    expect(x[choice.window.from]!).toBeGreaterThanOrEqual(TOE - 2e-5);
    expect(x[choice.window.from]!).toBeLessThan(TOE + 4e-5);
    expect(x[choice.window.to]!).toBeLessThanOrEqual(YIELD + 2e-5);
    expect(x[choice.window.to]!).toBeGreaterThan(YIELD - 4e-5);
  });

  it('cuts at the tangency of the sheared branch, and not at all where the branch never bows upwards', () => {
    const bowed = record(even(400), 0, 1);
    const tangency = bowed.x[shearTangency(bowed.x, bowed.y)]!;
    expect(tangency).toBeGreaterThan(YIELD);
    expect(tangency).toBeLessThan(0.0045);
    const straight = record(even(400, YIELD), 0, 1);
    expect(shearTangency(straight.x, straight.y)).toBe(399);
  });

  it('halves the error of plain least q in a dense noisy record, whose toe hides in the noise', () => {
    let [plain, trimmed] = [0, 0];
    const seeds = 10;
    for (let seed = 1; seed <= seeds; seed += 1) {
      const { x, y } = record(even(20_000), 1e6, seed);
      plain += (plainLeastResidual(x, y) / E - 1) ** 2 / seeds;
      trimmed += (leastResidualWindow(x, y)!.window.slope / E - 1) ** 2 / seeds;
    }
    expect(Math.sqrt(trimmed)).toBeLessThan(0.001);
    expect(Math.sqrt(trimmed)).toBeLessThan(0.5 * Math.sqrt(plain));
  });

  it('is not worse than plain least q in a record with little noise', () => {
    let [plain, trimmed] = [0, 0];
    for (let seed = 1; seed <= 40; seed += 1) {
      const { x, y } = record(even(400), 0.2e6, seed);
      plain += (plainLeastResidual(x, y) / E - 1) ** 2;
      trimmed += (leastResidualWindow(x, y)!.window.slope / E - 1) ** 2;
    }
    expect(trimmed).toBeLessThan(1.1 * plain);
  });

  it('finds the straight part where most rows rest at zero or crowd past yield', () => {
    const rest = Array<number>(1000).fill(0);
    const crowded = [...rest, ...even(300, 0.0035), ...Array.from({ length: 3000 }, (_, i) => 0.0035 + (0.03 * i) / 3000)];
    const { x, y } = record(crowded, 0.2e6, 3);
    const choice = leastResidualWindow(x.subarray(1000), y.subarray(1000))!;
    expect(choice.easing).toBe(0);
    expect(Math.abs(choice.window.slope / E - 1)).toBeLessThan(0.002);
    expect(plainLeastResidual(x, y)).toBeNaN();
  });

  it('eases its tests for a record that is nowhere straight, and says how far', () => {
    const x = Float64Array.from(even(200, 0.01));
    const choice = leastResidualWindow(x, x.map((v) => 1e8 * Math.sqrt(v)))!;
    expect(choice.easing).toBeGreaterThan(0);
  });

  it('finds none in too few rows', () => {
    expect(leastResidualWindow(Float64Array.of(0, 1, 2, 3), Float64Array.of(0, 1, 2, 3))).toBeNull();
  });

  it('puts knots at equal steps of stress, midway between the passages of a noisy branch', () => {
    const { y } = record(even(5000, YIELD), 0.5e6, 2);
    const knots = stressKnots(y, y.length);
    expect(knots[0]).toBe(0);
    expect(knots.at(-1)).toBe(5000);
    expect(knots.every((k, i) => i === 0 || k > knots[i - 1]!)).toBe(true);
    const middle = stressAt((YIELD * knots[60]!) / 4999);
    expect(Math.abs(middle / ((y[0]! + y[4999]!) / 2) - 1)).toBeLessThan(0.02);
  });
});
