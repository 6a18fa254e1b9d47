import { bigint, index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { CertificateSnapshot } from '@strainwright/common/contract/certificates';
import type { CertificateState } from '@strainwright/common/contract/states';
import { id, instant, version } from './columns';
import { orders } from './orders';
import { people } from './people';

/** One row an issue. After release a trigger lets only the state, and what goes with it, change. */
export const certificates = pgTable('certificates', {
  id: id(),
  number: text('number').notNull(),
  issue: integer('issue').notNull(),
  orderId: uuid('order_id').notNull().references(() => orders.id),
  state: text('state').notNull().$type<CertificateState>(),
  replacesId: uuid('replaces_id'),
  /** Why this issue replaces the one before. */
  reason: text('reason'),
  determinationIds: uuid('determination_ids').array().notNull(),
  deviations: text('deviations').notNull().default(''),
  snapshot: jsonb('snapshot').$type<CertificateSnapshot>(),
  sha256: text('sha256'),
  signature: text('signature'),
  keyId: text('key_id'),
  code: text('code'),
  draftedById: uuid('drafted_by_id').notNull().references(() => people.id),
  draftedAt: instant('drafted_at').notNull(),
  releasedById: uuid('released_by_id').references(() => people.id),
  releasedAt: instant('released_at'),
  withdrawnAt: instant('withdrawn_at'),
  withdrawalReason: text('withdrawal_reason'),
  version: version(),
}, (t) => [uniqueIndex('certificates_issue').on(t.number, t.issue), index('certificates_order').on(t.orderId), index('certificates_state').on(t.state)]);

/** The released bytes, by format; insert-only, so that a file in hand can be recognised. */
export const certificateDocuments = pgTable('certificate_documents', {
  id: id(),
  certificateId: uuid('certificate_id').notNull().references(() => certificates.id),
  format: text('format').notNull().$type<'pdf' | 'xlsx' | 'json'>(),
  sha256: text('sha256').notNull(),
  size: bigint('size', { mode: 'number' }).notNull(),
}, (t) => [uniqueIndex('certificate_documents_format').on(t.certificateId, t.format), index('certificate_documents_sha256').on(t.sha256)]);
