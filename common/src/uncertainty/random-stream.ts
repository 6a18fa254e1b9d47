/** A seeded stream of random numbers: the same seed gives the same stream on every machine. */
import { xoroshiro128plus, type RandomGenerator } from 'pure-rand';

export class RandomStream {
  private readonly generator: RandomGenerator;
  private spare: number | null = null;

  constructor(seed: number) {
    this.generator = xoroshiro128plus(seed | 0);
  }

  /** Uniform on (0, 1), 52 bits, never an end point. */
  uniform(): number {
    const high = this.generator.unsafeNext() >>> 6;
    const low = this.generator.unsafeNext() >>> 6;
    return (high * 67108864 + low + 0.5) / 4503599627370496;
  }

  /** Standard normal, by the polar method of Marsaglia and Bray. */
  normal(): number {
    if (this.spare !== null) {
      const value = this.spare;
      this.spare = null;
      return value;
    }
    for (;;) {
      const u = 2 * this.uniform() - 1;
      const v = 2 * this.uniform() - 1;
      const s = u * u + v * v;
      if (s > 0 && s < 1) {
        const scale = Math.sqrt((-2 * Math.log(s)) / s);
        this.spare = v * scale;
        return u * scale;
      }
    }
  }

  /** Student's t with ν degrees of freedom: Z/√(χ²_ν/ν). */
  studentT(degreesOfFreedom: number): number {
    return this.normal() * this.studentStretch(degreesOfFreedom);
  }

  /** √(ν/χ²_ν), by which a normal draw becomes one of Student's t. */
  studentStretch(degreesOfFreedom: number): number {
    return Math.sqrt(degreesOfFreedom / (2 * this.gamma(degreesOfFreedom / 2)));
  }

  /** Gamma of unit scale, by the method of Marsaglia and Tsang (2000). */
  private gamma(shape: number): number {
    if (shape < 1) return this.gamma(shape + 1) * this.uniform() ** (1 / shape);
    const d = shape - 1 / 3;
    const c = 1 / Math.sqrt(9 * d);
    for (;;) {
      const x = this.normal();
      const root = 1 + c * x;
      if (root <= 0) continue;
      const v = root * root * root;
      const u = this.uniform();
      // The first test decides most cases without a logarithm.
      if (u < 1 - 0.0331 * x * x * x * x || Math.log(u) < 0.5 * x * x + d - d * v + d * Math.log(v)) return d * v;
    }
  }
}
