/**
 * Separation of duties, judged per record whatever the roles: who adopted a fit or submitted a determination may neither
 * review it nor release a certificate that holds it. An administrator can switch the rule off for a sole practitioner.
 */
export interface WorkOn {
  readonly adoptedByIds: readonly string[];
  readonly composedById: string;
  readonly submittedById: string | null;
}

/** @returns why the person may not, in words; null when they may */
export function separationProblem(work: WorkOn, personId: string, to: 'review' | 'release', separationOfDuties: boolean): string | null {
  if (!separationOfDuties) return null;
  if (work.submittedById === personId) return `You submitted this determination; someone else must ${to} it`;
  if (work.adoptedByIds.includes(personId)) return `You adopted a fit of this determination; someone else must ${to} it`;
  if (work.composedById === personId) return `You composed this determination; someone else must ${to} it`;
  return null;
}
