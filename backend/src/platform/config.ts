import { availableParallelism } from 'node:os';
import { join, resolve } from 'node:path';
import { z } from 'zod';

const text = z.string().min(1);
const switchedOn = z.enum(['on', 'off']).transform((value) => value === 'on');

/** Every environment variable that the server reads. */
const environment = z.object({
  NODE_ENV: z.string().default('production'),
  PORT: z.coerce.number().int().min(0).max(65_535).default(4310),
  HOST: text.default('127.0.0.1'),
  STRAINWRIGHT_DATA: text.default(join(__dirname, '..', '..', '..', 'data')),
  STRAINWRIGHT_DEMO: switchedOn.default(true),
  STRAINWRIGHT_PUBLIC_URL: z.url().optional(),
  STRAINWRIGHT_TIME_ZONE: text.default('UTC'),
  LOG_LEVEL: z.enum(['silent', 'error', 'warn', 'info', 'debug']).default('warn'),
  /** Fits computed at once in this process. */
  STRAINWRIGHT_FITS_AT_ONCE: z.coerce.number().int().min(1).max(64).default(Math.min(4, Math.max(1, availableParallelism() - 1))),
  /** Number of reverse proxies in front, whose X-Forwarded-For may be believed. */
  STRAINWRIGHT_PROXIES: z.coerce.number().int().min(0).max(10).default(0),
  /** The first account of a new database without the demo; made up and told once when they are not given. */
  STRAINWRIGHT_ADMIN_EMAIL: z.email().default('administrator@example.org'),
  STRAINWRIGHT_ADMIN_PASSWORD: text.min(12).optional(),
  DATABASE_URL: text.optional(),
  REDIS_URL: text.optional(),
  S3_ENDPOINT: z.url().optional(),
  S3_BUCKET: text.default('strainwright'),
  S3_REGION: text.default('us-east-1'),
  S3_ACCESS_KEY_ID: text.optional(),
  S3_SECRET_ACCESS_KEY: text.optional(),
  SMTP_URL: text.optional(),
  MAIL_FROM: text.default('Strainwright <strainwright@localhost>'),
});

/** Settings of one process, read once from the environment. */
export class Config {
  readonly port: number;
  readonly host: string;
  readonly dataFolder: string;
  readonly demo: boolean;
  readonly publicUrl: string;
  readonly timeZone: string;
  readonly logLevel: 'silent' | 'error' | 'warn' | 'info' | 'debug';
  readonly fitsAtOnce: number;
  readonly proxies: number;
  readonly firstAdministrator: { email: string; password: string | undefined };
  readonly databaseUrl: string | undefined;
  readonly redisUrl: string | undefined;
  readonly s3: { endpoint: string; bucket: string; region: string; accessKeyId: string | undefined; secretAccessKey: string | undefined } | undefined;
  readonly smtpUrl: string | undefined;
  readonly mailFrom: string;
  /** bcrypt cost: weaker only under test, where hundreds of sign-ins are made. */
  readonly passwordCost: number;
  /** The refresh cookie is marked Secure when people reach the server through https. */
  readonly secureCookies: boolean;
  /** Arguments that Node needs to load a task in a worker thread; empty but for tests, which run from the sources. */
  readonly taskArguments: readonly string[];

  /** @throws Error naming each variable that cannot be used */
  constructor(env: Record<string, string | undefined>, taskArguments: readonly string[] = []) {
    const given = Object.fromEntries(Object.entries(env).filter(([, value]) => value !== ''));
    const parsed = environment.safeParse(given);
    if (!parsed.success) {
      const lines = parsed.error.issues.map((issue) => `  ${issue.path.join('.')}: ${issue.message}`);
      throw new Error(`These environment variables cannot be used:\n${lines.join('\n')}`);
    }
    const e = parsed.data;
    this.port = e.PORT;
    this.host = e.HOST;
    this.dataFolder = resolve(e.STRAINWRIGHT_DATA);
    this.demo = e.STRAINWRIGHT_DEMO;
    this.publicUrl = (e.STRAINWRIGHT_PUBLIC_URL ?? `http://localhost:${e.PORT}`).replace(/\/+$/, '');
    this.timeZone = e.STRAINWRIGHT_TIME_ZONE;
    this.logLevel = e.LOG_LEVEL;
    this.fitsAtOnce = e.STRAINWRIGHT_FITS_AT_ONCE;
    this.proxies = e.STRAINWRIGHT_PROXIES;
    this.firstAdministrator = { email: e.STRAINWRIGHT_ADMIN_EMAIL.toLowerCase(), password: e.STRAINWRIGHT_ADMIN_PASSWORD };
    this.databaseUrl = e.DATABASE_URL;
    this.redisUrl = e.REDIS_URL;
    this.s3 = e.S3_ENDPOINT === undefined ? undefined : {
      endpoint: e.S3_ENDPOINT, bucket: e.S3_BUCKET, region: e.S3_REGION, accessKeyId: e.S3_ACCESS_KEY_ID, secretAccessKey: e.S3_SECRET_ACCESS_KEY,
    };
    this.smtpUrl = e.SMTP_URL;
    this.mailFrom = e.MAIL_FROM;
    this.passwordCost = e.NODE_ENV === 'test' ? 4 : 12;
    this.secureCookies = this.publicUrl.startsWith('https:');
    this.taskArguments = taskArguments;
  }
}
