/** What was tested: specimens as received and as measured. */
import type { CertificateSnapshot } from '@strainwright/common/contract/certificates';
import { fromSI } from '@strainwright/common/quantities/units';
import type { Content } from 'pdfmake/interfaces';
import { stated, type CertificateSpecimen } from '../wording';
import { heading, ruledTable } from './style';

export function items(snapshot: CertificateSnapshot): Content[] {
  return [heading('Items tested'), received(snapshot.specimens), { text: '', margin: [0, 4, 0, 0] }, measured(snapshot.specimens)];
}

function received(specimens: readonly CertificateSpecimen[]): Content {
  return ruledTable(
    [{ head: 'Specimen', width: 70 }, { head: 'Sample', width: 42 }, { head: 'Material', width: '*' }, { head: 'Shape, orientation', width: 80 }, { head: 'Received, condition', width: '*' }, { head: 'Sampled †', width: 78 }],
    specimens.map((s) => [
      { text: s.mark, style: 'number' }, { text: s.sampleMark, style: 'number' }, `${s.material} (${s.materialClass})`,
      listed(s.shape, s.orientation), listed(s.receivedOn, s.condition, s.moisture === 'not applicable' ? '' : s.moisture), listed(s.sampledOn ?? 'date not given', s.sampledBy === '' ? '' : `by ${s.sampledBy}`),
    ]),
  );
}

const listed = (...texts: string[]) => texts.filter((t) => t !== '').join(', ');

function measured(specimens: readonly CertificateSpecimen[]): Content {
  return {
    stack: [
      ruledTable(
        [{ head: 'Specimen', width: 70 }, { head: 'Dimensions and mass, mean ± standard uncertainty (number of readings)', width: '*' }, { head: 'Density', width: 110, right: true }],
        specimens.map((s) => [{ text: s.mark, style: 'number' }, { text: s.dimensions.map(dimensionText).join(';  '), fontSize: 8 }, { text: densityText(s), style: 'number', alignment: 'right' }]),
      ),
      { text: 'Density with its standard uncertainty.', style: 'note' },
    ],
  };
}

/** Engineering units of what a specimen is measured by: SI unit → unit on the certificate. */
const PRINTED_UNITS: Readonly<Record<string, string>> = { m: 'mm', kg: 'g' };

export function dimensionText(d: CertificateSpecimen['dimensions'][number]): string {
  const unit = PRINTED_UNITS[d.unit] ?? d.unit;
  return `${d.quantity} ${stated(fromSI(d.mean, unit), fromSI(d.standardUncertainty, unit), unit)} (${d.n})`;
}

function densityText(s: CertificateSpecimen): string {
  return s.density === null ? 'not determined' : stated(s.density.value, s.density.standardUncertainty, 'kg/m³');
}
