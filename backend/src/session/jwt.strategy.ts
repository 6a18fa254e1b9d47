import { Injectable } from '@nestjs/common';
import { PassportStrategy } from '@nestjs/passport';
import { and, eq, gt, isNull } from 'drizzle-orm';
import { ExtractJwt, Strategy } from 'passport-jwt';
import { Database } from '../database/database';
import { people, sessions } from '../database/schema/people';
import { Clock } from '../platform/clock';
import { Secrets } from '../platform/secrets';
import type { Caller } from './caller';

export interface AccessToken {
  sub: string;
  /** The family of refresh tokens: one sign-in. */
  fam: string;
}

/** Reads the access token, and looks whether its person is still active and its sign-in not revoked. */
@Injectable()
export class JwtStrategy extends PassportStrategy(Strategy, 'jwt') {
  constructor(secrets: Secrets, private readonly database: Database, private readonly clock: Clock) {
    super({ jwtFromRequest: ExtractJwt.fromAuthHeaderAsBearerToken(), secretOrKey: secrets.tokenSecret, algorithms: ['HS256'], ignoreExpiration: false });
  }

  async validate(token: AccessToken): Promise<Caller | false> {
    const [person] = await this.database.db
      .select({ id: people.id, name: people.name, email: people.email, roles: people.roles, customerId: people.customerId, familyId: sessions.familyId })
      .from(people)
      .innerJoin(sessions, and(eq(sessions.personId, people.id), eq(sessions.familyId, token.fam), isNull(sessions.revokedAt), gt(sessions.expiresAt, this.clock.now())))
      .where(and(eq(people.id, token.sub), eq(people.active, true)))
      .limit(1);
    return person ?? false;
  }
}
