/** Settings of a fit beside the plot: the window of a stress–strain run, arrivals of a pulse run set by hand. */
import { fitAnswer, type Run } from '@strainwright/common/contract/run-answers';
import type { FitSettings, PulseSettings, Region } from '@strainwright/common/contract/runs';
import { Button, MenuItem, Stack, TextField, Typography } from '@mui/material';
import { useState } from 'react';
import { call } from '../../api/client';
import { useAct } from '../../api/queries';
import { NumberField } from '../../components/fields';
import { ProblemAlert } from '../../components/states';

const askFor = (runId: string) => (settings: FitSettings) => call(fitAnswer, 'POST', `/api/runs/${runId}/fits`, { settings });

export interface WindowStrain { from: number; to: number }
const WAYS: readonly Region['by'][] = ['automatic', 'chord between strains', 'chord between stresses', 'by hand'];

/** @param window axial strain, dimensionless; moved in the plot when the way is by hand or by strains */
export function StressStrainFitForm({ run, by, setBy, window, setWindow }: { run: Run; by: Region['by']; setBy: (by: Region['by']) => void; window: WindowStrain; setWindow: (window: WindowStrain) => void }) {
  const [stresses, setStresses] = useState<{ from: number | null; to: number | null }>({ from: null, to: null });
  const [reason, setReason] = useState('');
  const act = useAct(askFor(run.id));
  const region = (): Region | null => {
    if (by === 'automatic') return { by };
    if (by === 'chord between stresses') return stresses.from === null || stresses.to === null ? null : { by, from: stresses.from * 1e6, to: stresses.to * 1e6 };
    return by === 'by hand' ? (reason.trim() === '' ? null : { by, ...window, reason: reason.trim() }) : { by, ...window };
  };
  const chosen = region();
  return (
    <Stack component="form" aria-label="Ask for a fit" spacing={2} onSubmit={(e) => { e.preventDefault(); if (chosen !== null) act.mutate({ kind: 'stress-strain', region: chosen }); }}>
      <ProblemAlert error={act.error} />
      <TextField select label="Region" value={by} onChange={(e) => setBy(WAYS.find((w) => w === e.target.value) ?? 'automatic')}>{WAYS.map((w) => <MenuItem key={w} value={w}>{w}</MenuItem>)}</TextField>
      {(by === 'by hand' || by === 'chord between strains') && <Stack direction="row" spacing={1}>
        <NumberField label="From, µε" value={Number((window.from * 1e6).toPrecision(6))} onChange={(v) => v !== null && setWindow({ ...window, from: v / 1e6 })} />
        <NumberField label="To, µε" value={Number((window.to * 1e6).toPrecision(6))} onChange={(v) => v !== null && setWindow({ ...window, to: v / 1e6 })} />
      </Stack>}
      {by === 'chord between stresses' && <Stack direction="row" spacing={1}>
        <NumberField label="From, MPa" value={stresses.from} onChange={(from) => setStresses({ ...stresses, from })} />
        <NumberField label="To, MPa" value={stresses.to} onChange={(to) => setStresses({ ...stresses, to })} />
      </Stack>}
      {by === 'by hand' && <TextField label="Reason for the window" value={reason} onChange={(e) => setReason(e.target.value)} helperText="Kept with the settings; the reviewer reads it" required />}
      <Button type="submit" variant="contained" color="primary" disabled={act.isPending || chosen === null}>Fit</Button>
    </Stack>
  );
}

export function PulseFitForm({ run, arrivals, setArrivals }: { run: Run; arrivals: PulseSettings['arrivals']; setArrivals: (arrivals: PulseSettings['arrivals']) => void }) {
  const [picker, setPicker] = useState<PulseSettings['picker']>('AIC');
  const act = useAct(askFor(run.id));
  const complete = arrivals.every((a) => a.reason.trim() !== '');
  return (
    <Stack component="form" aria-label="Ask for a fit" spacing={2} onSubmit={(e) => { e.preventDefault(); act.mutate({ kind: 'pulse', picker, arrivals }); }}>
      <ProblemAlert error={act.error} />
      {run.files.length > 0 && <TextField select label="Arrivals picked by" value={picker} onChange={(e) => setPicker(e.target.value === 'threshold' ? 'threshold' : 'AIC')}><MenuItem value="AIC">AIC</MenuItem><MenuItem value="threshold">threshold</MenuItem></TextField>}
      {arrivals.map((a, i) => (
        <Stack key={`${a.wave}${a.trace}`} spacing={1}>
          <Typography>{a.wave}, {a.trace}: <span className="mono">{(a.time * 1e6).toFixed(3)} µs</span> <Button size="small" onClick={() => setArrivals(arrivals.filter((_, k) => k !== i))}>Leave to the picker</Button></Typography>
          <TextField label="Reason for setting it by hand" value={a.reason} onChange={(e) => setArrivals(arrivals.map((x, k) => (k === i ? { ...x, reason: e.target.value } : x)))} required />
        </Stack>
      ))}
      <Button type="submit" variant="contained" color="primary" disabled={act.isPending || !complete}>Fit</Button>
    </Stack>
  );
}
