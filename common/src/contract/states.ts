/** State machines as data: what may be done to a noun in a state, and the state it then has. */
import { z } from 'zod';
import type { Action } from './permissions';

interface Step<S extends string> {
  readonly action: Action;
  readonly from: readonly S[];
  readonly to: S;
}

export const ORDER_STATES = ['requested', 'open', 'reported', 'closed', 'cancelled'] as const;
export const orderState = z.enum(ORDER_STATES);
export type OrderState = z.infer<typeof orderState>;

export const RUN_STATES = ['recorded', 'void'] as const;
export const runState = z.enum(RUN_STATES);
export type RunState = z.infer<typeof runState>;

export const FIT_STATES = ['queued', 'running', 'done', 'failed'] as const;
export const fitState = z.enum(FIT_STATES);
export type FitState = z.infer<typeof fitState>;

export const DETERMINATION_STATES = ['draft', 'submitted', 'accepted', 'returned', 'superseded'] as const;
export const determinationState = z.enum(DETERMINATION_STATES);
export type DeterminationState = z.infer<typeof determinationState>;

export const CERTIFICATE_STATES = ['draft', 'released', 'superseded', 'withdrawn'] as const;
export const certificateState = z.enum(CERTIFICATE_STATES);
export type CertificateState = z.infer<typeof certificateState>;

export const ORDER_STEPS = {
  open: { action: 'orders.open', from: ['requested'], to: 'open' },
  report: { action: 'certificates.release', from: ['open', 'reported'], to: 'reported' },
  close: { action: 'orders.close', from: ['reported'], to: 'closed' },
  cancel: { action: 'orders.cancel', from: ['requested', 'open'], to: 'cancelled' },
} as const satisfies Record<string, Step<OrderState>>;

export const RUN_STEPS = {
  void: { action: 'runs.void', from: ['recorded'], to: 'void' },
} as const satisfies Record<string, Step<RunState>>;

/** A returned determination becomes a draft again when it is composed anew. */
export const DETERMINATION_STEPS = {
  compose: { action: 'determinations.compose', from: ['draft', 'returned'], to: 'draft' },
  submit: { action: 'determinations.submit', from: ['draft'], to: 'submitted' },
  accept: { action: 'determinations.review', from: ['submitted'], to: 'accepted' },
  return: { action: 'determinations.review', from: ['submitted'], to: 'returned' },
  supersede: { action: 'determinations.review', from: ['accepted'], to: 'superseded' },
} as const satisfies Record<string, Step<DeterminationState>>;

export const CERTIFICATE_STEPS = {
  release: { action: 'certificates.release', from: ['draft'], to: 'released' },
  supersede: { action: 'certificates.release', from: ['released'], to: 'superseded' },
  withdraw: { action: 'certificates.withdraw', from: ['released'], to: 'withdrawn' },
} as const satisfies Record<string, Step<CertificateState>>;

/** Whether a step may be taken from a state. */
export function mayStep<S extends string>(step: Step<S>, state: S): boolean {
  return step.from.includes(state);
}
