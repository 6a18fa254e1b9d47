import { leastSquares, residualsOf } from '../statistics/least-squares';
import { RandomStream } from '../uncertainty/random-stream';
import { chordUncertainty, slopeUncertainty } from './slope-uncertainty';

/** Scatter of fitted slopes over many records of unit slope, and the root mean square of what was claimed for each. */
function scatterAndClaim(rows: number, records: number, noiseOf: (random: RandomStream) => Float64Array): { scatter: number; claim: number } {
  const x = Float64Array.from({ length: rows }, (_, i) => i / rows);
  let squares = 0;
  let claims = 0;
  for (let seed = 0; seed < records; seed += 1) {
    const noise = noiseOf(new RandomStream(seed));
    const y = x.map((v, i) => v + noise[i]!);
    const line = leastSquares(x, y);
    squares += (line.slope - 1) ** 2;
    claims += slopeUncertainty(x, residualsOf(line, x, y), line.meanX).standardUncertainty ** 2;
  }
  return { scatter: Math.sqrt(squares / records), claim: Math.sqrt(claims / records) };
}

function autoregressive(rows: number, r: number, random: RandomStream): Float64Array {
  let e = random.normal();
  return Float64Array.from({ length: rows }, () => (e = r * e + Math.sqrt(1 - r * r) * random.normal()));
}

describe('slopeUncertainty', () => {
  it.each([0, 0.5, 0.9])('tells the scatter of slopes under residuals of lag-1 correlation %p', (r) => {
    const { scatter, claim } = scatterAndClaim(1000, 400, (random) => autoregressive(1000, r, random));
    expect(claim / scatter).toBeGreaterThan(0.85);
    expect(claim / scatter).toBeLessThan(1.2);
  });

  it('sees slow noise under white noise, which lag-1 correlation hides', () => {
    const { scatter, claim } = scatterAndClaim(2000, 400, (random) => autoregressive(2000, 0.99, random).map((e) => 0.5 * e + random.normal()));
    expect(claim / scatter).toBeGreaterThan(0.8);
    expect(claim / scatter).toBeLessThan(1.25);
  });

  it('does not credit negative correlation', () => {
    const x = Float64Array.from({ length: 20 }, (_, i) => i);
    const y = x.map((v, i) => v + (i % 2 === 0 ? 0.1 : -0.1));
    const line = leastSquares(x, y);
    expect(slopeUncertainty(x, residualsOf(line, x, y), line.meanX).standardUncertainty).toBeCloseTo(line.slopeUncertainty, 12);
  });
});

describe('chordUncertainty', () => {
  it('is √2·s/Δ between two single rows', () => {
    const residuals = Float64Array.of(1, -1, 1, -1, 1, -1);
    const { standardUncertainty } = chordUncertainty([Float64Array.of(1), Float64Array.of(1)], 10, residuals, 0);
    expect(standardUncertainty).toBeCloseTo(Math.SQRT2 / 10, 12);
  });
});
