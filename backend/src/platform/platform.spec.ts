import { mkdtempSync, readFileSync, readdirSync, rmSync, statSync } from 'node:fs';
import { sign, verify } from 'node:crypto';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { canonicalJson, sha256 } from './canonical';
import { Clock } from './clock';
import { Config } from './config';
import { Mail } from './mail';
import { Secrets } from './secrets';

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'strainwright-platform-'));
});
afterEach(() => rmSync(folder, { recursive: true }));

describe('Config', () => {
  it('runs with nothing set', () => {
    expect(new Config({})).toMatchObject({ port: 4310, demo: true, databaseUrl: undefined, redisUrl: undefined, s3: undefined, publicUrl: 'http://localhost:4310' });
  });

  it('names every variable that cannot be used', () => {
    expect(() => new Config({ PORT: 'http', STRAINWRIGHT_DEMO: 'maybe' })).toThrow(/PORT[\s\S]*STRAINWRIGHT_DEMO/);
  });

  it('takes an empty variable for one that is not set', () => {
    expect(new Config({ DATABASE_URL: '' }).databaseUrl).toBeUndefined();
  });
});

describe('Secrets', () => {
  it('are made on the first start, for their owner only, and stay the same', () => {
    const config = new Config({ STRAINWRIGHT_DATA: folder });
    const first = new Secrets(config);
    const second = new Secrets(config);
    expect(second.tokenSecret).toBe(first.tokenSecret);
    expect(second.signingKeyId).toBe(first.signingKeyId);
    expect(verify(null, Buffer.from('certificate'), second.verifyingKey, sign(null, Buffer.from('certificate'), first.signingKey))).toBe(true);
    for (const name of readdirSync(join(folder, 'secrets'))) expect(statSync(join(folder, 'secrets', name)).mode & 0o777).toBe(0o600);
  });
});

describe('canonicalJson', () => {
  // RFC 8785, section 3.2.2 and 3.2.3: the sample object and its canonical form.
  it('gives the form of RFC 8785', () => {
    const sample = { numbers: [333333333.33333329, 1e30, 4.5, 2e-3, 0.000000000000000000000000001], string: '€$\u000f\nA\'B"\\\\"/', literals: [null, true, false] };
    expect(canonicalJson(sample)).toBe('{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\\u000f\\nA\'B\\"\\\\\\\\\\"/"}');
  });

  it('refuses what JSON cannot say', () => {
    expect(() => canonicalJson({ E: Number.NaN })).toThrow();
    expect(() => canonicalJson(undefined)).toThrow();
  });

  // FIPS 180-2, appendix B.1.
  it('is hashed with SHA-256', () => {
    expect(sha256('abc')).toBe('ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad');
  });
});

describe('Clock', () => {
  it('gives the day where the laboratory is', () => {
    class Fixed extends Clock {
      override now(): Date {
        return new Date('2026-03-01T23:30:00Z');
      }
    }
    expect(new Fixed().today('UTC')).toBe('2026-03-01');
    expect(new Fixed().today('Europe/Berlin')).toBe('2026-03-02');
    expect(new Fixed().today('America/New_York')).toBe('2026-03-01');
  });
});

describe('Mail', () => {
  it('writes a message into the data folder when there is no server for it', async () => {
    await new Mail(new Config({ STRAINWRIGHT_DATA: folder }), new Clock()).send({ to: 'nora@harbeck.example', subject: 'Größe', text: 'Guten Tag\n' });
    const [name] = readdirSync(join(folder, 'mail'));
    const text = readFileSync(join(folder, 'mail', name ?? ''), 'utf8');
    expect(name).toMatch(/\.eml$/);
    expect(text).toContain('To: nora@harbeck.example');
    expect(text).toContain('Subject: =?UTF-8?');
  });

  it('lets nobody add a header through an address or a subject', async () => {
    await new Mail(new Config({ STRAINWRIGHT_DATA: folder }), new Clock()).send({ to: 'a@lab.example', subject: 'Hello\r\nBcc: thief@example.org', text: 'x' });
    const [name] = readdirSync(join(folder, 'mail'));
    expect(readFileSync(join(folder, 'mail', name ?? ''), 'utf8')).not.toMatch(/^Bcc:/m);
  });
});
