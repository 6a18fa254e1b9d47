/** The uncertainty budget: every input with its share of each constant's variance. */
import type { ElasticResult } from '@strainwright/common/contract/result';
import { CONSTANTS } from '@strainwright/common/contract/vocabulary';
import { Typography } from '@mui/material';
import { SYMBOLS } from '../../components/constants-plate';
import { Numeral } from '../../components/measured';
import { Section } from '../../components/page';
import { PlainTable } from '../../components/table';

const share = (value: number | null) => (value === null ? '–' : `${value.toFixed(value < 0.95 && value > 0.05 ? 1 : 0)} %`);

export function BudgetTable({ result }: { result: ElasticResult }) {
  const largest = (line: ElasticResult['budget'][number]) => Math.max(...CONSTANTS.map((c) => line.contribution[c] ?? 0));
  const rows = [...result.budget].sort((a, b) => largest(b) - largest(a));
  const check = result.monteCarlo;
  return (
    <Section title="Uncertainty budget">
      <PlainTable label="Uncertainty budget" rows={rows} keyOf={(l) => l.input} columns={[
        { title: 'Input', cell: (l) => l.label }, { title: 'Value', cell: (l) => <><Numeral value={l.value} digits={6} /> {l.unit === '1' ? '' : l.unit}</>, numeric: true },
        { title: 'u', cell: (l) => <Numeral value={l.standardUncertainty} digits={3} />, numeric: true }, { title: 'Type', cell: (l) => `${l.type}, ${l.distribution}` },
        { title: 'ν', cell: (l) => l.degreesOfFreedom === null ? '∞' : Math.floor(l.degreesOfFreedom), numeric: true },
        ...CONSTANTS.map((c) => ({ title: `of ${SYMBOLS[c]}`, cell: (l: ElasticResult['budget'][number]) => share(l.contribution[c]), numeric: true })),
        { title: 'Source', cell: (l) => l.source },
      ]} />
      <Typography variant="body2" color="textSecondary" sx={{ mt: 1 }}>
        Monte Carlo, {check.trials.toLocaleString('en-GB')} trials, seed <span className="mono">{check.seed}</span>: the first-order intervals {check.agrees ? 'are confirmed' : 'are not confirmed; the Monte Carlo intervals are the ones to state'}. Correlations:{' '}
        {CONSTANTS.flatMap((a, i) => CONSTANTS.slice(i + 1).map((b, k) => {
          const r = result.correlation[i]?.[i + 1 + k];
          return r === null || r === undefined ? '' : `r(${SYMBOLS[a]},${SYMBOLS[b]}) = ${r.toFixed(2)}`;
        })).filter((t) => t !== '').join(', ')}.
      </Typography>
    </Section>
  );
}
