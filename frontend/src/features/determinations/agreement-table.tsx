/** Where a constant was measured more than once: whether the fits agree. */
import type { Determination } from '@strainwright/common/contract/determinations';
import { SYMBOLS } from '../../components/constants-plate';
import { Numeral } from '../../components/measured';
import { Section } from '../../components/page';
import { PlainTable } from '../../components/table';

export function AgreementTable({ determination }: { determination: Determination }) {
  if (determination.agreements.length === 0) return null;
  return (
    <Section title="Measured more than once">
      <PlainTable label="Agreement" rows={determination.agreements} keyOf={(a) => `${a.constant} ${a.fits.join()}`} columns={[
        { title: 'Constant', cell: (a) => SYMBOLS[a.constant] },
        { title: 'Values', cell: (a) => a.values.map((v, i) => <span key={i}>{i > 0 && ' and '}<Numeral value={a.constant === 'nu' ? v : v / 1e9} />{a.constant === 'nu' ? '' : ' GPa'}</span>) },
        { title: 'E_n', cell: (a) => <Numeral value={a.en} digits={3} />, numeric: true }, { title: 'Verdict', cell: (a) => (a.agrees ? 'agree' : 'differ by more than their uncertainty') },
      ]} />
    </Section>
  );
}
