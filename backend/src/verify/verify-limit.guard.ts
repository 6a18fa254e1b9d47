import { CanActivate, ExecutionContext, Injectable } from '@nestjs/common';
import type { Request } from 'express';
import { Problem } from '../platform/problem';
import { RedisConnections } from '../platform/redis';

/** Checks from one address in a window; a code has 60 bits, so this is about load rather than guessing. */
export const CHECKS_PER_WINDOW = 60;
const WINDOW_SECONDS = 60;
/** Certificates are far smaller. */
export const LARGEST_UPLOAD = 32 * 1024 * 1024;

/** Slows down whoever asks without end. Stands before the upload is read. */
@Injectable()
export class VerifyLimit implements CanActivate {
  constructor(private readonly redis: RedisConnections) {}

  async canActivate(context: ExecutionContext): Promise<boolean> {
    const request = context.switchToHttp().getRequest<Request>();
    if (Number(request.headers['content-length'] ?? 0) > LARGEST_UPLOAD) throw new Problem(413, 'file.too-large', 'A certificate is never larger than 32 MB.', [{ path: 'file', message: 'Larger than 32 MB' }]);
    const key = `verify:${request.ip ?? 'unknown'}`;
    const { commands } = this.redis;
    const checks = await commands.incr(key);
    if (checks === 1 || (await commands.ttl(key)) < 0) await commands.expire(key, WINDOW_SECONDS);
    if (checks <= CHECKS_PER_WINDOW) return true;
    const seconds = Math.max(1, await commands.ttl(key));
    throw new Problem(429, 'verify.too-many', `Too many checks from this address. Try again in ${seconds} s.`, [], {}, { 'Retry-After': String(seconds) });
  }
}
