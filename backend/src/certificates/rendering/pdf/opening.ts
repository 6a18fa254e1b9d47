/** First page: who, what for, which issue, and the answer. */
import type { CertificateSnapshot } from '@strainwright/common/contract/certificates';
import type { Content } from 'pdfmake/interfaces';
import { CONSTANTS, type ConstantName } from '@strainwright/common/contract/vocabulary';
import { BASIS_EXPLANATIONS, CONSTANT_NAMES, dayOf, daysOfActivity, distinct, issueName, statedConstant, SYMBOLS, type CertificateResult } from '../wording';
import { facts, heading, INK, ruledTable, rule, WARN } from './style';

export function openingPage(snapshot: CertificateSnapshot): Content[] {
  return [masthead(snapshot), rule(INK, 0.9), ...replacement(snapshot), parties(snapshot), ...separation(snapshot), heading('Results'), ...summary(snapshot)];
}

function masthead(snapshot: CertificateSnapshot): Content {
  return {
    margin: [0, 0, 0, 8],
    columns: [
      {
        width: '*',
        stack: [
          { text: snapshot.title, style: 'title' },
          { text: snapshot.laboratory.name, fontSize: 10.5, margin: [0, 6, 0, 0] },
          { text: snapshot.laboratory.address, fontSize: 8.5 },
        ],
      },
      {
        width: 190,
        stack: [
          { text: 'Certificate', style: 'label', alignment: 'right' },
          { text: snapshot.number, font: 'RobotoMono', bold: true, fontSize: 14, alignment: 'right' },
          { text: `issue ${snapshot.issue}, ${dayOf(snapshot.issuedAt, snapshot.laboratory.timeZone)}`, font: 'RobotoMono', fontSize: 8.5, alignment: 'right' },
        ],
      },
    ],
  };
}

function replacement(snapshot: CertificateSnapshot): Content[] {
  const { replaces } = snapshot;
  if (replaces === null) return [];
  const day = dayOf(replaces.releasedAt, snapshot.laboratory.timeZone);
  return [{
    margin: [0, 8, 0, 0],
    stack: [
      { text: `Amendment: issue ${snapshot.issue} replaces certificate ${replaces.number} issue ${replaces.issue} of ${day}.`, bold: true, fontSize: 9 },
      { text: `Reason: ${replaces.reason}`, fontSize: 8.5, margin: [0, 2, 0, 0] },
    ],
  }];
}

function parties(snapshot: CertificateSnapshot): Content {
  const { customer, order, results } = snapshot;
  return {
    margin: [0, 8, 0, 0],
    stack: [facts([
      ['Customer', `${customer.name}\n${customer.address}`],
      ['Order', order.number],
      ['Customer’s reference', order.customerReference],
      ['Tested', daysOfActivity(snapshot)],
      ['Analysed by', distinct(results.map((r) => r.analysedBy)).join(', ')],
      ['Reviewed by', distinct(results.map((r) => r.reviewedBy)).join(', ')],
      ['Released by', snapshot.releasedBy],
      ['Place of testing', `${snapshot.laboratory.name}, ${snapshot.laboratory.address}`],
    ], 3)],
  };
}

function separation(snapshot: CertificateSnapshot): Content[] {
  if (snapshot.laboratory.separationOfDuties) return [];
  return [{ text: 'Separation of duties is switched off in this laboratory: the work and its review or release may be by the same person.', fontSize: 8, color: WARN, margin: [0, 4, 0, 0] }];
}

function summary(snapshot: CertificateSnapshot): Content[] {
  const bases = distinct(snapshot.results.map((r) => r.basis)) as CertificateResult['basis'][];
  return [
    ruledTable(
      [{ head: 'Specimen', width: 78 }, { head: 'Basis', width: 42 }, ...CONSTANTS.map((c) => ({ head: `${CONSTANT_NAMES[c]} ${SYMBOLS[c]}`, width: '*' as const, right: true }))],
      snapshot.results.map((r) => [{ text: r.specimenMark, style: 'number' }, r.basis, ...CONSTANTS.map((c) => summaryCell(r, c))]),
    ),
    { style: 'note', stack: notes(snapshot, bases) },
  ];
}

function summaryCell(result: CertificateResult, constant: ConstantName): Content {
  const stated = statedConstant(result.result, constant);
  if (stated === null) return { text: '–', alignment: 'right' };
  return { text: `${stated.text}${stated.validated ? '' : ' ‡'}`, style: 'number', fontSize: 7.2, alignment: 'right' };
}

function notes(snapshot: CertificateSnapshot, bases: CertificateResult['basis'][]): Content[] {
  const anyInterval = snapshot.results.some((r) => CONSTANTS.some((c) => statedConstant(r.result, c)?.validated === false));
  return [
    { text: `Values are given with their expanded uncertainty for a coverage probability of 95 %; coverage factors k are listed with each result. ${bases.map((b) => `${b.charAt(0).toUpperCase()}${b.slice(1)} constants are ${BASIS_EXPLANATIONS[b]}.`).join(' ')}` },
    ...(anyInterval ? [{ text: '‡ Stated as the shortest 95 % interval of a Monte Carlo evaluation (JCGM 101), because the first-order uncertainty does not agree with it within its digits.' }] : []),
    { text: `This certificate is ${issueName(snapshot)}. Numbers are rounded once, here; the data file of the same number carries them in full.` },
  ];
}
