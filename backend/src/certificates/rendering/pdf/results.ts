/** One block a result: the four constants with everything that their uncertainty rests on. */
import type { CertificateSnapshot } from '@strainwright/common/contract/certificates';
import type { BudgetLine, ElasticResult } from '@strainwright/common/contract/result';
import { CONSTANTS, type ConstantName } from '@strainwright/common/contract/vocabulary';
import type { Content } from 'pdfmake/interfaces';
import { CONSTANT_NAMES, dayOf, ENGINEERING, stated, statedConstants, SYMBOLS, type CertificateResult } from '../wording';
import { PLATE_WIDTH, plateSvg } from './plate';
import { heading, QUIET, ruledTable } from './style';

export function results(snapshot: CertificateSnapshot): Content[] {
  return [heading('Results in full'), ...snapshot.results.flatMap((r) => [block(r, snapshot.laboratory.timeZone), ...acknowledged(r)])];
}

/** Kept on one page; the findings, of any length, follow it. */
function block(r: CertificateResult, timeZone: string): Content {
  return {
    unbreakable: true,
    stack: [
      { text: [{ text: r.specimenMark, font: 'RobotoMono' }, `   ${r.basis}`, { text: `   ${r.method.code} version ${r.method.versionNumber}; analysed by ${r.analysedBy}, reviewed by ${r.reviewedBy} on ${dayOf(r.reviewedAt, timeZone)}`, bold: false, fontSize: 7.5, color: QUIET }], style: 'resultHeading' },
      constantsTable(r.result),
      { margin: [0, 6, 0, 0], columnGap: 14, columns: [{ width: PLATE_WIDTH, svg: plateSvg(r.result) }, { width: '*', stack: [correlation(r.result), contributions(r.result)] }] },
    ],
  };
}

function constantsTable(result: ElasticResult): Content {
  return ruledTable(
    [
      { head: 'Constant', width: 82 }, { head: 'Stated, with U', width: '*', number: true, right: true }, { head: 'u', width: 52, number: true, right: true },
      { head: 'k', width: 24, number: true, right: true }, { head: 'ν eff', width: 28, number: true, right: true }, { head: '95 % Monte Carlo interval', width: 112, number: true, right: true }, { head: 'Origin', width: 44 },
    ],
    statedConstants(result).map((s) => [
      `${CONSTANT_NAMES[s.constant]} ${SYMBOLS[s.constant]}`, s.validated ? s.text : { text: `${s.text} ‡`, style: 'number', fontSize: 6.8, alignment: 'right' }, standardUncertainty(result, s.constant), s.coverageFactor, s.degreesOfFreedom, s.interval, s.origin,
    ]),
  );
}

/** Two significant digits (JCGM 100, 7.2.6). */
function standardUncertainty(result: ElasticResult, constant: ConstantName): string {
  const u = result.constants[constant]?.standardUncertainty ?? 0;
  const { unit, size } = ENGINEERING[constant];
  const text = stated(0, u / size, unit);
  return text.slice(text.indexOf('±') + 1).trim();
}

function correlation(result: ElasticResult): Content {
  const known = CONSTANTS.filter((c) => result.constants[c] !== null);
  return {
    stack: [
      { text: 'Correlation coefficients', style: 'label', margin: [0, 0, 0, 2] },
      ruledTable(
        [{ head: '', width: 16 }, ...known.map((c) => ({ head: SYMBOLS[c], width: 42, number: true, right: true }))],
        known.map((row) => [SYMBOLS[row], ...known.map((column) => coefficient(result, row, column))]),
      ),
    ],
  };
}

function coefficient(result: ElasticResult, row: ConstantName, column: ConstantName): string {
  const r = result.correlation[CONSTANTS.indexOf(row)]?.[CONSTANTS.indexOf(column)] ?? null;
  return r === null ? '–' : r.toFixed(3).replace('-', '−');
}

/** The three largest shares of the variance of E and of ν; the whole budget is on the spreadsheet. */
function contributions(result: ElasticResult): Content {
  const shown = (['E', 'nu'] as const).filter((c) => result.constants[c] !== null);
  return {
    margin: [0, 6, 0, 0],
    stack: shown.map((c) => ({ style: 'note', text: `Largest shares of the variance of ${SYMBOLS[c]}: ${largest(result.budget, c)}.` })),
  };
}

function largest(budget: readonly BudgetLine[], constant: ConstantName): string {
  return budget
    .map((line) => ({ label: line.label, share: line.contribution[constant] ?? 0 }))
    .filter(({ share }) => share >= 0.5)
    .sort((a, b) => b.share - a.share)
    .slice(0, 3)
    .map(({ label, share }) => `${label} ${share.toFixed(0)} %`)
    .join(', ');
}

function acknowledged(r: CertificateResult): Content[] {
  const { findings } = r.result;
  if (findings.length === 0) return [];
  return [{
    margin: [0, 6, 0, 0],
    stack: [
      { text: 'Findings', style: 'label', margin: [0, 0, 0, 2] },
      ruledTable(
        [{ head: 'Severity', width: 38 }, { head: 'Seen', width: '*' }, { head: 'Accepted because', width: 190 }],
        findings.map((f) => [f.severity, { text: [f.seen, { text: `  ${f.why}`, color: QUIET }], style: 'small' }, { text: reasonFor(r, f.code, f.subject), style: 'small' }]),
      ),
    ],
  }];
}

function reasonFor(r: CertificateResult, code: string, subject: string): string {
  return r.acknowledgements.find((a) => a.code === code && a.subject === subject)?.reason ?? '–';
}
