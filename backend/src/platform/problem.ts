import type { Problem as ProblemDocument } from '@strainwright/common/contract/wire';

export interface FieldError {
  /** Dotted path into the body: `readings.2.value`. */
  path: string;
  message: string;
}

const TITLES: Readonly<Record<number, string>> = {
  400: 'The request cannot be read', 401: 'Sign in first', 403: 'Not allowed', 404: 'Not found', 405: 'Not possible here', 409: 'In conflict with what is stored',
  413: 'Too large', 415: 'Wrong kind of content', 422: 'The input cannot be accepted', 429: 'Too many attempts', 500: 'Something went wrong here', 503: 'Not ready',
};

/** An error that a caller is told about: RFC 9457, with a stable code and a text a person can act on. */
export class Problem extends Error {
  constructor(
    readonly status: number,
    /** `noun.what`, stable: clients and tests rely on it. */
    readonly code: string,
    readonly detail: string,
    readonly errors: readonly FieldError[] = [],
    /** Further members of the document: `current` after a stale write, `findings` when a stop blocks. */
    readonly members: Readonly<Record<string, unknown>> = {},
    readonly headers: Readonly<Record<string, string>> = {},
  ) {
    super(detail);
    this.name = 'Problem';
  }

  document(): ProblemDocument & Record<string, unknown> {
    return {
      ...this.members,
      type: `/problems/${this.code}`,
      title: TITLES[this.status] ?? 'The request failed',
      status: this.status,
      code: this.code,
      detail: this.detail,
      ...(this.errors.length > 0 ? { errors: [...this.errors] } : {}),
    };
  }
}

/** 404, also for what exists but belongs to somebody else. */
export const notFound = (noun: string): Problem => new Problem(404, `${noun}.not-found`, `There is no such ${noun}.`);

/** 409: the row was changed by somebody else since the caller read it. */
export const stale = (noun: string, current: Record<string, unknown>): Problem =>
  new Problem(409, 'version.stale', `This ${noun} was changed since you opened it. Load it again and repeat your change.`, [], { current });

/** 409: the state of the row does not allow the action. */
export const wrongState = (noun: string, state: string, action: string): Problem =>
  new Problem(409, `${noun}.wrong-state`, `Cannot ${action}: this ${noun} is ${state}.`);

/** 422 at one field: well-formed, but not acceptable. */
export const invalid = (path: string, message: string, code = 'input.invalid'): Problem =>
  new Problem(422, code, message, [{ path, message }]);

/** 422 at several fields. */
export const invalidFields = (errors: readonly FieldError[], code = 'input.invalid'): Problem =>
  new Problem(422, code, errors.map((e) => (e.path === '' ? e.message : `${e.path}: ${e.message}`)).join('; '), errors);

/** 409 by a rule of the laboratory. */
export const refused = (code: string, detail: string, members: Record<string, unknown> = {}): Problem => new Problem(409, code, detail, [], members);

export const forbidden = (detail = 'Your roles do not allow this.', code = 'action.forbidden'): Problem => new Problem(403, code, detail);
