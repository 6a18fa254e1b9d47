import { determination as schema, type Determination } from '@strainwright/common/contract/determinations';
import { Alert, Box, Button, Link as MuiLink, Stack, TextField } from '@mui/material';
import { useState } from 'react';
import { Link, useNavigate, useParams } from 'react-router-dom';
import { call } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useMay } from '../../api/session';
import { ConstantsPlate } from '../../components/constants-plate';
import { FindingsList } from '../../components/findings-list';
import { showInstant } from '../../components/moments';
import { Facts, Page, Section } from '../../components/page';
import { StateWord } from '../../components/state-word';
import { Loaded, ProblemAlert } from '../../components/states';
import { useDraft } from '../../components/use-draft';
import { AdmissibleRegion } from '../../features/determinations/admissible';
import { AgreementTable } from '../../features/determinations/agreement-table';
import { ReviewHistory } from '../../features/determinations/review-history';
import { BudgetTable } from '../../features/fits/budget-table';
import { z } from 'zod';

export function DeterminationPage() {
  const { id = '' } = useParams();
  return <Loaded query={useApi(schema, `/api/determinations/${id}`)}>{(d) => <View determination={d} />}</Loaded>;
}

const reasonsDraft = z.record(z.string(), z.string());
const EMPTY: Record<string, string> = {};
const keyOf = (f: { code: string; subject: string }) => `${f.code} ${f.subject}`;

function View({ determination: d }: { determination: Determination }) {
  const maySubmit = useMay('determinations.submit') && d.state === 'draft';
  const mayCompose = useMay('determinations.compose') && (d.state === 'returned' || d.state === 'draft');
  const mayReview = useMay('determinations.review') && d.state === 'submitted';
  const navigate = useNavigate();
  const reasons = useDraft<Record<string, string>>(`submit.${d.id}`, EMPTY, (v) => { const p = reasonsDraft.safeParse(v); return p.success ? p.data : null; });
  const [comment, setComment] = useState('');
  const { findings } = d.result;
  const warns = findings.filter((f) => f.severity === 'warn');
  const stops = findings.some((f) => f.severity === 'stop');
  const answered = warns.every((f) => (reasons.value[keyOf(f)] ?? '').trim().length >= 5);
  const submit = useAct(() => call(schema, 'POST', `/api/determinations/${d.id}/submit`, { comment, version: d.version, acknowledgements: [...new Map(warns.map((f) => [keyOf(f), { code: f.code, subject: f.subject, reason: (reasons.value[keyOf(f)] ?? '').trim() }])).values()] }), () => reasons.clear());
  const compose = useAct(() => call(schema, 'POST', `/api/specimens/${d.specimenId}/determinations`, { basis: d.basis }), (made) => void navigate(`/determinations/${made.id}`));
  return (
    <Page title={`${d.basis === 'static' ? 'Static' : 'Dynamic'} determination ${d.number} of ${d.specimenMark}`} state={<StateWord state={d.state} />}
      crumbs={[{ label: d.orderNumber, to: `/orders/${d.orderId}` }, { label: d.specimenMark, to: `/specimens/${d.specimenId}` }, { label: `${d.basis} determination ${d.number}` }]}
      action={<>
        {mayCompose && <Button onClick={() => compose.mutate()} disabled={compose.isPending}>Compose again</Button>}
        {maySubmit && <Button variant="contained" color="primary" onClick={() => submit.mutate()} disabled={submit.isPending || stops || !answered}>Submit for review</Button>}
        {mayReview && <Button component={Link} to={`/reviews/${d.id}`} variant="contained" color="primary">Review</Button>}
      </>}>
      <ProblemAlert error={submit.error ?? compose.error} />
      {maySubmit && stops && <Alert severity="error">A finding stops the submission. Put it right, fit and compose again.</Alert>}
      {maySubmit && !stops && !answered && <Alert severity="warning">Each warning needs a reason of at least five characters before it can be submitted.</Alert>}
      <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 3 }}>
        <Box sx={{ flex: '1 1 360px', maxWidth: 560 }}><ConstantsPlate constants={d.result.constants} basis={d.basis} agreements={d.agreements} /></Box>
        {d.otherBasis !== null && <Box sx={{ flex: '1 1 320px', maxWidth: 560 }}><MuiLink component={Link} to={`/determinations/${d.otherBasis.id}`}>{d.otherBasis.basis}, for comparison</MuiLink> <StateWord state={d.otherBasis.state} /><ConstantsPlate constants={d.otherBasis.result.constants} basis={d.otherBasis.basis} /></Box>}
      </Box>
      <AdmissibleRegion constants={d.result.constants} />
      <FindingsList findings={findings} beside={(f) => {
        if (f.severity !== 'warn') return null;
        const given = d.acknowledgements.find((a) => keyOf(a) === keyOf(f));
        if (!maySubmit) return given === undefined ? null : <em>Reason: {given.reason}</em>;
        return <TextField label={`Reason to pass: ${f.subject}`} value={reasons.value[keyOf(f)] ?? ''} onChange={(e) => reasons.setValue({ ...reasons.value, [keyOf(f)]: e.target.value })} sx={{ mt: 1, maxWidth: 560 }} slotProps={{ htmlInput: { 'data-reason': true } }} />;
      }} />
      {maySubmit && <TextField label="Comment to the reviewer" value={comment} onChange={(e) => setComment(e.target.value)} multiline minRows={2} sx={{ maxWidth: 720 }} />}
      {!maySubmit && d.comment !== '' && <Alert severity="info">Comment of the analyst: {d.comment}</Alert>}
      <AgreementTable determination={d} />
      <BudgetTable result={d.result} />
      <Section title="History">
        <Stack spacing={2}><Facts facts={[['Composed by', d.composedBy], ['Submitted', d.submittedBy === null ? '–' : `${d.submittedBy}, ${showInstant(d.submittedAt)}`]]} /><ReviewHistory determination={d} /></Stack>
      </Section>
    </Page>
  );
}
