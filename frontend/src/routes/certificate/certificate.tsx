import { certificate as schema, type Certificate } from '@strainwright/common/contract/certificates';
import { Alert, Box, Button, Link as MuiLink, Stack, Typography } from '@mui/material';
import { useState } from 'react';
import { Link, useNavigate, useParams } from 'react-router-dom';
import { call, download } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useMay, useUser } from '../../api/session';
import { ConstantsPlate } from '../../components/constants-plate';
import { AskDialog } from '../../components/dialogs';
import { showDay, showInstant } from '../../components/moments';
import { Facts, Page, Section } from '../../components/page';
import { StateWord } from '../../components/state-word';
import { Loaded, ProblemAlert } from '../../components/states';
import { PlainTable } from '../../components/table';

export function CertificatePage() {
  const { id = '' } = useParams();
  return <Loaded query={useApi(schema, `/api/certificates/${id}`)}>{(c) => <View certificate={c} />}</Loaded>;
}

type Asking = 'release' | 'amend' | 'withdraw';

function View({ certificate: c }: { certificate: Certificate }) {
  const may = { release: useMay('certificates.release'), amend: useMay('certificates.amend'), withdraw: useMay('certificates.withdraw') };
  const isCustomer = useUser().roles.includes('customer');
  const navigate = useNavigate();
  const [asking, setAsking] = useState<Asking | null>(null);
  const act = useAct(({ name, body }: { name: Asking; body: object }) => call(schema, 'POST', `/api/certificates/${c.id}/${name}`, body), (made, { name }) => { if (name === 'amend') void navigate(`/certificates/${made.id}`); });
  const fetchFile = useAct((format: 'pdf' | 'xlsx' | 'json') => download(`/api/certificates/${c.id}/certificate.${format}`, `${c.number || 'draft'}-${c.issue}.${format}`));
  const isDraft = c.state === 'draft';
  const s = c.snapshot;
  return (
    <Page title={`Certificate ${c.number === '' ? '(number at release)' : c.number}, issue ${c.issue}`} state={<StateWord state={c.state} />}
      crumbs={[{ label: 'Certificates', to: isCustomer ? '/my-certificates' : '/certificates' }, { label: c.orderNumber, to: isCustomer ? `/my-orders/${c.orderId}` : `/orders/${c.orderId}` }, { label: `issue ${c.issue}` }]}
      action={<>
        <Button onClick={() => fetchFile.mutate('pdf')}>{isDraft ? 'Preview PDF' : 'PDF'}</Button>
        {!isDraft && <Button onClick={() => fetchFile.mutate('xlsx')}>Spreadsheet</Button>}
        {!isDraft && <Button onClick={() => fetchFile.mutate('json')}>Data file</Button>}
        {c.state === 'released' && may.withdraw && <Button onClick={() => setAsking('withdraw')}>Withdraw</Button>}
        {c.state === 'released' && may.amend && <Button onClick={() => setAsking('amend')}>Amend</Button>}
        {isDraft && may.release && <Button variant="contained" color="primary" disabled={c.separation !== null} onClick={() => setAsking('release')}>Release</Button>}
      </>}>
      <ProblemAlert error={fetchFile.error} />
      {isDraft && <Alert severity="info">A preview: nothing leaves the laboratory until it is released.</Alert>}
      {isDraft && c.separation !== null && <Alert severity="warning">{c.separation}.</Alert>}
      {c.state === 'superseded' && <Alert severity="warning">A later issue takes the place of this one.</Alert>}
      {c.state === 'withdrawn' && <Alert severity="error">This certificate was withdrawn.</Alert>}
      {s.replaces !== null && <Alert severity="info">Replaces issue {s.replaces.issue} of {showDay(s.replaces.releasedAt)}: {s.replaces.reason}</Alert>}
      {asking === 'release' && <AskDialog title="Release the certificate" secret text="It goes out under the laboratory’s name, with your own as the one who released it. It cannot be edited afterwards, only amended or withdrawn." label="Your password" confirm="Release" onClose={() => setAsking(null)} onConfirm={(password) => act.mutateAsync({ name: 'release', body: { password, version: c.version } })} />}
      {asking === 'amend' && <AskDialog title="Amend the certificate" text={`A draft of issue ${c.issue + 1} is made; it names this issue and why.`} label="Reason" confirm="Draft the next issue" least={5} onClose={() => setAsking(null)} onConfirm={(reason) => act.mutateAsync({ name: 'amend', body: { reason } })} />}
      {asking === 'withdraw' && <AskDialog title="Withdraw the certificate" text="Whoever verifies it will read that it was withdrawn, and why." label="Reason" confirm="Withdraw" least={5} onClose={() => setAsking(null)} onConfirm={(reason) => act.mutateAsync({ name: 'withdraw', body: { reason, version: c.version } })} />}
      <Stack spacing={3}>{s.results.map((r) => (
        <Box key={`${r.specimenMark} ${r.basis}`}>
          <Typography variant="h2" sx={{ mb: 1 }}><span className="mono">{r.specimenMark}</span>, {r.basis}</Typography>
          <ConstantsPlate constants={r.result.constants} basis={r.basis} />
          <Typography variant="body2" color="textSecondary">{r.method.code} version {r.method.versionNumber}, {r.method.name}; {r.method.standard}. Reviewed by {r.reviewedBy}, {showInstant(r.reviewedAt)}.</Typography>
        </Box>
      ))}</Stack>
      {s.conformity.length > 0 && <Section title="Conformity"><Stack component="ul" sx={{ m: 0 }}>{s.conformity.map((x, i) => <li key={i}>{x.statement}</li>)}</Stack></Section>}
      <Section title="The certificate">
        <Facts facts={[
          ['Customer', `${s.customer.name}, ${s.customer.address}`], ['Order', <span key="o" className="mono">{s.order.number}</span>], ['Released', c.releasedBy === null ? 'not yet' : `${c.releasedBy}, ${showInstant(c.releasedAt)}`],
          ...(c.code === null ? [] : [['Verification', <span key="v"><MuiLink component={Link} to={`/verify/${c.number}?code=${c.code}&issue=${c.issue}`}>{c.number}</MuiLink> with code <span className="mono">{c.code}</span></span>] as const]),
          ...(c.sha256 === null ? [] : [['SHA-256 of the content', <span key="h" className="mono">{c.sha256}</span>] as const]), ...(c.signature === null ? [] : [['Ed25519 signature', <span key="g" className="mono">{c.signature}</span>] as const]),
        ]} />
      </Section>
      <Section title="Instruments"><PlainTable label="Instruments" rows={s.instruments} keyOf={(i) => i.name + i.serial} columns={[{ title: 'Instrument', cell: (i) => i.name }, { title: 'Serial', cell: (i) => i.serial }, { title: 'Calibration', cell: (i) => `${i.certificate}, due ${showDay(i.dueOn)}` }, { title: 'On the day', cell: (i) => (i.inCalibration ? 'in calibration' : 'out of calibration') }]} /></Section>
      <Section title="Statements"><Stack component="ul" sx={{ m: 0 }}>{s.statements.map((x) => <li key={x}>{x}</li>)}</Stack></Section>
      <Section title="Issues"><PlainTable label="Issues" rows={c.issues} keyOf={(i) => i.id} columns={[{ title: 'Issue', cell: (i) => <MuiLink component={Link} to={`/certificates/${i.id}`}>{i.issue}</MuiLink> }, { title: 'State', cell: (i) => <StateWord state={i.state} /> }, { title: 'Released', cell: (i) => showInstant(i.releasedAt) }, { title: 'Reason', cell: (i) => i.reason ?? '' }]} /></Section>
    </Page>
  );
}
