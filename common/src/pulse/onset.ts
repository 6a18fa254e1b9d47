/**
 * What lies between the true onset of a pulse and the place where a picker can see it. An onset grows out of the noise as
 * x = a (t − t₀)^p; a picker that sees it at the level x₁, while it passes the level x₂ the time Δ later, is late by
 * Δ/((x₂/x₁)^(1/p) − 1). How steeply a pulse begins is not known beforehand: each stage that it passes (transducer, couplant,
 * receiver) adds to p; 1.5 (abrupt) to 3.5 (smooth) is taken, rectangular (common practice has no figure). It is one input for a
 * run, since both waves pass the same kind of stages, and for its zero times: where these are picked alike, most of it cancels.
 */
export const SHAPE = { value: 2.5, halfWidth: 1 } as const;

export interface Rise {
  /** From the pick to the higher level. */
  readonly duration: number;
  /** Higher level over the level that the picker sees. */
  readonly ratio: number;
}

/** Below this ratio the two levels are too close together to extrapolate from. */
const LEAST_RATIO = 3;

/** How late the pick is, in the unit of the rise's duration. */
export function lateness(rise: Rise, shape: number): number {
  return Math.max(rise.duration, 0) / (Math.max(rise.ratio, LEAST_RATIO) ** (1 / shape) - 1);
}

/** ∂lateness/∂p at the middle shape, from the ends of its range; lateness is nearly linear in p. */
export function latenessPerShape(rise: Rise): number {
  return (lateness(rise, SHAPE.value + SHAPE.halfWidth) - lateness(rise, SHAPE.value - SHAPE.halfWidth)) / (2 * SHAPE.halfWidth);
}
