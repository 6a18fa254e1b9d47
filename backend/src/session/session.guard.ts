import { ExecutionContext, Injectable } from '@nestjs/common';
import { Reflector } from '@nestjs/core';
import { AuthGuard } from '@nestjs/passport';
import { isPublic, mayDo, type Action } from '@strainwright/common/contract/permissions';
import type { Request } from 'express';
import { forbidden, Problem } from '../platform/problem';
import { ACTION_KEY, callerOf } from './caller';

/** Lets a request through when its route's action is public, or the caller's roles allow it. */
@Injectable()
export class SessionGuard extends AuthGuard('jwt') {
  constructor(private readonly reflector: Reflector) {
    super();
  }

  override async canActivate(context: ExecutionContext): Promise<boolean> {
    const action = this.reflector.getAllAndOverride<Action | undefined>(ACTION_KEY, [context.getHandler(), context.getClass()]);
    if (action === undefined) throw new Problem(500, 'route.without-action', 'This route declares no action.');
    if (isPublic(action)) return true;
    await super.canActivate(context);
    if (!mayDo(callerOf(context.switchToHttp().getRequest<Request>()).roles, action)) throw forbidden();
    return true;
  }

  override handleRequest<T>(error: unknown, user: T | false): T {
    if (error instanceof Error) throw error;
    if (user === false) throw new Problem(401, 'session.invalid', 'Sign in again: there is no valid session.', [], {}, { 'WWW-Authenticate': 'Bearer' });
    return user;
  }
}
