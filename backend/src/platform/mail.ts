import { mkdir, rename, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { Injectable } from '@nestjs/common';
import { Clock } from './clock';
import { Config } from './config';
import { newId } from './ids';

export interface Letter {
  to: string;
  subject: string;
  text: string;
}

/** Sends mail through SMTP_URL; without it, writes each message as an .eml file into the data folder. */
@Injectable()
export class Mail {
  constructor(private readonly config: Config, private readonly clock: Clock) {}

  async send(letter: Letter): Promise<void> {
    const { createTransport } = await import('nodemailer');
    const message = { ...letter, from: this.config.mailFrom, date: this.clock.now() };
    if (this.config.smtpUrl !== undefined) {
      await createTransport(this.config.smtpUrl).sendMail(message);
      return;
    }
    const { message: raw } = await createTransport({ streamTransport: true, buffer: true }).sendMail(message);
    if (!Buffer.isBuffer(raw)) throw new Error('The message was not put into bytes');
    const folder = join(this.config.dataFolder, 'mail');
    await mkdir(folder, { recursive: true, mode: 0o700 });
    const path = join(folder, `${newId()}.eml`);
    await writeFile(`${path}.draft`, raw, { mode: 0o600 });
    await rename(`${path}.draft`, path);
  }
}
