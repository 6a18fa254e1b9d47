/** Results as numbers, and G and K once more as live formulas of the E and ν beside them. */
import type { CertificateSnapshot } from '@strainwright/common/contract/certificates';
import { CONSTANTS, type ConstantName } from '@strainwright/common/contract/vocabulary';
import type { Workbook } from 'exceljs';
import { CONSTANT_NAMES, ENGINEERING, statedConstant, SYMBOLS, type CertificateResult } from '../wording';
import { tableSheet, type Cell } from './sheet';

const VALUE_COLUMN = 'E';
const HEAD_ROWS = 1;

export function resultsSheet(workbook: Workbook, snapshot: CertificateSnapshot): void {
  const rows = snapshot.results.flatMap((result, i) => resultRows(result, HEAD_ROWS + 1 + i * CONSTANTS.length));
  const sheet = tableSheet(workbook, 'Results', [
    { head: 'Specimen', width: 16 }, { head: 'Basis', width: 10 }, { head: 'Constant', width: 18 }, { head: 'Symbol', width: 8 },
    { head: 'Value', width: 14 }, { head: 'Unit', width: 6 }, { head: 'U (95 %)', width: 12 }, { head: 'k', width: 8 }, { head: 'u', width: 12 }, { head: 'ν eff', width: 8 },
    { head: 'Interval low', width: 14 }, { head: 'Interval high', width: 14 }, { head: 'Origin', width: 11 }, { head: 'First order validated by Monte Carlo', width: 34 }, { head: 'From E and ν', width: 14 }, { head: 'As stated', width: 28 },
  ], rows);
  snapshot.results.forEach((result, i) => CONSTANTS.forEach((constant, j) => {
    const format = numberFormat(result, constant);
    if (format !== null) for (const column of ['E', 'K', 'L', 'O']) sheet.getCell(`${column}${HEAD_ROWS + 1 + i * CONSTANTS.length + j}`).numFmt = format;
  }));
}

/** @param firstRow row number of E; ν, G and K follow */
function resultRows(r: CertificateResult, firstRow: number): Cell[][] {
  return CONSTANTS.map((constant) => {
    const c = r.result.constants[constant];
    const name: Cell[] = [r.specimenMark, r.basis, CONSTANT_NAMES[constant], SYMBOLS[constant]];
    if (c === null) return [...name, 'not determined'];
    const { unit, size } = ENGINEERING[constant];
    const stated = statedConstant(r.result, constant);
    return [
      ...name, c.value / size, unit === '' ? '1' : unit, c.expandedUncertainty / size, c.coverageFactor, c.standardUncertainty / size, c.degreesOfFreedom,
      c.interval.low / size, c.interval.high / size, c.origin, stated?.validated === true ? 'yes' : 'no: use the interval', derivation(r, constant, firstRow), stated?.text ?? null,
    ];
  });
}

/** G = E / (2(1 + ν)), K = E / (3(1 − 2ν)), of the cells; with the value they have now, for readers that do not compute. */
function derivation(r: CertificateResult, constant: ConstantName, firstRow: number): Cell {
  const { E, nu } = r.result.constants;
  if (E === null || nu === null || constant === 'E' || constant === 'nu') return null;
  const [e, n] = [`${VALUE_COLUMN}${firstRow}`, `${VALUE_COLUMN}${firstRow + 1}`];
  const modulus = E.value / ENGINEERING.E.size;
  return constant === 'G'
    ? { formula: `${e}/(2*(1+${n}))`, result: modulus / (2 * (1 + nu.value)) }
    : { formula: `${e}/(3*(1-2*${n}))`, result: modulus / (3 * (1 - 2 * nu.value)) };
}

/** As many decimals as the statement has; the cell keeps the whole number. */
function numberFormat(r: CertificateResult, constant: ConstantName): string | null {
  const decimals = statedConstant(r.result, constant)?.text.split(' ')[0]?.split('.')[1]?.length;
  if (r.result.constants[constant] === null) return null;
  return decimals === undefined ? '0' : `0.${'0'.repeat(decimals)}`;
}
