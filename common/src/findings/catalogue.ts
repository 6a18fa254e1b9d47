import type { Severity } from '../contract/result';

/** What the catalogue holds for a code: how grave, why it matters, what to do. */
export interface CatalogueEntry {
  readonly severity: Severity;
  readonly why: string;
  readonly action: string;
}

/** Keeps the codes as literal keys while checking the entries. */
export function catalogue<Code extends string>(entries: Record<Code, CatalogueEntry>): Record<Code, CatalogueEntry> {
  return entries;
}
