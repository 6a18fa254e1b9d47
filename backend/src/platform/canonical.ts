import { createHash } from 'node:crypto';
import canonicalize from 'canonicalize';

/** Canonical JSON by RFC 8785. @throws Error when the value holds something JSON cannot say (NaN, an infinity) */
export function canonicalJson(value: unknown): string {
  const text = canonicalize(value);
  if (text === undefined) throw new Error('There is no canonical JSON for this value');
  return text;
}

/** SHA-256 as 64 lower-case hexadecimal digits. */
export function sha256(data: string | Uint8Array): string {
  return createHash('sha256').update(data).digest('hex');
}
