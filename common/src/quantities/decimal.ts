/** Numbers as people type them. Ambiguous input is asked about, never guessed. */
export type DecimalStyle = '.' | ',';
export type Parsed = { value: number } | { problem: 'empty' | 'not a number' | 'ambiguous' };

const PLAIN = /^[+-]?(\d+([.,]\d*)?|[.,]\d+)([eE][+-]?\d+)?$/;

/**
 * Reads a typed number. A comma under the point style (or a point under the comma style) is read only where it cannot be a
 * thousands separator: `1,5` yes, `1,234` is ambiguous.
 */
export function parseDecimal(text: string, style: DecimalStyle): Parsed {
  const typed = text.trim().replace(/\u2212/g, '-').replace(/[\s\u00a0\u202f]/g, '');
  if (typed === '') return { problem: 'empty' };
  if (PLAIN.test(typed)) {
    const other = style === '.' ? ',' : '.';
    const digitsAfter = typed.split(other)[1]?.split(/[eE]/)[0] ?? '';
    const couldBeThousands = typed.includes(other) && digitsAfter.length === 3 && /^[+-]?[1-9]\d{0,2}[.,]/.test(typed);
    if (couldBeThousands) return { problem: 'ambiguous' };
    return { value: Number(typed.replace(',', '.')) };
  }
  const thousands = style === '.' ? ',' : '.';
  const grouped = new RegExp(`^[+-]?\\d{1,3}(\\${thousands}\\d{3})+(\\${style}\\d+)?$`);
  if (grouped.test(typed)) {
    if (!typed.includes(style) && typed.split(thousands).length === 2) return { problem: 'ambiguous' };
    return { value: Number(typed.split(thousands).join('').replace(style, '.')) };
  }
  const otherGrouped = new RegExp(`^[+-]?\\d{1,3}(\\${style}\\d{3})+\\${thousands}\\d+$`);
  return otherGrouped.test(typed) ? { problem: 'ambiguous' } : { problem: 'not a number' };
}

/** A number for a person: the decimal sign of their style. */
export function withDecimalStyle(text: string, style: DecimalStyle): string {
  return style === ',' ? text.replace('.', ',') : text;
}
