import { randomBytes } from 'node:crypto';
import { Injectable } from '@nestjs/common';
import { JwtService } from '@nestjs/jwt';
import type { User } from '@strainwright/common/contract/people';
import { and, eq, isNull } from 'drizzle-orm';
import { Database, type Transaction } from '../database/database';
import { customers, people, sessions } from '../database/schema/people';
import { sha256 } from '../platform/canonical';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { Mail } from '../platform/mail';
import { Problem } from '../platform/problem';
import { RecordService } from '../record/record.service';
import { SignInAttempts, WINDOW_SECONDS } from './attempts';
import type { Caller } from './caller';
import type { AccessToken } from './jwt.strategy';
import { Passwords } from './passwords';

export const SESSION_DAYS = 14;

export interface OpenedSession {
  accessToken: string;
  user: User;
  /** Goes into the HttpOnly cookie, never into a body. */
  refreshToken: string;
  expiresAt: Date;
}

type PersonRow = typeof people.$inferSelect;

const signInRefused = (): Problem => new Problem(401, 'session.refused', 'The e-mail address or the password is wrong.');
const refreshRefused = (): Problem => new Problem(401, 'session.expired', 'Sign in again: this session has ended.');

/** Signs people in and out. A sign-in is a family of refresh tokens, each good for one use. */
@Injectable()
export class SessionService {
  constructor(
    private readonly database: Database,
    private readonly jwt: JwtService,
    private readonly passwords: Passwords,
    private readonly attempts: SignInAttempts,
    private readonly record: RecordService,
    private readonly clock: Clock,
    private readonly mail: Mail,
  ) {}

  /** @throws Problem 401 when the two do not belong together, 429 when the account or the address is locked */
  async open(email: string, password: string, address: string): Promise<OpenedSession> {
    const { lastBeforeLock } = await this.attempts.begin(email, address);
    const [person] = await this.database.db.select().from(people).where(eq(people.email, email));
    const right = person === undefined ? await this.passwords.pretend(password) : await this.passwords.matches(password, person.passwordHash);
    if (person === undefined || !right || !person.active) {
      await this.writeFailure(email, person, address);
      if (lastBeforeLock && person !== undefined) await this.tellLocked(person);
      throw signInRefused();
    }
    await this.attempts.succeeded(email, address);
    return this.database.transaction(async (tx) => {
      const opened = await this.issue(tx, person, newId());
      await tx.update(people).set({ lastSignInAt: this.clock.now() }).where(eq(people.id, person.id));
      await this.record.append(tx, { action: 'session.opened', noun: 'session', nounId: person.id, person, details: { address } });
      return opened;
    });
  }

  /** Gives a new pair for a refresh token. A token that was used before is a sign of theft: its whole family ends. */
  async refresh(refreshToken: string | undefined): Promise<OpenedSession> {
    if (refreshToken === undefined || refreshToken === '') throw refreshRefused();
    const outcome = await this.database.transaction(async (tx) => {
      const [session] = await tx.select().from(sessions).where(eq(sessions.tokenHash, sha256(refreshToken))).for('update');
      if (session === undefined || session.revokedAt !== null || session.expiresAt <= this.clock.now()) return undefined;
      const [person] = await tx.select().from(people).where(eq(people.id, session.personId));
      if (person === undefined || !person.active) return undefined;
      if (session.usedAt !== null) {
        await this.revoke(tx, session.familyId);
        await this.record.append(tx, { action: 'session.revoked', noun: 'session', nounId: person.id, person, details: { reason: 'a refresh token was used twice' } });
        return undefined;
      }
      await tx.update(sessions).set({ usedAt: this.clock.now() }).where(eq(sessions.id, session.id));
      return this.issue(tx, person, session.familyId, session.expiresAt);
    });
    if (outcome === undefined) throw refreshRefused();
    return outcome;
  }

  async close(caller: Caller): Promise<void> {
    await this.database.transaction(async (tx) => {
      await this.revoke(tx, caller.familyId);
      await this.record.append(tx, { action: 'session.closed', noun: 'session', nounId: caller.id, person: caller });
    });
  }

  /** Ends every sign-in of a person, but the one given. */
  async revokeAll(tx: Transaction, personId: string, exceptFamily?: string): Promise<void> {
    const open = await tx.select({ familyId: sessions.familyId }).from(sessions).where(and(eq(sessions.personId, personId), isNull(sessions.revokedAt)));
    for (const family of new Set(open.map((s) => s.familyId))) if (family !== exceptFamily) await this.revoke(tx, family);
  }

  async user(personId: string): Promise<User> {
    const [row] = await this.database.db.select({ person: people, customerName: customers.name }).from(people).leftJoin(customers, eq(customers.id, people.customerId)).where(eq(people.id, personId));
    if (row === undefined) throw refreshRefused();
    return asUser(row.person, row.customerName);
  }

  /** @throws Problem 403 unless the password is the person's own: for acts that ask for it again */
  async confirmPassword(personId: string, password: string, path = 'password'): Promise<void> {
    const [person] = await this.database.db.select().from(people).where(eq(people.id, personId));
    if (person === undefined) throw refreshRefused();
    const { lastBeforeLock } = await this.attempts.begin(person.email, `confirm:${personId}`);
    if (await this.passwords.matches(password, person.passwordHash)) {
      await this.attempts.succeeded(person.email, `confirm:${personId}`);
      return;
    }
    if (lastBeforeLock) await this.tellLocked(person);
    throw new Problem(403, 'password.wrong', 'The password is wrong.', [{ path, message: 'The password is wrong' }]);
  }

  private async issue(tx: Transaction, person: PersonRow, familyId: string, expiresAt?: Date): Promise<OpenedSession> {
    const now = this.clock.now();
    const refreshToken = randomBytes(32).toString('base64url');
    const until = expiresAt ?? new Date(now.getTime() + SESSION_DAYS * 86_400_000);
    await tx.insert(sessions).values({ id: newId(), personId: person.id, familyId, tokenHash: sha256(refreshToken), createdAt: now, expiresAt: until });
    const [customer] = person.customerId === null ? [] : await tx.select({ name: customers.name }).from(customers).where(eq(customers.id, person.customerId));
    const token: AccessToken = { sub: person.id, fam: familyId };
    return { accessToken: await this.jwt.signAsync(token), user: asUser(person, customer?.name ?? null), refreshToken, expiresAt: until };
  }

  private async revoke(tx: Transaction, familyId: string): Promise<void> {
    await tx.update(sessions).set({ revokedAt: this.clock.now() }).where(and(eq(sessions.familyId, familyId), isNull(sessions.revokedAt)));
  }

  private async writeFailure(email: string, person: PersonRow | undefined, address: string): Promise<void> {
    await this.database.transaction((tx) => this.record.append(tx, {
      action: 'session.refused', noun: 'session', nounId: person?.id ?? 'unknown', person: null,
      details: { email, address, reason: person === undefined ? 'no such account' : person.active ? 'wrong password' : 'account not active' },
    }));
  }

  private async tellLocked(person: PersonRow): Promise<void> {
    const minutes = WINDOW_SECONDS / 60;
    await this.database.transaction((tx) => this.record.append(tx, { action: 'session.locked', noun: 'session', nounId: person.id, person: null, details: { email: person.email, minutes } }));
    await this.database.afterCommit(() => this.mail.send({
      to: person.email, subject: 'Your account is locked for a while',
      text: `Too many sign-ins with a wrong password were tried on your account. It is locked for up to ${minutes} minutes.\nIf that was not you, tell your administrator.\n`,
    }));
  }
}

function asUser(person: PersonRow, customerName: string | null): User {
  const { id, name, email, roles, customerId, decimalStyle } = person;
  return { id, name, email, roles, customerId, customerName, decimalStyle };
}
