/** True constants of the demo's materials: invented, within what such materials have. The raw files are made from them. */
export interface Truth {
  /** Pa, 1, kg/m³. */
  readonly E: number;
  readonly nu: number;
  readonly density: number;
}

export const TRUTHS = {
  granite: { E: 58.4e9, nu: 0.243, density: 2648 },
  concrete: { E: 31.2e9, nu: 0.191, density: 2386 },
  nickelAlloy: { E: 206.5e9, nu: 0.294, density: 8192 },
  aluminiumAlloy: { E: 70.6e9, nu: 0.338, density: 2702 },
  glass: { E: 81.8e9, nu: 0.207, density: 2513 },
} as const satisfies Record<string, Truth>;

/** Bulk velocities, m/s: v_P² = E(1 − ν)/(ρ(1 + ν)(1 − 2ν)), v_S² = E/(2ρ(1 + ν)). */
export function velocities({ E, nu, density }: Truth): { P: number; S: number } {
  return { P: Math.sqrt((E * (1 - nu)) / (density * (1 + nu) * (1 - 2 * nu))), S: Math.sqrt(E / (2 * density * (1 + nu))) };
}
