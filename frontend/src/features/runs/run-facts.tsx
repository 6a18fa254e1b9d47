import type { Run } from '@strainwright/common/contract/run-answers';
import { showInstant } from '../../components/moments';
import { Facts } from '../../components/page';
import { StateWord } from '../../components/state-word';

/** What was done, by whom, with what. */
export function RunFacts({ run }: { run: Run }) {
  const { record, conditions } = run;
  const us = (values: readonly number[]) => values.map((t) => (t * 1e6).toFixed(3)).join(', ');
  const zero = (wave: 'P' | 'S') => {
    if (record.kind !== 'pulse') return '';
    const z = record[wave].zero;
    if (z === null) return 'none typed';
    return z.by === 'several lengths' ? `from ${z.points.length} lengths` : `${z.by}: ${us(z.readings)} µs`;
  };
  return (
    <Facts facts={[
      ['Method', `${run.method.code} version ${run.method.versionNumber}, ${run.method.name}; ${run.method.standard}`], ['Performed', `${run.performedBy}, ${showInstant(run.performedAt)}`],
      ['Conditions', [conditions.temperature === null ? null : `${conditions.temperature} °C`, conditions.humidity === null ? null : `${conditions.humidity} %`, conditions.notes || null].filter((x) => x !== null).join(', ') || '–'],
      ...run.instruments.map((i) => [`${i.role.charAt(0).toUpperCase()}${i.role.slice(1)}`, <span key={i.role}>{i.name} <StateWord state={i.calibrationState} /></span>] as const),
      ...(record.kind === 'pulse' ? [
        ['Frequency', record.frequency === null ? '–' : `${record.frequency / 1000} kHz`] as const,
        ...(['P', 'S'] as const).flatMap((w) => [[`Times ${w}, typed`, record[w].readings.length === 0 ? 'picked from waveforms' : `${us(record[w].readings)} µs`] as const, [`Zero time ${w}`, zero(w)] as const]),
      ] : [['Loading', record.compressive ? 'compression' : 'tension'] as const, ['Gauge lengths', `${record.axialGaugeLength === null ? '–' : `${record.axialGaugeLength * 1000} mm axial`}, ${record.transverseGaugeLength === null ? '–' : `${record.transverseGaugeLength * 1000} mm transverse`}`] as const]),
    ]} />
  );
}
