/**
 * The two lines of a window: stress on axial strain, σ = a + Eε, and transverse on axial strain, ν being its slope with the sign reversed
 * (least squares, as ASTM E111 and E132 take them, from memory). Both slopes are freed of the flattening by strain noise.
 */
import { leastSquares, residualsOf } from '../statistics/least-squares';
import { momentsOf } from './moments';
import { slopeUncertainty } from './slope-uncertainty';
import { strainNoise, type StrainNoise } from './strain-noise';

/** One loading branch: axial strain, stress (Pa) and transverse strain, in the order recorded. */
export interface Branch {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly t: Float64Array | null;
}

export interface Line {
  readonly slope: number;
  readonly intercept: number;
  readonly slopeUncertainty: number;
  readonly degreesOfFreedom: number;
  readonly correlationCoefficient: number;
  readonly residualStandardDeviation: number;
  readonly points: number;
  readonly lagOne: number;
  readonly residuals: Float64Array;
}

export interface RegionFit {
  /** Rows of the branch, both included. */
  readonly from: number;
  readonly to: number;
  readonly strainFrom: number;
  readonly strainTo: number;
  readonly stressFrom: number;
  readonly stressTo: number;
  readonly axial: Line;
  readonly transverse: Line | null;
  /** Correlation of the two slopes: that of the two lines' residuals, which share the noise of axial strain. */
  readonly slopesCorrelation: number;
  readonly noise: StrainNoise;
}

/** Least squares of y on x over the whole arrays, the slope divided by 1 − `attenuation`. */
export function fitLine(x: Float64Array, y: Float64Array, attenuation = 0): Line {
  const plain = leastSquares(x, y);
  const slope = plain.slope / (1 - attenuation);
  const intercept = plain.intercept + (plain.slope - slope) * plain.meanX;
  const residuals = residualsOf({ slope, intercept }, x, y);
  const u = slopeUncertainty(x, residuals, plain.meanX);
  return {
    slope, intercept, slopeUncertainty: u.standardUncertainty, degreesOfFreedom: u.degreesOfFreedom, correlationCoefficient: plain.correlationCoefficient,
    residualStandardDeviation: Math.sqrt(residuals.reduce((sum, e) => sum + e * e, 0) / (plain.points - 2)), points: plain.points, lagOne: u.lagOne, residuals,
  };
}

/** Correlation coefficient about zero of two residual series; 0 when one of them vanishes. */
export function residualCorrelation(a: Float64Array, b: Float64Array): number {
  let [ab, aa, bb] = [0, 0, 0];
  for (let i = 0; i < a.length; i += 1) {
    ab += a[i]! * b[i]!;
    aa += a[i]! ** 2;
    bb += b[i]! ** 2;
  }
  return aa > 0 && bb > 0 ? ab / Math.sqrt(aa * bb) : 0;
}

/** Regression over rows `from` to `to` of a branch, both included. */
export function regression(branch: Branch, from: number, to: number): RegionFit {
  const x = branch.x.subarray(from, to + 1);
  const y = branch.y.subarray(from, to + 1);
  const plain = momentsOf(x, y);
  const noise = strainNoise(x, y, plain.sxy / plain.sxx, plain.sxx);
  const axial = fitLine(x, y, noise.attenuation);
  const transverse = branch.t === null ? null : fitLine(x, branch.t.subarray(from, to + 1), noise.attenuation);
  const line = (strain: number) => axial.intercept + axial.slope * strain;
  const [strainFrom, strainTo] = [x[0]!, x[x.length - 1]!];
  return {
    from, to, strainFrom, strainTo, stressFrom: line(strainFrom), stressTo: line(strainTo), axial, transverse, noise,
    slopesCorrelation: transverse === null ? 0 : residualCorrelation(axial.residuals, transverse.residuals),
  };
}
