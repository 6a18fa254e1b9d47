import { run as runSchema, fit as fitSchema, type Fit, type Run } from '@strainwright/common/contract/run-answers';
import type { PulseSettings, Region } from '@strainwright/common/contract/runs';
import { Alert, Box, Button, Stack, Tab, Tabs, Typography } from '@mui/material';
import { useState } from 'react';
import { useParams } from 'react-router-dom';
import { call } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useMay } from '../../api/session';
import { AskDialog } from '../../components/dialogs';
import { FindingsList } from '../../components/findings-list';
import { Page, Section } from '../../components/page';
import { StateWord } from '../../components/state-word';
import { EmptyState, Loaded, ProblemAlert } from '../../components/states';
import { FitAnswer, FitEvidence, useFit } from '../../features/fits/fit-result';
import { PulseFitForm, StressStrainFitForm, type WindowStrain } from '../../features/fits/fit-settings';
import { LayoutSection } from '../../features/runs/layout-section';
import { RawPlots } from '../../features/runs/raw-plot';
import { RunFacts } from '../../features/runs/run-facts';

export function RunPage() {
  const { id = '' } = useParams();
  const query = useApi(runSchema, `/api/runs/${id}`, { every: (run) => (run?.fits.some((f) => f.state === 'queued' || f.state === 'running') === true ? 1000 : false) });
  return <Loaded query={query}>{(run) => <RunView run={run} />}</Loaded>;
}

function RunView({ run }: { run: Run }) {
  const mayVoid = useMay('runs.void') && run.state === 'recorded';
  const mayFit = useMay('fits.ask') && run.state === 'recorded';
  const [voiding, setVoiding] = useState(false);
  const voidRun = useAct((reason: string) => call(runSchema, 'POST', `/api/runs/${run.id}/void`, { reason, version: run.version }));
  return (
    <Page title={`Run ${run.number}, ${run.kind}`} state={<StateWord state={run.state} />}
      crumbs={[{ label: run.orderNumber, to: `/orders/${run.orderId}` }, { label: run.sampleMark }, { label: run.specimenMark, to: `/specimens/${run.specimenId}` }, { label: `Run ${run.number}` }]}
      action={mayVoid && <Button onClick={() => setVoiding(true)}>Void the run</Button>}>
      {voiding && <AskDialog title="Void the run" text="A void run stays in the record and gives no constants." label="Reason" confirm="Void the run" least={5} onClose={() => setVoiding(false)} onConfirm={(reason) => voidRun.mutateAsync(reason)} />}
      {run.state === 'void' && <Alert severity="warning">Void: {run.voidReason}</Alert>}
      {run.findings.length > 0 && <FindingsList findings={run.findings} title="Findings of the run" />}
      {/* A new fit is what one wants to see: the choice of a tab starts anew. */}
      <FitsSection key={run.fits.length} run={run} mayFit={mayFit} />
      {run.files.map((file) => <LayoutSection key={file.id + file.layoutOrigin} run={run} file={file} />)}
      <Section title="What was done"><RunFacts run={run} /></Section>
    </Page>
  );
}

function FitsSection({ run, mayFit }: { run: Run; mayFit: boolean }) {
  const latest = run.fits.at(-1);
  const adopted = run.fits.find((f) => f.adopted);
  const [chosen, setChosen] = useState<string | null>(null);
  const shown = run.fits.find((f) => f.id === chosen) ?? latest;
  return (
    <Section title={`Fits (${run.fits.length})${adopted === undefined ? '' : `, fit ${adopted.number} adopted`}`}>
      {shown === undefined ? <Workbench run={run} mayFit={mayFit} fitId={null} /> : <>
        <Tabs value={shown.id} onChange={(_e, id: string) => setChosen(id)} variant="scrollable" aria-label="Fits">{run.fits.map((f) => <Tab key={f.id} value={f.id} label={`Fit ${f.number} · ${f.state}${f.adopted ? ' · adopted' : ''}`} />)}</Tabs>
        <Workbench key={shown.id} run={run} mayFit={mayFit} fitId={shown.id} />
      </>}
    </Section>
  );
}

/** The raw plot with the settings beside it, then what the fit says. */
function Workbench({ run, mayFit, fitId }: { run: Run; mayFit: boolean; fitId: string | null }) {
  return fitId === null ? <Bench run={run} mayFit={mayFit} fit={null} /> : <WithFit run={run} mayFit={mayFit} fitId={fitId} />;
}

function WithFit({ run, mayFit, fitId }: { run: Run; mayFit: boolean; fitId: string }) {
  return <Loaded query={useFit(fitId)}>{(fit) => <Bench key={fit.state} run={run} mayFit={mayFit} fit={fit} />}</Loaded>;
}

function Bench({ run, mayFit, fit }: { run: Run; mayFit: boolean; fit: Fit | null }) {
  const mayAdopt = useMay('fits.adopt');
  const result = fit?.result ?? null;
  const detail = result?.detail.kind === 'stress-strain' ? result.detail : null;
  const [by, setBy] = useState<Region['by']>('automatic');
  const [window, setWindow] = useState<WindowStrain>({ from: detail?.window.strainFrom ?? 50e-6, to: detail?.window.strainTo ?? 500e-6 });
  const [arrivals, setArrivals] = useState<PulseSettings['arrivals']>([]);
  const adopt = useAct((id: string) => call(fitSchema, 'POST', `/api/fits/${id}/adopt`));
  const move = (from: number, to: number) => {
    setWindow({ from, to });
    if (by === 'automatic' || by === 'chord between stresses') setBy('by hand');
  };
  const arrivalSet = (arrival: PulseSettings['arrivals'][number]) => setArrivals([...arrivals.filter((a) => a.wave !== arrival.wave || a.trace !== arrival.trace), arrival]);
  return (
    <Stack spacing={3} sx={{ mt: 2 }}>
      <ProblemAlert error={adopt.error} />
      {fit !== null && <>
        {mayAdopt && fit.state === 'done' && !fit.adopted && run.state === 'recorded' && <Box><Button variant="contained" color="primary" onClick={() => adopt.mutate(fit.id)} disabled={adopt.isPending}>Adopt fit {fit.number}</Button></Box>}
        {fit.adopted && <Alert severity="success">Fit {fit.number} is adopted for this run.</Alert>}
        <FitAnswer fit={fit} />
      </>}
      <Box sx={{ display: 'grid', gap: 3, gridTemplateColumns: { xs: '1fr', md: mayFit ? 'minmax(0, 1fr) 280px' : '1fr' } }}>
        <Box sx={{ minWidth: 0 }}>
          {run.files.length === 0 ? <Typography color="textSecondary">Typed transit times; there is no raw record.</Typography> : <RawPlots run={run} result={result} window={run.kind === 'stress-strain' && (detail !== null || by !== 'automatic') ? { ...window, onChange: mayFit ? move : undefined } : undefined} onArrival={mayFit ? arrivalSet : undefined} />}
        </Box>
        {mayFit && <Box>{run.kind === 'pulse' ? <PulseFitForm run={run} arrivals={arrivals} setArrivals={setArrivals} /> : <StressStrainFitForm run={run} by={by} setBy={setBy} window={window} setWindow={setWindow} />}</Box>}
      </Box>
      {fit === null ? <EmptyState title="No fit yet">{mayFit ? 'Choose the settings and fit.' : 'An analyst asks for fits.'}</EmptyState> : <FitEvidence fit={fit} />}
    </Stack>
  );
}
