/** How a certificate words quantities, days and origins; the same in the PDF and the spreadsheet. */
import { formatMeasured, roundStatement } from '@strainwright/common/quantities/presentation';
import type { CertificateSnapshot } from '@strainwright/common/contract/certificates';
import type { ElasticResult } from '@strainwright/common/contract/result';
import { CONSTANTS, type ConstantName } from '@strainwright/common/contract/vocabulary';

export type CertificateResult = CertificateSnapshot['results'][number];
export type CertificateSpecimen = CertificateSnapshot['specimens'][number];

export const SYMBOLS: Readonly<Record<ConstantName, string>> = { E: 'E', nu: 'ν', G: 'G', K: 'K' };
export const CONSTANT_NAMES: Readonly<Record<ConstantName, string>> = {
  E: 'Young’s modulus', nu: 'Poisson’s ratio', G: 'Shear modulus', K: 'Bulk modulus',
};
/** Engineering units of the certificate, each with its size in SI. */
export const ENGINEERING: Readonly<Record<ConstantName, { unit: string; size: number }>> = {
  E: { unit: 'GPa', size: 1e9 }, nu: { unit: '', size: 1 }, G: { unit: 'GPa', size: 1e9 }, K: { unit: 'GPa', size: 1e9 },
};

const withUnit = (text: string, unit: string) => (unit === '' || unit === '1' ? text : `${text} ${unit}`);
const minus = (text: string) => text.replace('-', '−');

/** A value and its uncertainty as one typographic unit, digits following the uncertainty: `70.3 ± 0.9 GPa`. */
export function stated(value: number, uncertainty: number, unit: string): string {
  const m = formatMeasured(value, uncertainty, unit);
  return withUnit(`${minus(m.value)} ± ${m.uncertainty}`, m.unit);
}

export interface StatedConstant {
  readonly constant: ConstantName;
  /** `70.3 ± 0.9 GPa`, or `70.3 (69.4 to 71.2) GPa` where the first-order uncertainty is not validated. */
  readonly text: string;
  readonly interval: string;
  readonly coverageFactor: string;
  readonly degreesOfFreedom: string;
  readonly origin: 'measured' | 'derived';
  /** JCGM 101 clause 8: the first-order interval agrees with the Monte Carlo one. */
  readonly validated: boolean;
}

/** One constant as the certificate states it; null where the test does not determine it. */
export function statedConstant(result: ElasticResult, constant: ConstantName): StatedConstant | null {
  const c = result.constants[constant];
  if (c === null) return null;
  const { unit, size } = ENGINEERING[constant];
  const rounded = (x: number) => roundStatement(x / size, c.expandedUncertainty / size);
  const bound = (x: number) => minus(rounded(x).value);
  const { value, uncertainty } = rounded(c.value);
  const bounds = `${bound(c.interval.low)} to ${bound(c.interval.high)}`;
  const validated = result.monteCarlo.comparison[constant]?.agrees ?? result.monteCarlo.agrees;
  return {
    constant, validated, origin: c.origin, interval: withUnit(bounds, unit),
    text: withUnit(validated ? `${minus(value)} ± ${uncertainty}` : `${minus(value)} (${bounds})`, unit),
    coverageFactor: c.coverageFactor.toFixed(2),
    degreesOfFreedom: degreesOfFreedomText(c.degreesOfFreedom),
  };
}

export function statedConstants(result: ElasticResult): StatedConstant[] {
  return CONSTANTS.map((constant) => statedConstant(result, constant)).filter((s) => s !== null);
}

/** Truncated down (JCGM 100 G.4.1 note); above 1 000 the t distribution is normal to all printed digits. */
export function degreesOfFreedomText(degreesOfFreedom: number | null): string {
  return degreesOfFreedom === null || degreesOfFreedom > 1000 ? '∞' : String(Math.floor(degreesOfFreedom));
}

/** Day of an instant in the laboratory's time zone, `2026-03-14`. */
export function dayOf(instant: string, timeZone: string): string {
  return momentParts(instant, timeZone).day;
}

/** `2026-03-14 15:09` in the laboratory's time zone. */
export function momentOf(instant: string, timeZone: string): string {
  const { day, time } = momentParts(instant, timeZone);
  return `${day} ${time}`;
}

function momentParts(instant: string, timeZone: string): { day: string; time: string } {
  const parts = new Intl.DateTimeFormat('en-GB', {
    timeZone, calendar: 'gregory', numberingSystem: 'latn', hourCycle: 'h23',
    year: 'numeric', month: '2-digit', day: '2-digit', hour: '2-digit', minute: '2-digit',
  }).formatToParts(new Date(instant));
  const part = (type: Intl.DateTimeFormatPartTypes) => parts.find((p) => p.type === type)?.value ?? '';
  return { day: `${part('year')}-${part('month')}-${part('day')}`, time: `${part('hour')}:${part('minute')}` };
}

/** First and last day of activity. */
export function daysOfActivity(snapshot: CertificateSnapshot): string {
  const days = snapshot.results.flatMap((r) => r.runs.map((run) => dayOf(run.performedAt, snapshot.laboratory.timeZone))).sort();
  const [first, last] = [days[0] ?? '', days.at(-1) ?? ''];
  return first === last ? first : `${first} to ${last}`;
}

export function distinct(texts: readonly string[]): string[] {
  return [...new Set(texts)];
}

export function issueName(snapshot: CertificateSnapshot): string {
  return `${snapshot.number} issue ${snapshot.issue}`;
}

export const BASIS_EXPLANATIONS = {
  static: 'from the slopes of load and strain records',
  dynamic: 'from the velocities of ultrasonic pulses',
} as const;

export const KIND_NAMES = { pulse: 'pulse', 'stress-strain': 'stress–strain' } as const;
