/** A finding takes its severity, reason and remedy from the catalogue; the place that notices it adds only what was seen. */
import type { Finding } from '../contract/result';
import { CONSTANT_FINDINGS } from './constant-findings';
import { INSTRUMENT_FINDINGS } from './instrument-findings';
import { PULSE_FINDINGS } from './pulse-findings';
import { RECORD_FINDINGS } from './record-findings';
import { SPECIMEN_FINDINGS } from './specimen-findings';

const CATALOGUE = { ...CONSTANT_FINDINGS, ...INSTRUMENT_FINDINGS, ...PULSE_FINDINGS, ...RECORD_FINDINGS, ...SPECIMEN_FINDINGS };

export type FindingCode = keyof typeof CATALOGUE;

/**
 * @param subject what it is about: a reading quantity, a channel, a constant, an instrument's name
 * @param seen what was seen, with numbers and units
 */
export function finding(code: FindingCode, subject: string, seen: string): Finding {
  return { code, subject, seen, ...CATALOGUE[code] };
}

/** Whether findings keep a result from being submitted or released. */
export function hasStop(findings: readonly Finding[]): boolean {
  return findings.some((f) => f.severity === 'stop');
}
