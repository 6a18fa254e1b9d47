/**
 * The transit time of one wave, t = (t̄ − t̄₀)(1 + c) + t_known: t̄ and t̄₀ as read, c the relative calibration of the time base,
 * common to both waves, t_known of a reference bar. An absolute calibration adds its uncertainty once, and no correction: what
 * shifts every reading alike goes out of the difference, and the certificate says nothing of what is left.
 */
import type { Term } from '../uncertainty/model';
import type { ZeroTerms } from './zero-time';

export function transitTime(read: Term, zero: ZeroTerms | null, timeBase: { readonly term: Term; readonly relative: boolean } | null): Term {
  let time = zero === null ? read : read.minus(zero.read);
  if (timeBase !== null) time = timeBase.relative ? time.times(timeBase.term.plus(1)) : time.plus(timeBase.term.minus(timeBase.term.value));
  const known = zero?.known ?? null;
  return known === null ? time : time.plus(known);
}
