/** Statements of conformity: each limit of the order against each result that has its constant. */
import type { CertificateSnapshot } from '@strainwright/common/contract/certificates';
import type { Limit } from '@strainwright/common/contract/orders';
import { decide, type Decision } from '@strainwright/common/uncertainty/decision-rules';
import { ENGINEERING, statedConstant, SYMBOLS, type CertificateResult } from '../rendering/wording';

type Statement = CertificateSnapshot['conformity'][number];

export function conformityStatements(limits: readonly Limit[], results: readonly CertificateResult[]): Statement[] {
  return results.flatMap((result) => limits.flatMap((limit) => {
    const measured = result.result.constants[limit.constant];
    const stated = statedConstant(result.result, limit.constant);
    if (measured === null || stated === null) return [];
    const decision = decide(measured, limit, stated.validated);
    const { conforms, probability } = decision;
    return [{ specimenMark: result.specimenMark, basis: result.basis, ...limit, conforms, probability, statement: words(limit, stated.text, decision) }];
  }));
}

function words(limit: Limit, text: string, { conforms, acceptance }: Decision): string {
  const { unit, size } = ENGINEERING[limit.constant];
  const shown = (x: number) => `${Number((x / size).toPrecision(5))}${unit === '' ? '' : ` ${unit}`}`;
  const limits = range(limit, shown);
  const accepted = limit.rule === 'simple' ? '' : `, accepted ${range(acceptance, shown)}`;
  return `${SYMBOLS[limit.constant]} = ${text}; limit ${limits}${accepted}: the value lies ${conforms ? 'inside' : 'outside'}.`;
}

function range({ lower, upper }: { lower: number | null; upper: number | null }, shown: (x: number) => string): string {
  if (lower !== null && upper !== null) return `from ${shown(lower)} to ${shown(upper)}`;
  return lower !== null ? `from ${shown(lower)}` : `up to ${shown(upper ?? Number.NaN)}`;
}
