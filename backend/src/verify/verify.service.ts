import { createHash, timingSafeEqual } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { readFile } from 'node:fs/promises';
import { Injectable } from '@nestjs/common';
import { certificateDocument, type Verification } from '@strainwright/common/contract/certificates';
import { and, desc, eq, ne } from 'drizzle-orm';
import { z } from 'zod';
import { canonicalBytes, normalizedCode, signatureHolds } from '../certificates/rendering/signing';
import { Database } from '../database/database';
import { certificateDocuments, certificates } from '../database/schema/certificates';
import { sha256 } from '../platform/canonical';
import { Secrets } from '../platform/secrets';

type CertificateRow = typeof certificates.$inferSelect;

/** Of a data file, what proves it; the snapshot is hashed as it came. */
const provenFile = z.object({ snapshot: z.record(z.string(), z.unknown()), signature: certificateDocument.shape.signature });
/** A data file is smaller than this by far. */
const LARGEST_DATA_FILE = 8 * 1024 * 1024;

const NOT_OURS: Verification = {
  verdict: 'not ours', number: null, issue: null, releasedAt: null, laboratory: null, sha256: null, replacedBy: null, withdrawal: null,
  explanation: 'This laboratory has not issued that: the number and code do not belong together, or the file is not, byte for byte, one that was issued.',
};

/** Tells anyone whether a certificate is the laboratory's, and whether it still stands. Without the right code it tells nothing. */
@Injectable()
export class VerifyService {
  constructor(private readonly database: Database, private readonly secrets: Secrets) {}

  async byCode(number: string, code: string, issue: number | undefined): Promise<Verification> {
    const rows = await this.database.db.select().from(certificates)
      .where(and(eq(certificates.number, number.trim().toUpperCase()), ne(certificates.state, 'draft'), issue === undefined ? undefined : eq(certificates.issue, issue)));
    const row = rows.find((candidate) => candidate.code !== null && sameCode(candidate.code, code));
    return row === undefined ? NOT_OURS : this.verdictOf(row);
  }

  /** A document as it was issued, or a data file whose content and signature are. */
  async byFile(path: string, size: number): Promise<Verification> {
    const row = (await this.issuedAs(await digestOf(path))) ?? (size <= LARGEST_DATA_FILE ? await this.signedContent(await readFile(path, 'utf8')) : undefined);
    return row === undefined ? NOT_OURS : this.verdictOf(row);
  }

  private async issuedAs(digest: string): Promise<CertificateRow | undefined> {
    const [found] = await this.database.db.select({ certificate: certificates }).from(certificateDocuments).innerJoin(certificates, eq(certificates.id, certificateDocuments.certificateId))
      .where(eq(certificateDocuments.sha256, digest)).limit(1);
    return found?.certificate;
  }

  private async signedContent(text: string): Promise<CertificateRow | undefined> {
    const proven = readProven(text);
    if (proven === undefined || !signatureHolds(proven.bytes, proven.signature, this.publicKey())) return undefined;
    const [row] = await this.database.db.select().from(certificates).where(and(eq(certificates.sha256, sha256(proven.bytes)), ne(certificates.state, 'draft')));
    return row;
  }

  private publicKey(): string {
    return this.secrets.verifyingKey.export({ type: 'spki', format: 'pem' }).toString();
  }

  private async verdictOf(row: CertificateRow): Promise<Verification> {
    const told = {
      number: row.number, issue: row.issue, releasedAt: row.releasedAt?.toISOString() ?? null, laboratory: row.snapshot?.laboratory.name ?? null, sha256: row.sha256, replacedBy: null, withdrawal: null,
    };
    if (row.state === 'released') return { ...told, verdict: 'genuine and current', explanation: `Certificate ${row.number} issue ${row.issue} is genuine and stands.` };
    if (row.state === 'withdrawn') return { ...told, verdict: 'genuine but withdrawn', withdrawal: withdrawalOf(row), explanation: `Certificate ${row.number} issue ${row.issue} is genuine, but the laboratory has withdrawn it. Do not use it.` };
    const latest = await this.latestIssue(row.number);
    return {
      ...told, verdict: 'genuine but superseded', replacedBy: { number: latest.number, issue: latest.issue, releasedAt: latest.releasedAt?.toISOString() ?? '' }, withdrawal: withdrawalOf(latest),
      explanation: `Certificate ${row.number} issue ${row.issue} is genuine, but issue ${latest.issue} has replaced it${latest.state === 'withdrawn' ? ', and that was withdrawn' : ''}. Ask for the current issue.`,
    };
  }

  private async latestIssue(number: string): Promise<CertificateRow> {
    const [latest] = await this.database.db.select().from(certificates).where(and(eq(certificates.number, number), ne(certificates.state, 'draft'))).orderBy(desc(certificates.issue)).limit(1);
    if (latest === undefined) throw new Error(`Certificate ${number} has no issue`);
    return latest;
  }
}

function withdrawalOf(row: CertificateRow): Verification['withdrawal'] {
  return row.withdrawnAt === null ? null : { at: row.withdrawnAt.toISOString(), reason: row.withdrawalReason ?? '' };
}

/** In the same time whether the first or the last character differs. */
function sameCode(stored: string, typed: string): boolean {
  const digest = (code: string) => createHash('sha256').update(normalizedCode(code)).digest();
  return timingSafeEqual(digest(stored), digest(typed));
}

async function digestOf(path: string): Promise<string> {
  const hash = createHash('sha256');
  for await (const chunk of createReadStream(path)) hash.update(chunk as Buffer);
  return hash.digest('hex');
}

/** Whatever anyone hands in: undefined for all that is not a data file, however it is wrong. */
function readProven(text: string): { bytes: Buffer; signature: string } | undefined {
  try {
    const { snapshot, signature } = provenFile.parse(JSON.parse(text));
    return { bytes: canonicalBytes(snapshot), signature: signature.value };
  } catch {
    return undefined;
  }
}
