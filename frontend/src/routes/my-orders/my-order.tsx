import { order as orderSchema } from '@strainwright/common/contract/orders';
import { Button, Link as MuiLink, Stack } from '@mui/material';
import { Link, useParams } from 'react-router-dom';
import { download } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { SYMBOLS } from '../../components/constants-plate';
import { showDay, showInstant } from '../../components/moments';
import { Facts, Page, Section } from '../../components/page';
import { StateWord } from '../../components/state-word';
import { EmptyState, Loaded, ProblemAlert } from '../../components/states';
import { PlainTable } from '../../components/table';
import { LimitText, Progress, SpecimenPlates } from '../../features/orders/progress';

/** What a customer sees of an order: progress, certificates, and the constants once they are released. */
export function MyOrder() {
  const { id = '' } = useParams();
  const query = useApi(orderSchema, `/api/orders/${id}`);
  const fetchFile = useAct(({ certificate, format }: { certificate: { id: string; number: string; issue: number }; format: 'pdf' | 'xlsx' }) => download(`/api/certificates/${certificate.id}/certificate.${format}`, `${certificate.number}-${certificate.issue}.${format}`));
  return (
    <Loaded query={query}>
      {(order) => (
        <Page title={`${order.number} ${order.title}`} state={<StateWord state={order.state} />} crumbs={[{ label: 'My orders', to: '/my-orders' }, { label: order.number }]}>
          <ProblemAlert error={fetchFile.error} />
          <Section title="Certificates">
            {order.certificates.length === 0 ? <EmptyState title="None yet">You find it here when it is released.</EmptyState> : (
              <PlainTable label="Certificates" rows={order.certificates} keyOf={(c) => c.id} columns={[
                { title: 'Number', cell: (c) => <MuiLink component={Link} to={`/certificates/${c.id}`} className="mono">{c.number}</MuiLink> }, { title: 'Issue', cell: (c) => c.issue, numeric: true }, { title: 'State', cell: (c) => <StateWord state={c.state} /> },
                { title: 'Released', cell: (c) => showInstant(c.releasedAt) }, { title: 'Why a new issue', cell: (c) => c.reason ?? '' },
                { title: 'Download', cell: (c) => <Stack direction="row" spacing={1}><Button size="small" onClick={() => fetchFile.mutate({ certificate: c, format: 'pdf' })}>PDF</Button><Button size="small" onClick={() => fetchFile.mutate({ certificate: c, format: 'xlsx' })}>Spreadsheet</Button></Stack> },
              ]} />
            )}
          </Section>
          <Section title="Progress">
            {order.specimens.length === 0 ? <EmptyState title="Nothing logged yet">Specimens appear when the laboratory has received them.</EmptyState> : <Stack spacing={2}>{order.specimens.map((s) => <div key={s.id}><span className="mono">{s.mark}</span><Progress specimen={s} reported={s.constants.length > 0} /><SpecimenPlates specimen={s} /></div>)}</Stack>}
          </Section>
          <Section title="What you asked for">
            <Facts facts={[['Material', order.materialDescription], ['Your reference', order.customerReference || '–'], ['Constants', order.constantsWanted.map((c) => SYMBOLS[c]).join(', ')], ['Tests', order.kindsOfRun.join(', ')], ['Needed by', showDay(order.dueOn)], ...(order.limits.length > 0 ? [['Limits', <Stack key="l">{order.limits.map((l, i) => <LimitText key={i} limit={l} />)}</Stack>] as const] : [])]} />
          </Section>
        </Page>
      )}
    </Loaded>
  );
}
