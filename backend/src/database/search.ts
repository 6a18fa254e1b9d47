/** A LIKE pattern for text that contains `text`, whose own % and _ mean themselves. */
export const containing = (text: string): string => `%${text.replace(/[\\%_]/g, '\\$&')}%`;
