import { Injectable } from '@nestjs/common';
import { Compute } from '../platform/compute';
import { Config } from '../platform/config';
import { invalid } from '../platform/problem';
import { COMMON_PASSWORDS } from './common-passwords';
import type { PasswordJob } from './password.task';

/** bcrypt reads no more than this; a longer password would be cut off in silence. */
const LONGEST_BYTES = 72;

/** Many sign-ins at once wait for each other at most this long. */
const PATIENCE_MS = 60_000;

/** Passwords by NIST SP 800-63B: long enough, none of the common ones, nothing of the person's own name; no rules of composition, no expiry. */
@Injectable()
export class Passwords {
  private decoy: Promise<string> | undefined;

  constructor(private readonly config: Config, private readonly compute: Compute) {}

  /** @throws Problem 422 at `path` when the password is too easy to guess */
  check(password: string, about: { name: string; email: string }, path: string): void {
    const plain = password.normalize('NFKC').toLowerCase();
    if (Buffer.byteLength(password) > LONGEST_BYTES) throw invalid(path, `At most ${LONGEST_BYTES} bytes: letters outside English count as two or more`);
    if (new Set(plain).size < 5) throw invalid(path, 'Too easy to guess: the same few characters over and over');
    const core = plain.replace(/[^\p{L}]/gu, '');
    if (COMMON_PASSWORDS.has(plain) || COMMON_PASSWORDS.has(core)) throw invalid(path, 'Too easy to guess: this is one of the common passwords');
    if (isSequence(plain)) throw invalid(path, 'Too easy to guess: a plain sequence');
    const own = [...about.name.toLowerCase().split(/\s+/), about.email.split('@')[0] ?? '', 'strainwright'].filter((word) => word.length >= 4);
    const rest = own.reduce((text, word) => text.replaceAll(word, ''), plain);
    if (rest.length < 8) throw invalid(path, 'Too easy to guess: little more than a name');
  }

  hash(password: string): Promise<string> {
    return this.run<string>({ password, cost: this.config.passwordCost });
  }

  matches(password: string, passwordHash: string): Promise<boolean> {
    return this.run<boolean>({ password, against: passwordHash });
  }

  /** Takes as long as a comparison, so that time does not tell whether an account exists. */
  async pretend(password: string): Promise<false> {
    this.decoy ??= this.hash('nobody signs in with this');
    await this.matches(password, await this.decoy);
    return false;
  }

  private run<Result>(job: PasswordJob): Promise<Result> {
    return this.compute.run<Result>(require.resolve('./password.task'), job, () => {}, PATIENCE_MS);
  }
}

function isSequence(text: string): boolean {
  let steps = 0;
  for (let i = 1; i < text.length; i += 1) {
    const step = text.charCodeAt(i) - text.charCodeAt(i - 1);
    if (Math.abs(step) <= 1) steps += 1;
  }
  return steps >= text.length - 2;
}
