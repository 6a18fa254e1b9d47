/**
 * Who may do what: one table that the server enforces, the client reads to show buttons, and the tests walk whole.
 * `own` means: only what belongs to the caller's own customer; the query itself is scoped to it.
 */
import type { Role } from './vocabulary';

const LAB = ['technician', 'analyst', 'reviewer', 'quality manager'] as const satisfies readonly Role[];
const BENCH = ['technician', 'analyst', 'quality manager'] as const satisfies readonly Role[];
const ANYONE_SIGNED_IN = [...LAB, 'customer', 'administrator'] as const satisfies readonly Role[];

interface Permission {
  /** `public` needs no sign-in. */
  readonly roles: readonly Role[] | 'public';
  /** Roles that see only their own customer's rows. */
  readonly own?: readonly Role[];
}

const table = {
  'session.open': { roles: 'public' },
  'session.refresh': { roles: 'public' },
  'session.close': { roles: ANYONE_SIGNED_IN },
  'session.read': { roles: ANYONE_SIGNED_IN },
  'health.read': { roles: 'public' },
  'document.read': { roles: 'public' },
  'verify.read': { roles: 'public' },
  'events.read': { roles: ANYONE_SIGNED_IN, own: ['customer'] },
  'find.read': { roles: [...LAB, 'customer'], own: ['customer'] },
  'worklist.read': { roles: LAB },

  'customers.read': { roles: [...LAB, 'administrator'] },
  'customers.change': { roles: ['administrator'] },
  'orders.read': { roles: [...LAB, 'customer'], own: ['customer'] },
  'orders.request': { roles: ['quality manager', 'customer'], own: ['customer'] },
  'orders.open': { roles: BENCH },
  'orders.close': { roles: ['quality manager'] },
  'orders.cancel': { roles: ['quality manager'] },
  'samples.read': { roles: LAB },
  'samples.log': { roles: BENCH },
  'specimens.read': { roles: LAB },
  'specimens.log': { roles: BENCH },
  'readings.enter': { roles: BENCH },
  'runs.read': { roles: LAB },
  'runs.record': { roles: BENCH },
  'runs.void': { roles: BENCH },
  'files.read': { roles: LAB },
  'fits.read': { roles: LAB },
  'fits.ask': { roles: ['analyst'] },
  'fits.adopt': { roles: ['analyst'] },
  'determinations.read': { roles: LAB },
  'determinations.compose': { roles: ['analyst'] },
  'determinations.submit': { roles: ['analyst'] },
  'determinations.review': { roles: ['reviewer', 'quality manager'] },
  'certificates.read': { roles: [...LAB, 'customer'], own: ['customer'] },
  'certificates.draft': { roles: ['quality manager'] },
  'certificates.release': { roles: ['quality manager'] },
  'certificates.amend': { roles: ['quality manager'] },
  'certificates.withdraw': { roles: ['quality manager'] },
  'instruments.read': { roles: LAB },
  'instruments.change': { roles: ['quality manager'] },
  'methods.read': { roles: LAB },
  'methods.change': { roles: ['quality manager'] },
  'reference-checks.read': { roles: LAB },
  'reference-checks.enter': { roles: ['quality manager'] },
  'record.read': { roles: ['reviewer', 'quality manager', 'administrator'] },
  'people.read': { roles: ['administrator'] },
  'people.change': { roles: ['administrator'] },
  'people.change-own': { roles: ANYONE_SIGNED_IN },
  'laboratory.read': { roles: ANYONE_SIGNED_IN },
  'laboratory.change': { roles: ['administrator'] },
} as const satisfies Record<string, Permission>;

export type Action = keyof typeof table;
export const ACTIONS: Readonly<Record<Action, Permission>> = table;

export function isPublic(action: Action): boolean {
  return ACTIONS[action].roles === 'public';
}

/** True when any of the roles allows the action. */
export function mayDo(roles: readonly Role[], action: Action): boolean {
  const allowed = ACTIONS[action].roles;
  return allowed === 'public' || roles.some((role) => allowed.includes(role));
}

/** True when the action is allowed only through a role that sees nothing but its own customer's rows. */
export function onlyOwn(roles: readonly Role[], action: Action): boolean {
  const { roles: allowed, own } = ACTIONS[action];
  if (allowed === 'public' || own === undefined) return false;
  const through = roles.filter((role) => allowed.includes(role));
  return through.length > 0 && through.every((role) => own.includes(role));
}
