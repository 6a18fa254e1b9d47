import { createPrivateKey, createPublicKey, generateKeyPairSync } from 'node:crypto';
import { certificateDocument } from '@strainwright/common/contract/certificates';
import { sha256 } from '../../platform/canonical';
import { exampleSnapshot } from '../testing/example-snapshot';
import { canonicalBytes, certificateJson, newVerificationCode, normalizedCode, publicPem, signatureHolds, signSnapshot } from './signing';

const key = { keyId: 'ab12cd34ef56ab12', ...generateKeyPairSync('ed25519') };

describe('canonicalBytes', () => {
  it('writes the example of RFC 8785, section 3.2.3, byte for byte', () => {
    const input = JSON.parse('{"numbers":[333333333.33333329,1E30,4.50,2e-3,0.000000000000000000000000001],"string":"\\u20ac$\\u000F\\u000aA\'\\u0042\\u0022\\u005c\\\\\\"\\/","literals":[null,true,false]}') as unknown;
    expect(canonicalBytes(input).toString()).toBe('{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\\u000f\\nA\'B\\"\\\\\\\\\\"/"}');
  });

  it('does not depend on the order of fields', () => {
    const snapshot = exampleSnapshot();
    const turned = Object.fromEntries(Object.entries(snapshot).reverse());
    expect(canonicalBytes(turned).equals(canonicalBytes(snapshot))).toBe(true);
  });

  it('refuses what JSON cannot say', () => {
    expect(() => canonicalBytes({ value: Number.NaN })).toThrow();
  });
});

describe('signSnapshot', () => {
  const document = signSnapshot(exampleSnapshot(), key);
  const bytes = canonicalBytes(document.snapshot);

  it('gives a document of the contract whose digest is of the canonical snapshot', () => {
    expect(certificateDocument.parse(document)).toEqual(document);
    expect(document.sha256).toBe(sha256(bytes));
  });

  it('is verified by the public key, as printed', () => {
    expect(signatureHolds(bytes, document.signature.value, document.signature.publicKey)).toBe(true);
    expect(signatureHolds(bytes, document.signature.value, publicPem(key))).toBe(true);
  });

  it('fails for any single changed byte of the content', () => {
    for (let i = 0; i < bytes.length; i += 97) {
      const changed = Buffer.from(bytes);
      changed[i] = (changed[i] ?? 0) ^ 1;
      expect(signatureHolds(changed, document.signature.value, document.signature.publicKey)).toBe(false);
    }
  });

  it('fails for the key of another laboratory', () => {
    const other = generateKeyPairSync('ed25519').publicKey.export({ type: 'spki', format: 'pem' }).toString();
    expect(signatureHolds(bytes, document.signature.value, other)).toBe(false);
  });

  it('signs as RFC 8032, section 7.1, test 3 does', () => {
    const seed = 'c5aa8df43f9f837bedb7442f31dcb7b166d38535076f094b85ce3a2e0b4458f7';
    const privateKey = createPrivateKey({ key: Buffer.from(`302e020100300506032b657004220420${seed}`, 'hex'), format: 'der', type: 'pkcs8' });
    const expected = '6291d657deec24024827e69c3abe01a30ce548a284743a445e3680d7db5ac3ac18ff9b538d16f290ae67f760984dc6594a7c15e9716ed28dc027beceea1ec40a';
    const pem = createPublicKey(privateKey).export({ type: 'spki', format: 'pem' }).toString();
    expect(signatureHolds(Buffer.from('af82', 'hex'), Buffer.from(expected, 'hex').toString('base64'), pem)).toBe(true);
  });
});

describe('certificateJson', () => {
  it('gives the same bytes for the same snapshot', () => {
    expect(certificateJson(signSnapshot(exampleSnapshot(), key)).equals(certificateJson(signSnapshot(exampleSnapshot(), key)))).toBe(true);
  });
});

describe('verification codes', () => {
  it('are twelve characters in three groups, and never the same twice', () => {
    const codes = Array.from({ length: 1000 }, newVerificationCode);
    for (const code of codes) expect(code).toMatch(/^[0-9A-HJKMNP-TV-Z]{4}(-[0-9A-HJKMNP-TV-Z]{4}){2}$/);
    expect(new Set(codes).size).toBe(1000);
  });

  it('are read as people type them', () => {
    expect(normalizedCode(' 7k3m q8rd-ov5l')).toBe(normalizedCode('7K3M-Q8RD-0V51'));
  });
});
