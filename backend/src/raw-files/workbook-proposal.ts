/** Proposes how to read a workbook: of its sheets the one with the most rows of numbers. */
import type { LayoutProposal } from '@strainwright/common/contract/runs';
import { proposeWorkbookLayout, type ProposalContext } from '@strainwright/common/tabular/propose-layout';
import { TabularRefused } from '@strainwright/common/tabular/tabular-refused';
import { workbookRows } from './workbook';

const HEAD_ROWS = 2000;
/** Of the rows after the head, one in so many is looked at. */
const SAMPLED = 100;

interface Sheet {
  readonly head: string[][];
  readonly later: string[][];
  count: number;
}

async function sheetsOf(path: string, names: ReadonlyMap<string, string>): Promise<Map<string, Sheet>> {
  const sheets = new Map<string, Sheet>();
  for await (const { sheet: name, cells } of workbookRows(path, names, () => true)) {
    const sheet = sheets.get(name) ?? { head: [], later: [], count: 0 };
    sheets.set(name, sheet);
    sheet.count += 1;
    if (sheet.count <= HEAD_ROWS) sheet.head.push(cells);
    else if (sheet.count % SAMPLED === 0) sheet.later.push(cells);
  }
  return sheets;
}

/** @throws TabularRefused when no sheet is a table */
export async function proposeOfWorkbook(path: string, names: ReadonlyMap<string, string>, context: ProposalContext): Promise<LayoutProposal> {
  const proposals: LayoutProposal[] = [];
  let refused = new TabularRefused('no-numbers');
  for (const [name, { head, later, count }] of await sheetsOf(path, names)) {
    try {
      const proposal = proposeWorkbookLayout(head, later, name, count, context);
      proposals.push({ ...proposal, rowCount: count - proposal.layout.firstDataRow });
    } catch (error) {
      if (!(error instanceof TabularRefused)) throw error;
      refused = error;
    }
  }
  const [best, ...others] = proposals.sort((a, b) => b.rowCount - a.rowCount);
  if (best === undefined) throw refused;
  if (others.length === 0) return best;
  const alike = (others[0]?.rowCount ?? 0) * 2 > best.rowCount;
  const remark = `Sheet “${best.layout.sheet}” is read; ${others.map((o) => `“${o.layout.sheet}”`).join(', ')} ${others.length === 1 ? 'holds' : 'hold'} numbers too.`;
  return { ...best, confidence: Math.min(best.confidence, alike ? 0.5 : 0.9), remarks: [remark, ...best.remarks] };
}
