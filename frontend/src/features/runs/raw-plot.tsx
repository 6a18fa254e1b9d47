/** The raw channels of a run, with the fitted line and the window over them. */
import { runChannels, type Run } from '@strainwright/common/contract/run-answers';
import type { PulseSettings } from '@strainwright/common/contract/runs';
import type { FitResult } from '@strainwright/common/contract/result';
import { Alert, Button, MenuItem, Stack, TextField } from '@mui/material';
import { useMemo, useState } from 'react';
import type { z } from 'zod';
import { useApi } from '../../api/queries';
import { Plot, type PlotSeries } from '../../components/plot';
import { Loaded } from '../../components/states';

type FileChannels = z.infer<typeof runChannels>['files'][number];

export function useChannels(run: Run) {
  return useApi(runChannels, `/api/runs/${run.id}/channels?points=4000`, { enabled: run.files.length > 0 });
}

interface Props {
  run: Run;
  result: FitResult | null;
  window?: { from: number; to: number; onChange?: (from: number, to: number) => void };
  onArrival?: (arrival: PulseSettings['arrivals'][number]) => void;
}

export function RawPlots({ run, result, window, onArrival }: Props) {
  const channels = useChannels(run);
  if (run.files.length === 0) return null;
  return (
    <Loaded query={channels}>
      {({ files }) => <Stack spacing={2}>{files.map((file) => (
        <div key={file.fileId}>
          {file.problemCount > 0 && <Alert severity="warning">{file.problemCount} rows could not be read; row {file.problems[0]?.row}: {file.problems[0]?.message}.</Alert>}
          {run.kind === 'pulse' ? <Waveform file={file} result={result} onArrival={onArrival} /> : <StressStrainPlot file={file} result={result} window={window} gauge={run.record.kind === 'stress-strain' ? run.record.axialGaugeLength : null} />}
        </div>
      ))}</Stack>}
    </Loaded>
  );
}

const valuesOf = (file: FileChannels, channel: string) => file.series.find((s) => s.channel === channel);

/** Stress (or force) against axial strain in the order of the record. */
function StressStrainPlot({ file, result, window, gauge }: { file: FileChannels; result: FitResult | null; window: Props['window']; gauge: number | null }) {
  const fitted = result?.detail.kind === 'stress-strain' ? result.detail : null;
  const made = useMemo(() => {
    if (fitted !== null) {
      const curve = [...fitted.curve].sort((a, b) => a[0] - b[0]);
      const x = curve.map(([s]) => s * 1e6);
      const inWindow = (s: number) => s >= fitted.window.strainFrom && s <= fitted.window.strainTo;
      const series: PlotSeries[] = [
        { name: 'Stress', values: curve.map(([, y]) => y / 1e6), role: 'data' },
        { name: 'Fitted line', values: curve.map(([s]) => (inWindow(s) ? (fitted.axial.intercept + fitted.axial.slope * s) / 1e6 : null)), role: 'fit' },
      ];
      return { x, series, xLabel: 'Axial strain, µε', yLabel: 'Stress, MPa' };
    }
    const load = valuesOf(file, 'stress') ?? valuesOf(file, 'force');
    const axial = valuesOf(file, 'axial1');
    if (load === undefined || axial === undefined) return null;
    const scale = axial.unit === 'm' ? (gauge === null ? 1e3 : 1e6 / gauge) : 1e6;
    const rows = axial.values.map((s, i) => [s, load.values[i]] as const).filter((r): r is readonly [number, number] => r[0] !== null && r[1] !== null && r[1] !== undefined).sort((a, b) => a[0] - b[0]);
    const isStress = load.channel === 'stress';
    return { x: rows.map(([s]) => s * scale), series: [{ name: load.name, values: rows.map(([, y]) => y / (isStress ? 1e6 : 1e3)), role: 'data' as const }], xLabel: axial.unit === 'm' && gauge === null ? 'Extension, mm' : 'Axial strain, µε', yLabel: isStress ? 'Stress, MPa' : 'Force, kN' };
  }, [file, fitted, gauge]);
  if (made === null) return <Alert severity="info">The layout names no force or stress with an axial channel: nothing to draw yet.</Alert>;
  const shown = window === undefined ? undefined : { from: window.from * 1e6, to: window.to * 1e6, onChange: window.onChange === undefined ? undefined : (a: number, b: number) => window.onChange?.(a / 1e6, b / 1e6) };
  const top = made.series[0]?.values.reduce<number>((m, v) => Math.max(m, v ?? m), -Infinity) ?? 0;
  return <Plot title="Raw record" x={made.x} series={made.series} xLabel={made.xLabel} yLabel={made.yLabel} window={shown} points summary={`${file.rowCount.toLocaleString('en-GB')} rows; ${made.yLabel} up to ${top.toPrecision(4)}`} />;
}

function Waveform({ file, result, onArrival }: { file: FileChannels; result: FitResult | null; onArrival: Props['onArrival'] }) {
  const detail = result?.detail.kind === 'pulse' ? result.detail : null;
  const wave = file.purpose.endsWith('P') ? 'P' : 'S';
  const clock = valuesOf(file, 'time');
  const traces = file.series.filter((s) => s.channel === 'trace');
  const [chosen, setChosen] = useState(0);
  const x = useMemo(() => (clock?.values ?? []).map((t) => (t ?? 0) * 1e6), [clock]);
  const trace = traces[chosen];
  if (trace === undefined) return <Alert severity="info">The layout names no trace in {file.purpose}.</Alert>;
  const isMeasured = file.purpose.startsWith('waveform');
  const picked = isMeasured ? detail?.picks.find((p) => p.wave === wave && p.trace === trace.name)?.time : undefined;
  return (
    <div>
      <TextField select label={`Trace of ${file.purpose}`} value={chosen} onChange={(e) => setChosen(Number(e.target.value))} sx={{ maxWidth: 280, mb: 1 }}>
        {traces.map((t, i) => <MenuItem key={t.name} value={i}>{t.name} ({i + 1} of {traces.length})</MenuItem>)}
      </TextField>
      <OneTrace key={trace.name} title={`${file.purpose}, ${trace.name}`} x={x} trace={trace} picked={picked} onSet={onArrival === undefined || !isMeasured ? undefined : (time) => onArrival({ wave, trace: trace.name, time, reason: '' })} rows={file.rowCount} />
    </div>
  );
}

function OneTrace({ title, x, trace, picked, onSet, rows }: { title: string; x: readonly number[]; trace: FileChannels['series'][number]; picked: number | undefined; onSet?: (time: number) => void; rows: number }) {
  const [moved, setMoved] = useState<number | null>(null);
  const at = moved ?? (picked === undefined ? null : picked * 1e6);
  const series = useMemo<PlotSeries[]>(() => [{ name: trace.name, values: trace.values, role: 'data' }], [trace]);
  const window = at === null ? undefined : { from: at, to: at, onChange: onSet === undefined ? undefined : (from: number, to: number) => setMoved(from !== at ? from : to) };
  return (
    <div>
      <Plot title={title} x={x} series={series} xLabel="Time, µs" yLabel={`Amplitude${trace.unit === '' ? '' : `, ${trace.unit}`}`} window={window} height={220} summary={`${rows} samples${at === null ? '' : `; arrival at ${at.toFixed(3)} µs`}`} />
      {moved !== null && onSet !== undefined && <Button onClick={() => onSet(moved / 1e6)}>Use {moved.toFixed(3)} µs in the next fit</Button>}
    </div>
  );
}
