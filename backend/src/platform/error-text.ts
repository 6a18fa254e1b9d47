/** The message of whatever was thrown; errors of worker threads and other realms are not `instanceof Error` here. */
export function errorText(thrown: unknown): string {
  if (typeof thrown === 'object' && thrown !== null) {
    const { message } = thrown as { message?: unknown };
    if (typeof message === 'string') return message;
  }
  return String(thrown);
}
