/**
 * What lies between the true onset of a pulse and the place where a picker can see it. An onset grows out of the noise as
 * x = a (t − t₀)^p; a picker that sees it at the level x₁, while it passes the level x₂ the time Δ later, is late by
 * Δ/((x₂/x₁)^(1/p) − 1). How steeply a transducer's pulse begins is not known beforehand: p = 1 (abrupt) to 3 (smooth), taken
 * as rectangular about 2. Where the zero time is picked from the same transducers p is the same, and most of it cancels.
 */
export const SHAPE = { value: 2, halfWidth: 1 } as const;

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

/** ∂lateness/∂p at p = 2, from the ends of its range; lateness is nearly linear in p. */
export function latenessPerShape(rise: Rise): number {
  return (lateness(rise, SHAPE.value + SHAPE.halfWidth) - lateness(rise, SHAPE.value - SHAPE.halfWidth)) / (2 * SHAPE.halfWidth);
}
