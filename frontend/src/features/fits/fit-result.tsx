/** One fit: its progress while it runs, then the plate, the evidence, findings and budget. */
import { fit as fitSchema, type Fit } from '@strainwright/common/contract/run-answers';
import type { PulseDetail, StressStrainDetail } from '@strainwright/common/contract/result';
import { Alert, Box, LinearProgress, Stack, Typography } from '@mui/material';
import { useMemo } from 'react';
import { useApi } from '../../api/queries';
import { ConstantsPlate } from '../../components/constants-plate';
import { FindingsList } from '../../components/findings-list';
import { MeasuredQuantity, Numeral } from '../../components/measured';
import { Facts, Section } from '../../components/page';
import { Plot } from '../../components/plot';
import { PlainTable } from '../../components/table';
import { BudgetTable } from './budget-table';

const isOpen = (fit: Fit | undefined) => fit === undefined || fit.state === 'queued' || fit.state === 'running';

/** The fit, asked for again while it is not ended. */
export function useFit(id: string) {
  return useApi(fitSchema, `/api/fits/${id}`, { every: (fit) => (isOpen(fit) ? 700 : false) });
}

/** What a page opens on: progress, the constants with what is wrong, or why there are none. */
export function FitAnswer({ fit }: { fit: Fit }) {
  if (isOpen(fit)) {
    return (
      <Box role="status">
        <Typography>Fit {fit.number} is {fit.state}. You can leave this page; it goes on.</Typography>
        <LinearProgress variant={fit.state === 'running' ? 'determinate' : 'indeterminate'} value={fit.progress * 100} aria-label={`Progress of fit ${fit.number}`} />
      </Box>
    );
  }
  if (fit.result === null) {
    return <Stack spacing={2}><Alert severity="error"><strong>Fit {fit.number} gave no result.</strong> {fit.error}</Alert>{fit.findingsWhenRefused.length > 0 && <FindingsList findings={fit.findingsWhenRefused} />}</Stack>;
  }
  return (
    <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 3, alignItems: 'flex-start' }}>
      <Box sx={{ flex: '1 1 360px', maxWidth: 560 }}><ConstantsPlate constants={fit.result.constants} basis={fit.result.basis} /></Box>
      <Box sx={{ flex: '1 1 320px', minWidth: 0 }}><FindingsList findings={fit.result.findings} /></Box>
    </Box>
  );
}

/** How the constants came about. */
export function FitEvidence({ fit }: { fit: Fit }) {
  if (fit.result === null) return null;
  const { detail } = fit.result;
  return (
    <Stack spacing={3}>
      {detail.kind === 'pulse' ? <PulseEvidence detail={detail} /> : <StressStrainEvidence detail={detail} />}
      <BudgetTable result={fit.result} />
      <Typography variant="caption" color="textSecondary" sx={{ overflowWrap: 'anywhere' }}>Software {fit.softwareVersion}; SHA-256 of all inputs <span className="mono">{fit.inputsSha256}</span></Typography>
    </Stack>
  );
}

function PulseEvidence({ detail }: { detail: PulseDetail }) {
  return (
    <Section title="Velocities">
      <Facts facts={[
        ['Length', <MeasuredQuantity key="l" quantity={detail.length} scale={1e-3} unit="mm" />], ['Density', <MeasuredQuantity key="d" quantity={detail.density} />],
        ...(['P', 'S'] as const).flatMap((w) => [
          [`Transit time ${w}`, <MeasuredQuantity key={`t${w}`} quantity={detail[w].transitTime} scale={1e-6} unit="µs" />] as const,
          [`Zero time ${w}`, <MeasuredQuantity key={`z${w}`} quantity={detail[w].zeroTime} scale={1e-6} unit="µs" />] as const,
          [`Velocity ${w}`, <MeasuredQuantity key={`v${w}`} quantity={detail[w].velocity} />] as const,
        ]),
        ['v_P/v_S', <Numeral key="r" value={detail.velocityRatio} />],
        ...(detail.wavelength === null ? [] : [['Wavelength P, S', <span key="w"><Numeral value={detail.wavelength.P * 1000} digits={3} /> mm, <Numeral value={detail.wavelength.S * 1000} digits={3} /> mm</span>] as const]),
      ]} />
      {detail.picks.length > 0 && <PlainTable label="Arrivals" rows={detail.picks} keyOf={(p) => `${p.wave} ${p.trace}`} columns={[
        { title: 'Wave', cell: (p) => p.wave }, { title: 'Trace', cell: (p) => p.trace }, { title: 'Arrival, µs', cell: (p) => <Numeral value={p.time * 1e6} digits={6} />, numeric: true },
        { title: 'u, µs', cell: (p) => <Numeral value={p.standardUncertainty * 1e6} digits={2} />, numeric: true }, { title: 'Signal to noise', cell: (p) => <Numeral value={p.signalToNoise} digits={3} />, numeric: true },
        { title: 'Confidence', cell: (p) => `${(p.confidence * 100).toFixed(0)} %`, numeric: true }, { title: 'Picked', cell: (p) => p.picker },
      ]} />}
    </Section>
  );
}

export function StressStrainEvidence({ detail }: { detail: StressStrainDetail }) {
  const sorted = useMemo(() => [...detail.residuals].sort((a, b) => a[0] - b[0]), [detail]);
  const x = useMemo(() => sorted.map(([s]) => s * 1e6), [sorted]);
  const series = useMemo(() => [{ name: 'Residual', values: sorted.map(([, r]) => r / 1e6), role: 'data' as const }], [sorted]);
  const map = useMemo(() => [...detail.alternatives].sort((a, b) => a.strainFrom + a.strainTo - b.strainFrom - b.strainTo), [detail]);
  const mapX = useMemo(() => map.map((a) => ((a.strainFrom + a.strainTo) / 2) * 1e6), [map]);
  const mapSeries = useMemo(() => [{ name: 'E', values: map.map((a) => a.E / 1e9), role: 'data' as const }], [map]);
  return (
    <Section title="Line and residuals">
      <Facts facts={[
        ['Region', `${detail.regionKind}: ${(detail.window.strainFrom * 1e6).toFixed(1)} to ${(detail.window.strainTo * 1e6).toFixed(1)} µε, ${(detail.window.stressFrom / 1e6).toFixed(2)} to ${(detail.window.stressTo / 1e6).toFixed(2)} MPa`],
        ['Points', String(detail.axial.points)], ['r', <Numeral key="r" value={detail.axial.correlationCoefficient} digits={8} />], ['Residual s', <span key="s"><Numeral value={detail.axial.residualStandardDeviation / 1e6} digits={3} /> MPa</span>],
        ['Lag-1 of residuals', <Numeral key="lag" value={detail.axial.lagOne} digits={2} />], ['Toe strain', <span key="t"><Numeral value={detail.toeStrain * 1e6} digits={3} /> µε</span>],
        ...(detail.bending === null ? [] : [['Bending', <span key="b"><Numeral value={detail.bending} digits={2} /> %</span>] as const]),
        ...(detail.transverse === null ? [] : [['Transverse r', <Numeral key="tr" value={detail.transverse.correlationCoefficient} digits={7} />] as const]),
      ]} />
      <Plot title="Residuals" x={x} series={series} xLabel="Axial strain, µε" yLabel="Residual, MPa" summary={`Residual standard deviation ${(detail.axial.residualStandardDeviation / 1e6).toPrecision(3)} MPa over ${detail.axial.points} points`} height={180} points />
      {map.length > 1 && <Plot title="E over windows" x={mapX} series={mapSeries} xLabel="Middle of the window, µε" yLabel="E, GPa" summary={`E of ${map.length} other windows, ${Math.min(...map.map((a) => a.E / 1e9)).toPrecision(4)} to ${Math.max(...map.map((a) => a.E / 1e9)).toPrecision(4)} GPa`} height={180} points />}
    </Section>
  );
}
