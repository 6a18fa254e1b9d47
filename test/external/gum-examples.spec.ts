/** Worked examples of JCGM 100:2008 Annex H, to the digits printed there. Input data and results from memory; all results were recomputed from the data. */
import { correlation, mean, standardDeviation } from '@strainwright/common/statistics/descriptive';
import { leastSquares, predictionUncertainty } from '@strainwright/common/statistics/least-squares';
import { covariance, coverageFactor, firstOrder } from '@strainwright/common/uncertainty/first-order';
import { Model, type InputSpec, type Term } from '@strainwright/common/uncertainty/model';
import { secondOrderUncertainty } from '@strainwright/common/uncertainty/second-order';
import { expectPrinted, expectRelative } from './agreement';

const input = (model: Model, key: string, value: number, standardUncertainty: number, degreesOfFreedom = Infinity, distribution: InputSpec['distribution'] = 'normal'): Term =>
  model.input({ key, label: key, unit: '1', value, standardUncertainty, type: 'B', distribution, degreesOfFreedom, source: 'JCGM 100 Annex H' });

describe('H.1, end-gauge calibration', () => {
  const nm = 1e-6; // in mm
  const model = new Model();
  const standard = input(model, 'l_S', 50.000623, 25 * nm, 18);
  const difference = input(model, 'd', 215 * nm, 5.8 * nm, 24).plus(input(model, 'd_1', 0, 3.9 * nm, 5)).plus(input(model, 'd_2', 0, 6.7 * nm, 8));
  const expansion = input(model, 'alpha_S', 11.5e-6, 2e-6 / Math.sqrt(3), Infinity, 'rectangular');
  const temperature = input(model, 'theta', -0.1, 0.41);
  const expansionDifference = input(model, 'delta_alpha', 0, 1e-6 / Math.sqrt(3), 50, 'rectangular');
  const temperatureDifference = input(model, 'delta_theta', 0, 0.05 / Math.sqrt(3), 2, 'rectangular');
  const length = standard.plus(difference).minus(standard.times(expansionDifference.times(temperature).plus(expansion.times(temperatureDifference))));
  const first = firstOrder(length);

  it('gives the length and its standard uncertainty', () => {
    expectPrinted(length.value, '50.000838');
    expectPrinted(first.standardUncertainty / nm, '32');
    expectRelative(first.standardUncertainty / nm, 31.663879111008633, 1e-9);
    expectPrinted(firstOrder(difference).standardUncertainty / nm, '9.7');
  });

  it('gives effective degrees of freedom and the expanded uncertainty for 99 %', () => {
    // Printed 25.6, from 9.7⁴; without that rounding u²(d) = 93.74 nm² and ν = 93.74²/345.32.
    expectRelative(firstOrder(difference).degreesOfFreedom, 93.74 ** 2 / (5.8 ** 4 / 24 + 3.9 ** 4 / 5 + 6.7 ** 4 / 8), 1e-12);
    expect(Math.trunc(10 * first.degreesOfFreedom) / 10).toBe(16.7);
    expectRelative(first.degreesOfFreedom, 16.75257162223872, 1e-4);
    const k = coverageFactor(first.degreesOfFreedom, 0.99);
    expectPrinted(k, '2.92');
    // Printed 93 from the rounded 32 nm; 92.5 without that rounding.
    expect(Math.ceil((k * first.standardUncertainty) / nm)).toBe(93);
  });

  it('gives 34 nm with the terms of second order', () => {
    const second = secondOrderUncertainty(length) ?? Number.NaN;
    expectPrinted(second / nm, '34');
    expectRelative(second / nm, 33.84473240533522, 1e-6);
  });
});

describe('H.2, resistance, reactance and impedance measured together', () => {
  const observed = {
    V: [5.007, 4.994, 5.005, 4.99, 4.999],
    I: [19.663e-3, 19.639e-3, 19.64e-3, 19.685e-3, 19.678e-3],
    phi: [1.0456, 1.0438, 1.0468, 1.0428, 1.0433],
  };
  const model = new Model();
  const averaged = (key: keyof typeof observed) => input(model, key, mean(observed[key]), standardDeviation(observed[key]) / Math.sqrt(5), 4);
  const [V, I, phi] = [averaged('V'), averaged('I'), averaged('phi')];

  // Cosine and sine of the mean phase, linear in it: exact in value and derivative, which is all that the first order uses.
  const turned = phi.minus(phi.value);
  const cosine = turned.times(-Math.sin(phi.value)).plus(Math.cos(phi.value));
  const sine = turned.times(Math.cos(phi.value)).plus(Math.sin(phi.value));
  const Z = V.over(I);
  const [R, X] = [Z.times(cosine), Z.times(sine)];
  const u = (term: Term) => firstOrder(term).standardUncertainty;
  const r = (a: Term, b: Term) => covariance(model, model.gradient(a), model.gradient(b)) / (u(a) * u(b));

  it('ignoring the correlations gives wrong uncertainties', () => {
    expectPrinted(u(R), '0.195');
    expectPrinted(u(X), '0.201');
    expectPrinted(u(Z), '0.204');
  });

  it('gives values, uncertainties and correlations of the results', () => {
    expectPrinted(correlation(observed.V, observed.I), '-0.36');
    expectPrinted(correlation(observed.V, observed.phi), '0.86');
    expectPrinted(correlation(observed.I, observed.phi), '-0.65');
    model.correlate(V, I, correlation(observed.V, observed.I));
    model.correlate(V, phi, correlation(observed.V, observed.phi));
    model.correlate(I, phi, correlation(observed.I, observed.phi));
    expectPrinted(R.value, '127.732');
    // Printed 219.847 and 0.295, which is 219.8465 and 0.2956 without rounding on the way.
    expectRelative(X.value, 219.84651191263848, 1e-9);
    expectPrinted(Z.value, '254.260');
    expectPrinted(u(R), '0.071');
    expectRelative(u(X), 0.2955816773586383, 1e-9);
    expectPrinted(u(Z), '0.236');
    expectPrinted(r(R, X), '-0.588');
    expectPrinted(r(R, Z), '-0.485');
    expectPrinted(r(X, Z), '0.993');
    expect(firstOrder(R).degreesOfFreedom).toBeCloseTo(4, 9);
  });
});

describe('H.3, calibration of a thermometer: a straight line', () => {
  const t = [21.521, 22.012, 22.512, 23.003, 23.507, 23.999, 24.513, 25.002, 25.503, 26.01, 26.511];
  const b = [-0.171, -0.169, -0.166, -0.159, -0.164, -0.165, -0.156, -0.157, -0.159, -0.161, -0.16];
  const line = leastSquares(t.map((value) => value - 20), b);

  it('gives the line', () => {
    expectPrinted(line.intercept, '-0.1712');
    expectPrinted(line.interceptUncertainty, '0.0029');
    expectPrinted(line.slope, '0.00218');
    expectPrinted(line.slopeUncertainty, '0.00067');
    expectPrinted(line.slopeInterceptCorrelation, '-0.930');
    expectPrinted(line.residualStandardDeviation, '0.0035');
    expect(line.degreesOfFreedom).toBe(9);
    expectRelative(line.slope, '0.00218269773989', 1e-9);
    expectRelative(line.slopeUncertainty, '0.000667938773228', 1e-9);
    expectRelative(line.intercept, '-0.171203790131', 1e-9);
    expectRelative(line.interceptUncertainty, '0.00287759783516', 1e-9);
  });

  it('predicts the correction at 30 °C, by the line and by correlated inputs alike', () => {
    expectPrinted(predictionUncertainty(line, 10), '0.0041');
    const model = new Model();
    const [y1, y2] = [input(model, 'y_1', line.intercept, line.interceptUncertainty, 9), input(model, 'y_2', line.slope, line.slopeUncertainty, 9)];
    model.correlate(y1, y2, line.slopeInterceptCorrelation);
    const correction = firstOrder(y1.plus(y2.times(10)));
    expectPrinted(correction.value, '-0.1494');
    expectRelative(correction.value, '-0.149376812732', 1e-9);
    expectRelative(correction.standardUncertainty, '0.00413859575285', 1e-9);
    expectRelative(correction.degreesOfFreedom, 9, 1e-9);
  });
});

it('Welch–Satterthwaite with k of the degrees of freedom truncated down (computed here, G.4.1)', () => {
  const model = new Model();
  const sum = input(model, 'a', 1, 0.3, 4).plus(input(model, 'b', 1, 0.4)).plus(input(model, 'c', 1, 0.12, 9));
  const { standardUncertainty, degreesOfFreedom } = firstOrder(sum);
  expectRelative(standardUncertainty, '0.5141984052873', 1e-12);
  expectRelative(degreesOfFreedom, '34.133786449483', 1e-12);
  expectRelative(coverageFactor(degreesOfFreedom), 2.0322445093177186, 1e-9);
});
