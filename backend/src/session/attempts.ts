import { Injectable } from '@nestjs/common';
import { sha256 } from '../platform/canonical';
import { Problem } from '../platform/problem';
import { RedisConnections } from '../platform/redis';

/** Failures allowed within the window, and so how long a lock lasts at most. */
export const ACCOUNT_LIMIT = 10;
export const ADDRESS_LIMIT = 50;
export const WINDOW_SECONDS = 15 * 60;

/** Counts failed sign-ins per account and per address. An attempt counts as failed until it succeeded, so that many at once cannot slip through. */
@Injectable()
export class SignInAttempts {
  constructor(private readonly redis: RedisConnections) {}

  /**
   * Counts an attempt.
   * @returns whether this attempt was the one that locked the account
   * @throws Problem 429 with Retry-After when the account or the address is locked, whether or not such an account exists
   */
  async begin(email: string, address: string): Promise<{ lastBeforeLock: boolean }> {
    const byAddress = await this.count(addressKey(address));
    if (byAddress > ADDRESS_LIMIT) throw await this.locked(addressKey(address));
    const byAccount = await this.count(accountKey(email));
    if (byAccount > ACCOUNT_LIMIT) throw await this.locked(accountKey(email));
    return { lastBeforeLock: byAccount === ACCOUNT_LIMIT };
  }

  async succeeded(email: string, address: string): Promise<void> {
    await this.redis.commands.del(accountKey(email));
    await this.redis.commands.decr(addressKey(address));
  }

  private async count(key: string): Promise<number> {
    const { commands } = this.redis;
    const count = await commands.incr(key);
    if (count === 1 || (await commands.ttl(key)) < 0) await commands.expire(key, WINDOW_SECONDS);
    return count;
  }

  private async locked(key: string): Promise<Problem> {
    const seconds = Math.max(1, await this.redis.commands.ttl(key));
    return new Problem(429, 'session.locked', `Too many failed sign-ins. Try again in ${Math.ceil(seconds / 60)} min.`, [], {}, { 'Retry-After': String(seconds) });
  }
}

const accountKey = (email: string): string => `sign-in:account:${sha256(email)}`;
const addressKey = (address: string): string => `sign-in:address:${address}`;
