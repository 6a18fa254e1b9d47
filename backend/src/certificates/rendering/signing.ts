/** Proof of a certificate: SHA-256 and Ed25519 over the RFC 8785 form of its snapshot. */
import { createPublicKey, randomBytes, sign, verify, type KeyObject } from 'node:crypto';
import type { CertificateDocument, CertificateSnapshot } from '@strainwright/common/contract/certificates';
import { canonicalJson, sha256 } from '../../platform/canonical';

export interface SigningKey {
  /** Says on the certificate which key signed it. */
  readonly keyId: string;
  readonly privateKey: KeyObject;
  readonly publicKey: KeyObject;
}

/** The bytes that are hashed and signed: UTF-8 of the RFC 8785 form. */
export function canonicalBytes(value: unknown): Buffer {
  return Buffer.from(canonicalJson(value), 'utf8');
}

export function publicPem(key: SigningKey): string {
  return key.publicKey.export({ type: 'spki', format: 'pem' }).toString();
}

/** Signs the canonical bytes themselves (Ed25519, RFC 8032; no prehash). */
export function signSnapshot(snapshot: CertificateSnapshot, key: SigningKey): CertificateDocument {
  const bytes = canonicalBytes(snapshot);
  const value = sign(null, bytes, key.privateKey).toString('base64');
  return { snapshot, sha256: sha256(bytes), signature: { algorithm: 'Ed25519', keyId: key.keyId, publicKey: publicPem(key), value } };
}

/**
 * Whether a signature in base64 is of these canonical bytes.
 * @param publicKeyPem the laboratory's key as kept by the laboratory, never the one that came with the file
 */
export function signatureHolds(bytes: Uint8Array, signature: string, publicKeyPem: string): boolean {
  return verify(null, bytes, createPublicKey(publicKeyPem), Buffer.from(signature, 'base64'));
}

/** certificate.json: the whole document in canonical order, so that equal content is equal bytes. */
export function certificateJson(document: CertificateDocument): Buffer {
  return canonicalBytes(document);
}

/** Crockford's base 32: no I, L, O, U, so that a code read from paper is typed right. */
const CODE_ALPHABET = '0123456789ABCDEFGHJKMNPQRSTVWXYZ';

/** Twelve characters, 60 bits, in groups of four; guessing one takes longer than any certificate is kept. */
export function newVerificationCode(): string {
  const characters = Array.from(randomBytes(12), (byte) => CODE_ALPHABET.charAt(byte & 31)).join('');
  return `${characters.slice(0, 4)}-${characters.slice(4, 8)}-${characters.slice(8)}`;
}

/** As typed by a person: case, spaces and dashes do not count; O is read as 0, I and L as 1. */
export function normalizedCode(typed: string): string {
  return typed.toUpperCase().replace(/[\s-]/g, '').replace(/O/g, '0').replace(/[IL]/g, '1');
}
