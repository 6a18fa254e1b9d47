/** Instants and days as people read them, in the laboratory's place. */
export function showInstant(iso: string | null): string {
  return iso === null ? '–' : new Date(iso).toLocaleString('en-GB', { dateStyle: 'medium', timeStyle: 'short' });
}

export function showDay(iso: string | null): string {
  return iso === null ? '–' : new Date(iso).toLocaleDateString('en-GB', { dateStyle: 'medium' });
}
