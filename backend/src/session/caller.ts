import { createParamDecorator, ExecutionContext, SetMetadata } from '@nestjs/common';
import type { Action as ActionName } from '@strainwright/common/contract/permissions';
import type { Role } from '@strainwright/common/contract/vocabulary';
import type { Request } from 'express';
import { Problem } from '../platform/problem';

/** Whoever makes the request, as the session guard found them. */
export interface Caller {
  readonly id: string;
  readonly name: string;
  readonly email: string;
  readonly roles: readonly Role[];
  /** Set for people of a customer: every query they cause is scoped to it. */
  readonly customerId: string | null;
  /** The sign-in that the request belongs to. */
  readonly familyId: string;
}

/** Where a route's action is kept. */
export const ACTION_KEY = 'strainwright:action';

/** The action of contract/permissions that a route performs. Every route names one; the server does not start otherwise. */
export const Action = (action: ActionName): MethodDecorator & ClassDecorator => SetMetadata(ACTION_KEY, action);

/** The signed-in person; only on routes whose action is not public. */
export const CurrentPerson = createParamDecorator((_data: unknown, context: ExecutionContext): Caller => callerOf(context.switchToHttp().getRequest<Request>()));

export function callerOf(request: Request): Caller {
  const caller = request.user as Caller | undefined;
  if (caller === undefined) throw new Problem(401, 'session.missing', 'Sign in first.');
  return caller;
}
