/** Numbers as people type them. Ambiguous input is asked about, never guessed. */
export type DecimalStyle = '.' | ',';
export type Parsed = { value: number } | { problem: 'empty' | 'not a number' | 'ambiguous' };

const PLAIN = /^[+-]?(\d+([.,]\d*)?|[.,]\d+)([eE][+-]?\d+)?$/;
const SPACED = /^[+-]?\d{1,3}( \d{3})+([.,]\d+)?$/;

function finite(text: string): Parsed {
  const value = Number(text);
  return Number.isFinite(value) ? { value } : { problem: 'not a number' };
}

/**
 * Reads a typed number. A comma under the point style (or a point under the comma style) is read only where it cannot be a
 * thousands separator: `1,5` yes, `1,234` is ambiguous. Spaces may only group thousands: `1 234,5` yes, `12 34` no.
 */
export function parseDecimal(text: string, style: DecimalStyle): Parsed {
  const typed = text.trim().replace(/\u2212/g, '-').replace(/^([+-])\s+/, '$1').replace(/[\u00a0\u2009\u202f]/g, ' ');
  if (typed === '') return { problem: 'empty' };
  if (SPACED.test(typed)) return finite(typed.replace(/ /g, '').replace(',', '.'));
  const [thousands, escaped] = style === '.' ? [',', '\\.'] : ['.', ','];
  if (PLAIN.test(typed)) {
    const couldBeThousands = new RegExp(`^[+-]?[1-9]\\d{0,2}\\${thousands}\\d{3}$`).test(typed);
    return couldBeThousands ? { problem: 'ambiguous' } : finite(typed.replace(',', '.'));
  }
  const grouped = new RegExp(`^[+-]?\\d{1,3}(\\${thousands}\\d{3})+(${escaped}\\d+)?$`);
  if (grouped.test(typed)) return finite(typed.split(thousands).join('').replace(style, '.'));
  const groupedTheOtherWay = new RegExp(`^[+-]?\\d{1,3}(${escaped}\\d{3})+(\\${thousands}\\d+)?$`);
  return groupedTheOtherWay.test(typed) ? { problem: 'ambiguous' } : { problem: 'not a number' };
}

/** A number for a person: the decimal sign of their style. */
export function withDecimalStyle(text: string, style: DecimalStyle): string {
  return style === ',' ? text.replace('.', ',') : text;
}
