import { randomBytes } from 'node:crypto';
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { Injectable } from '@nestjs/common';
import { Database } from '../database/database';
import { people } from '../database/schema/people';
import { Clock } from '../platform/clock';
import { Config } from '../platform/config';
import { newId } from '../platform/ids';
import { RecordService } from '../record/record.service';
import { Passwords } from '../session/passwords';

export interface FirstSignIn {
  email: string;
  /** Where a password that was made up is told, for its owner only; undefined when it was given. */
  toldIn: string | undefined;
}

/** Makes the account from which a new laboratory adds the others. */
@Injectable()
export class FirstAdministrator {
  constructor(private readonly config: Config, private readonly database: Database, private readonly passwords: Passwords, private readonly record: RecordService, private readonly clock: Clock) {}

  async make(): Promise<FirstSignIn> {
    const { email, password: given } = this.config.firstAdministrator;
    const password = given ?? randomBytes(12).toString('base64url');
    const person = { id: newId(), name: 'Administrator', email };
    if (given !== undefined) this.passwords.check(given, { name: '', email }, 'STRAINWRIGHT_ADMIN_PASSWORD');
    const passwordHash = await this.passwords.hash(password);
    const toldIn = given === undefined ? join(this.config.dataFolder, 'first-sign-in.txt') : undefined;
    if (toldIn !== undefined) writeFileSync(toldIn, `${email}\n${password}\n`, { mode: 0o600 });
    await this.database.transaction(async (tx) => {
      await tx.insert(people).values({ ...person, passwordHash, roles: ['administrator'], createdAt: this.clock.now() });
      await this.record.append(tx, { action: 'person.added', noun: 'person', nounId: person.id, person: null, details: { email, roles: ['administrator'], reason: 'first start' } });
    });
    return { email, toldIn };
  }
}
