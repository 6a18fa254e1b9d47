import { determination as schema, reviewFile, type ReviewFile } from '@strainwright/common/contract/determinations';
import { Alert, Box, Button, Link as MuiLink, Stack, TextField } from '@mui/material';
import { useState } from 'react';
import { Link, useParams } from 'react-router-dom';
import { call } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useMay } from '../../api/session';
import { ConstantsPlate } from '../../components/constants-plate';
import { AskDialog } from '../../components/dialogs';
import { FindingsList } from '../../components/findings-list';
import { showDay } from '../../components/moments';
import { Page, Section } from '../../components/page';
import { StateWord } from '../../components/state-word';
import { Loaded, ProblemAlert } from '../../components/states';
import { PlainTable } from '../../components/table';
import { AdmissibleRegion } from '../../features/determinations/admissible';
import { AgreementTable } from '../../features/determinations/agreement-table';
import { ReviewHistory } from '../../features/determinations/review-history';
import { BudgetTable } from '../../features/fits/budget-table';
import { StressStrainEvidence } from '../../features/fits/fit-result';
import { RawPlots } from '../../features/runs/raw-plot';
import { RunFacts } from '../../features/runs/run-facts';
import { ReadingsTable, StatisticsTable } from '../../features/specimens/readings-table';

/** Everything the reviewer needs on one page; accept, or return with a reason. */
export function Review() {
  const { id = '' } = useParams();
  return <Loaded query={useApi(reviewFile, `/api/determinations/${id}/review`)}>{(file) => <View file={file} />}</Loaded>;
}

function View({ file }: { file: ReviewFile }) {
  const { determination: d, runs, fits } = file;
  const may = useMay('determinations.review') && d.state === 'submitted';
  const [returning, setReturning] = useState(false);
  const [comment, setComment] = useState('');
  const accept = useAct(() => call(schema, 'POST', `/api/determinations/${d.id}/accept`, { comment, version: d.version }));
  const give = useAct((reason: string) => call(schema, 'POST', `/api/determinations/${d.id}/return`, { reason, version: d.version }));
  const allowed = may && d.separation === null;
  return (
    <Page title={`Review of ${d.specimenMark}, ${d.basis}`} state={<StateWord state={d.state} />} crumbs={[{ label: d.orderNumber, to: `/orders/${d.orderId}` }, { label: d.specimenMark, to: `/specimens/${d.specimenId}` }, { label: 'Review' }]}
      action={allowed && <><Button onClick={() => setReturning(true)}>Return with a reason</Button><Button variant="contained" color="primary" onClick={() => accept.mutate()} disabled={accept.isPending}>Accept</Button></>}>
      <ProblemAlert error={accept.error} />
      {may && d.separation !== null && <Alert severity="warning">{d.separation}.</Alert>}
      {returning && <AskDialog title="Return the determination" text="The reason is kept, and the analyst sees it." label="Reason" confirm="Return it" least={5} onClose={() => setReturning(false)} onConfirm={(reason) => give.mutateAsync(reason)} />}
      {file.changedSinceReturn.length > 0 && <Alert severity="info"><strong>Since the last return:</strong> {file.changedSinceReturn.join('; ')}</Alert>}
      <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 3, alignItems: 'flex-start' }}>
        <Box sx={{ flex: '1 1 360px', maxWidth: 560 }}><ConstantsPlate constants={d.result.constants} basis={d.basis} agreements={d.agreements} /><AdmissibleRegion constants={d.result.constants} /></Box>
        <Box sx={{ flex: '1 1 360px', minWidth: 0 }}>
          <FindingsList findings={d.result.findings} beside={(f) => { const a = d.acknowledgements.find((x) => x.code === f.code && x.subject === f.subject); return a === undefined ? null : <em>Passed because: {a.reason}</em>; }} />
          {d.comment !== '' && <Alert severity="info" sx={{ mt: 2 }}>Comment of {d.submittedBy}: {d.comment}</Alert>}
        </Box>
      </Box>
      {allowed && <TextField label="Comment with the acceptance" value={comment} onChange={(e) => setComment(e.target.value)} sx={{ maxWidth: 720 }} />}
      {fits.map((fit) => {
        const run = runs.find((r) => r.id === fit.runId);
        if (run === undefined) return null;
        const byHand = fit.settings.kind === 'stress-strain' ? fit.settings.region.by === 'by hand' : fit.settings.arrivals.length > 0;
        return (
          <Section key={fit.id} title={`Run ${run.number}, ${run.kind}, fit ${fit.number}`} action={<MuiLink component={Link} to={`/runs/${run.id}`}>Open the run</MuiLink>}>
            <Stack spacing={2}>
              {byHand && <Alert severity="info"><strong>Changed by hand.</strong> {fit.settings.kind === 'stress-strain' && fit.settings.region.by === 'by hand' ? fit.settings.region.reason : fit.settings.kind === 'pulse' ? fit.settings.arrivals.map((a) => `${a.wave} ${a.trace}: ${a.reason}`).join('; ') : ''}</Alert>}
              <RawPlots run={run} result={fit.result} window={fit.result?.detail.kind === 'stress-strain' ? { from: fit.result.detail.window.strainFrom, to: fit.result.detail.window.strainTo } : undefined} />
              {fit.result?.detail.kind === 'stress-strain' && <StressStrainEvidence detail={fit.result.detail} />}
              <RunFacts run={run} />
            </Stack>
          </Section>
        );
      })}
      <AgreementTable determination={d} />
      <Section title="Readings"><Stack spacing={2}><StatisticsTable measurement={file.measurement} /><ReadingsTable readings={file.readings} mayCorrect={false} /></Stack></Section>
      <Section title="Instruments">
        <PlainTable label="Instruments" rows={file.instruments} keyOf={(i) => i.id} columns={[{ title: 'Instrument', cell: (i) => i.name }, { title: 'Serial', cell: (i) => <span className="mono">{i.serial}</span> }, { title: 'Now', cell: (i) => <StateWord state={i.calibrationState} /> }, { title: 'Due', cell: (i) => showDay(i.dueOn) }, { title: 'Calibrations', cell: (i) => i.calibrations.map((c) => `${c.certificate}, ${showDay(c.calibratedOn)} to ${showDay(c.dueOn)}`).join('; ') }]} />
      </Section>
      <BudgetTable result={d.result} />
      <Section title="Earlier decisions"><ReviewHistory determination={d} /></Section>
    </Page>
  );
}
