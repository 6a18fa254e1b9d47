/** The words of the product as closed lists: one spelling for screen, URL, table, code and message. */
import { z } from 'zod';

export const CONSTANTS = ['E', 'nu', 'G', 'K'] as const;
export const constantName = z.enum(CONSTANTS);
export type ConstantName = z.infer<typeof constantName>;

export const SHAPES = ['cylinder', 'prism', 'cube', 'plate'] as const;
export const shape = z.enum(SHAPES);
export type Shape = z.infer<typeof shape>;

export const MATERIAL_CLASSES = ['rock', 'concrete', 'metal', 'ceramic', 'glass', 'polymer'] as const;
export const materialClass = z.enum(MATERIAL_CLASSES);
export type MaterialClass = z.infer<typeof materialClass>;

/**
 * What one reading may be of. `length` is always the dimension along the test axis (the pulse path, the load line);
 * `width` and `thickness` are the cross-section of a prism, cube or plate; `diameter` that of a cylinder.
 * `massInWater` is the apparent mass when hung in water, `waterTemperature` the water's temperature then.
 */
export const READING_QUANTITIES = ['length', 'diameter', 'width', 'thickness', 'mass', 'massInWater', 'waterTemperature'] as const;
export const readingQuantity = z.enum(READING_QUANTITIES);
export type ReadingQuantity = z.infer<typeof readingQuantity>;

/** The dimensions that each shape needs, `length` along the test axis first. */
export const DIMENSIONS_OF_SHAPE: Readonly<Record<Shape, readonly ReadingQuantity[]>> = {
  cylinder: ['length', 'diameter'],
  prism: ['length', 'width', 'thickness'],
  cube: ['length', 'width', 'thickness'],
  plate: ['length', 'width', 'thickness'],
};

export const INSTRUMENT_KINDS = ['caliper', 'micrometer', 'balance', 'thermometer', 'pulse unit', 'load cell', 'extensometer', 'strain gauge', 'test frame', 'reference bar'] as const;
export const instrumentKind = z.enum(INSTRUMENT_KINDS);
export type InstrumentKind = z.infer<typeof instrumentKind>;

export const RUN_KINDS = ['pulse', 'stress-strain'] as const;
export const runKind = z.enum(RUN_KINDS);
export type RunKind = z.infer<typeof runKind>;

export const BASES = ['static', 'dynamic'] as const;
export const basis = z.enum(BASES);
export type Basis = z.infer<typeof basis>;

/** A pulse run gives dynamic constants, a stress–strain run static ones; the two are never mixed. */
export const BASIS_OF_RUN: Readonly<Record<RunKind, Basis>> = { pulse: 'dynamic', 'stress-strain': 'static' };

export const WAVES = ['P', 'S'] as const;
export const wave = z.enum(WAVES);
export type Wave = z.infer<typeof wave>;

export const ROLES = ['technician', 'analyst', 'reviewer', 'quality manager', 'customer', 'administrator'] as const;
export const role = z.enum(ROLES);
export type Role = z.infer<typeof role>;
