import { generateKeyPairSync, createPrivateKey, createPublicKey, randomBytes, type KeyObject } from 'node:crypto';
import { chmodSync, linkSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { Injectable } from '@nestjs/common';
import { sha256 } from './canonical';
import { Config } from './config';

/** Secrets of this installation: made on first start, kept in the data folder with mode 600, never logged. */
@Injectable()
export class Secrets {
  readonly tokenSecret: string;
  readonly signingKey: KeyObject;
  readonly verifyingKey: KeyObject;
  /** First 16 hexadecimal digits of the public key's SHA-256: says which key signed a certificate. */
  readonly signingKeyId: string;

  constructor(config: Config) {
    const folder = join(config.dataFolder, 'secrets');
    mkdirSync(folder, { recursive: true, mode: 0o700 });
    this.tokenSecret = keptOrMade(join(folder, 'token'), () => randomBytes(48).toString('base64url'));
    const pem = keptOrMade(join(folder, 'certificate-key.pem'), () => generateKeyPairSync('ed25519').privateKey.export({ type: 'pkcs8', format: 'pem' }).toString());
    this.signingKey = createPrivateKey(pem);
    this.verifyingKey = createPublicKey(this.signingKey);
    this.signingKeyId = sha256(this.verifyingKey.export({ type: 'spki', format: 'der' })).slice(0, 16);
  }
}

/** Several processes may start at once: the first to link its file wins, and all read that one. */
function keptOrMade(path: string, make: () => string): string {
  const kept = readIfThere(path);
  if (kept !== undefined) return kept;
  const draft = `${path}.${process.pid}.${randomBytes(4).toString('hex')}`;
  writeFileSync(draft, make(), { mode: 0o600, flag: 'wx' });
  try {
    linkSync(draft, path);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
  } finally {
    rmSync(draft);
  }
  return readFileSync(path, 'utf8');
}

function readIfThere(path: string): string | undefined {
  try {
    const content = readFileSync(path, 'utf8');
    chmodSync(path, 0o600);
    return content;
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return undefined;
    throw error;
  }
}
