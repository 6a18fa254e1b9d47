import { order as orderSchema, sample, type Order } from '@strainwright/common/contract/orders';
import { certificate } from '@strainwright/common/contract/certificates';
import { page } from '@strainwright/common/contract/wire';
import { Button, Link as MuiLink, Stack, Typography } from '@mui/material';
import { useState } from 'react';
import { Link, useNavigate, useParams } from 'react-router-dom';
import { call } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useMay } from '../../api/session';
import { AskDialog } from '../../components/dialogs';
import { showDay, showInstant } from '../../components/moments';
import { Facts, Page, Section } from '../../components/page';
import { StateWord } from '../../components/state-word';
import { EmptyState, Loaded, ProblemAlert } from '../../components/states';
import { PlainTable } from '../../components/table';
import { SYMBOLS } from '../../components/constants-plate';
import { LimitText, Progress, SpecimenPlates } from '../../features/orders/progress';
import { SampleForm } from './sample-form';
import { SpecimensForm } from './specimens-form';

export function OrderPage() {
  const { id = '' } = useParams();
  const query = useApi(orderSchema, `/api/orders/${id}`);
  return <Loaded query={query}>{(order) => <OrderView order={order} />}</Loaded>;
}

function OrderView({ order }: { order: Order }) {
  const may = { open: useMay('orders.open'), close: useMay('orders.close'), cancel: useMay('orders.cancel'), draft: useMay('certificates.draft'), log: useMay('samples.log') };
  const navigate = useNavigate();
  const [cancelling, setCancelling] = useState(false);
  const step = useAct((name: 'open' | 'close') => call(orderSchema, 'POST', `/api/orders/${order.id}/${name}`, { version: order.version }));
  const accepted = order.specimens.flatMap((s) => s.determinations.filter((d) => d.state === 'accepted').map((d) => d.id));
  const draft = useAct(() => call(certificate, 'POST', `/api/orders/${order.id}/certificates`, { determinationIds: accepted }), (made) => void navigate(`/certificates/${made.id}`));
  const action = order.state === 'requested' && may.open ? <Button variant="contained" color="primary" onClick={() => step.mutate('open')} disabled={step.isPending}>Open the order</Button>
    : may.draft && accepted.length > 0 && ['open', 'reported'].includes(order.state) ? <Button variant="contained" color="primary" onClick={() => draft.mutate()} disabled={draft.isPending}>Draft a certificate</Button> : null;
  return (
    <Page title={`${order.number} ${order.title}`} crumbs={[{ label: 'Orders', to: '/orders' }, { label: order.number }]} state={<StateWord state={order.state} />}
      action={<>
        {may.close && order.state === 'reported' && <Button onClick={() => step.mutate('close')}>Close</Button>}
        {may.cancel && ['requested', 'open'].includes(order.state) && <Button onClick={() => setCancelling(true)}>Cancel the order</Button>}
        {action}
      </>}>
      <ProblemAlert error={step.error ?? draft.error} />
      {cancelling && <AskDialog title="Cancel the order" text="The reason is kept in the record." label="Reason" confirm="Cancel the order" least={5} onClose={() => setCancelling(false)} onConfirm={(reason) => call(orderSchema, 'POST', `/api/orders/${order.id}/cancel`, { reason }).then(() => step.reset())} />}
      <Facts facts={[
        ['Customer', order.customerName], ['Customer’s reference', order.customerReference || '–'], ['Material, as the customer says', order.materialDescription],
        ['Constants wanted', order.constantsWanted.map((c) => SYMBOLS[c]).join(', ')], ['Kinds of test', order.kindsOfRun.join(', ')], ['Due', showDay(order.dueOn)],
        ['Requested', `${order.requestedBy}, ${showInstant(order.createdAt)}`],
        ...(order.limits.length > 0 ? [['Limits', <Stack key="l">{order.limits.map((l, i) => <LimitText key={i} limit={l} />)}</Stack>] as const] : []),
        ...(order.notes === '' ? [] : [['Notes', order.notes] as const]),
      ]} />
      <Samples order={order} mayLog={may.log && order.state === 'open'} />
      <Section title="Progress">
        {order.specimens.length === 0 ? <EmptyState title="No specimens yet">Log a sample, then its specimens.</EmptyState> : (
          <Stack spacing={2}>{order.specimens.map((s) => (
            <div key={s.id}>
              <Stack direction="row" spacing={2} sx={{ alignItems: 'baseline', flexWrap: 'wrap' }}>
                <MuiLink component={Link} to={`/specimens/${s.id}`} className="mono">{s.mark}</MuiLink>
                <Progress specimen={s} reported={order.certificates.some((c) => c.state === 'released') && s.constants.length > 0} />
                {s.determinations.map((d) => <MuiLink key={d.id} component={Link} to={`/determinations/${d.id}`}>{d.basis}: {d.state}</MuiLink>)}
              </Stack>
              <SpecimenPlates specimen={s} />
            </div>
          ))}</Stack>
        )}
      </Section>
      <Section title="Certificates">
        {order.certificates.length === 0 ? <Typography color="textSecondary">None yet.</Typography> : (
          <PlainTable label="Certificates" rows={order.certificates} keyOf={(c) => c.id} columns={[
            { title: 'Number', cell: (c) => <MuiLink component={Link} to={`/certificates/${c.id}`} className="mono">{c.number}</MuiLink> },
            { title: 'Issue', cell: (c) => c.issue, numeric: true }, { title: 'State', cell: (c) => <StateWord state={c.state} /> }, { title: 'Released', cell: (c) => showInstant(c.releasedAt) }, { title: 'Reason', cell: (c) => c.reason ?? '' },
          ]} />
        )}
      </Section>
    </Page>
  );
}

function Samples({ order, mayLog }: { order: Order; mayLog: boolean }) {
  const query = useApi(page(sample), `/api/orders/${order.id}/samples?pageSize=200`);
  const [adding, setAdding] = useState(false);
  const [specimensOf, setSpecimensOf] = useState<string | null>(null);
  return (
    <Section title="Samples" action={mayLog && <Button onClick={() => setAdding(true)}>Log a sample</Button>}>
      {adding && <SampleForm orderId={order.id} onDone={(made) => { setAdding(false); setSpecimensOf(made.id); }} onCancel={() => setAdding(false)} />}
      <Loaded query={query}>{({ items }) => items.length === 0 ? <Typography color="textSecondary">None logged.</Typography> : (
        <PlainTable label="Samples" rows={items} keyOf={(s) => s.id} columns={[
          { title: 'Mark', cell: (s) => <span className="mono">{s.mark}</span> }, { title: 'Material', cell: (s) => `${s.material} (${s.materialClass})` }, { title: 'Received', cell: (s) => showDay(s.receivedOn) },
          { title: 'Condition', cell: (s) => s.condition }, { title: 'Specimens', cell: (s) => s.specimenCount, numeric: true },
          { title: '', cell: (s) => mayLog && <Button onClick={() => setSpecimensOf(s.id)} aria-label={`Log specimens of ${s.mark}`}>Log specimens</Button> },
        ]} />
      )}</Loaded>
      {specimensOf !== null && <SpecimensForm key={specimensOf} sampleId={specimensOf} mark={query.data?.items.find((s) => s.id === specimensOf)?.mark ?? ''} onDone={() => setSpecimensOf(null)} />}
    </Section>
  );
}
