/**
 * Relations between the elastic constants of an isotropic solid. Any two of E, ν, G, K, λ (Lamé) and M (P-wave modulus)
 * give the other four. Moduli in one unit, ν dimensionless. Admissible (positive strain energy): E, G, K > 0 ⇔ −1 < ν < ½.
 * Source: standard results of linear isotropic elasticity, re-derived; checked on five materials in test/external.
 */
export interface ElasticConstants {
  readonly E: number;
  readonly nu: number;
  readonly G: number;
  readonly K: number;
  readonly lambda: number;
  readonly M: number;
}

export type ElasticName = keyof ElasticConstants;

export class RelationRefused extends Error {
  constructor(readonly code: 'undetermined' | 'inadmissible' | 'unknown-pair', message: string) {
    super(message);
    this.name = 'RelationRefused';
  }
}

type Pair = readonly [G: number, K: number];

/** G and K from each pair; `auxetic` chooses between the two roots of (E, M). */
const PAIRS: Readonly<Record<string, (a: number, b: number, auxetic: boolean) => Pair>> = {
  'E,nu': (E, nu) => [E / (2 * (1 + nu)), E / (3 * (1 - 2 * nu))],
  'E,G': (E, G) => [G, (E * G) / (3 * (3 * G - E))],
  'E,K': (E, K) => [(3 * K * E) / (9 * K - E), K],
  'E,lambda': (E, lambda) => {
    const R = Math.sqrt(E * E + 9 * lambda * lambda + 2 * E * lambda);
    return [(E - 3 * lambda + R) / 4, (E + 3 * lambda + R) / 6];
  },
  'E,M': (E, M, auxetic) => {
    // S² = E² + 9M² − 10EM, factored: at ν = 0, where E = M, it is then exactly zero.
    const square = (E - M) * (E - 9 * M);
    if (square < 0) throw new RelationRefused('inadmissible', 'E may not exceed M');
    const S = Math.sqrt(square) * (auxetic ? -1 : 1);
    return [(3 * M + E - S) / 8, (3 * M - E + S) / 6];
  },
  'nu,G': (nu, G) => [G, (2 * G * (1 + nu)) / (3 * (1 - 2 * nu))],
  'nu,K': (nu, K) => [(3 * K * (1 - 2 * nu)) / (2 * (1 + nu)), K],
  'nu,lambda': (nu, lambda) => {
    if (nu === 0) throw new RelationRefused('undetermined', 'ν = 0 and λ = 0 leave E undetermined');
    return [(lambda * (1 - 2 * nu)) / (2 * nu), (lambda * (1 + nu)) / (3 * nu)];
  },
  'nu,M': (nu, M) => [(M * (1 - 2 * nu)) / (2 * (1 - nu)), (M * (1 + nu)) / (3 * (1 - nu))],
  'G,K': (G, K) => [G, K],
  'G,lambda': (G, lambda) => [G, lambda + (2 * G) / 3],
  'G,M': (G, M) => [G, M - (4 * G) / 3],
  'K,lambda': (K, lambda) => [(3 * (K - lambda)) / 2, K],
  'K,M': (K, M) => [(3 * (M - K)) / 4, K],
  'lambda,M': (lambda, M) => [(M - lambda) / 2, (M + 2 * lambda) / 3],
};

/**
 * All six constants from two of them, named in the order E, nu, G, K, lambda, M.
 * @param auxetic for (E, M) only: take the root with ν < 0
 * @throws RelationRefused when the pair leaves the constants undetermined or is inadmissible
 */
export function constantsFrom(a: ElasticName, x: number, b: ElasticName, y: number, auxetic = false): ElasticConstants {
  const relation = PAIRS[`${a},${b}`];
  if (relation === undefined) throw new RelationRefused('unknown-pair', `${a} and ${b} are no pair in the order E, nu, G, K, lambda, M`);
  const [G, K] = relation(x, y, auxetic);
  if (!(G > 0) || !(K > 0) || !Number.isFinite(G) || !Number.isFinite(K)) throw new RelationRefused('inadmissible', `${a} = ${x} and ${b} = ${y} give G or K that is not positive`);
  const found = { E: (9 * K * G) / (3 * K + G), nu: (3 * K - 2 * G) / (2 * (3 * K + G)), G, K, lambda: K - (2 * G) / 3, M: K + (4 * G) / 3 };
  return { ...found, [a]: x, [b]: y };
}

/** The largest v_P/v_S that is impossible: 2/√3, where K = 0. */
export const LEAST_VELOCITY_RATIO = 2 / Math.sqrt(3);
