import { recordEntry, recordVerification, type RecordEntry } from '@strainwright/common/contract/record';
import { page } from '@strainwright/common/contract/wire';
import { Alert, Box, Button, MenuItem, Stack, TextField, Typography } from '@mui/material';
import { useMutation } from '@tanstack/react-query';
import { useSearchParams } from 'react-router-dom';
import { call } from '../../api/client';
import { useApi } from '../../api/queries';
import { showInstant } from '../../components/moments';
import { Page } from '../../components/page';
import { EmptyState, Loaded, ProblemAlert } from '../../components/states';
import { PlainTable } from '../../components/table';

const NOUNS = ['session', 'person', 'customer', 'laboratory', 'order', 'sample', 'specimen', 'reading', 'instrument', 'method', 'reference-piece', 'run', 'fit', 'determination', 'certificate'];
const PAGE_SIZE = 50;

/** Who did what to what and when: chained, so that a change after the fact shows. */
export function RecordPage() {
  const [params, setParams] = useSearchParams();
  const pageNumber = Number(params.get('page') ?? 0);
  const query = new URLSearchParams(params);
  query.set('pageSize', String(PAGE_SIZE));
  const entries = useApi(page(recordEntry), `/api/record?${query.toString()}`);
  const verify = useMutation({ mutationFn: () => call(recordVerification, 'GET', '/api/record/verify') });
  const set = (name: string, value: string) => setParams((before) => {
    const next = new URLSearchParams(before);
    if (value === '') next.delete(name);
    else next.set(name, value);
    if (name !== 'page') next.delete('page');
    return next;
  });
  return (
    <Page title="Record" action={<Button variant="contained" color="primary" onClick={() => verify.mutate()} disabled={verify.isPending}>Verify the chain</Button>}>
      <ProblemAlert error={verify.error} />
      {verify.data !== undefined && (verify.data.intact
        ? <Alert severity="success" role="status">The chain is intact: {verify.data.entries.toLocaleString('en-GB')} entries recomputed.</Alert>
        : <Alert severity="error" role="status">The chain is broken at entry {verify.data.firstBroken}: {verify.data.reason}</Alert>)}
      <Stack direction="row" spacing={2} sx={{ flexWrap: 'wrap', rowGap: 1, maxWidth: 720 }}>
        <TextField select label="About" value={params.get('noun') ?? ''} onChange={(e) => set('noun', e.target.value)} sx={{ width: 200 }}><MenuItem value="">Anything</MenuItem>{NOUNS.map((n) => <MenuItem key={n} value={n}>{n}</MenuItem>)}</TextField>
        <TextField label="Action" defaultValue={params.get('action') ?? ''} onBlur={(e) => set('action', e.target.value.trim())} placeholder="certificate.released" sx={{ width: 240 }} />
        <TextField label="Search" type="search" defaultValue={params.get('q') ?? ''} onBlur={(e) => set('q', e.target.value.trim())} sx={{ width: 220 }} />
      </Stack>
      <Loaded query={entries}>{({ items, total }) => items.length === 0 ? <EmptyState title="No entries">Nothing matches.</EmptyState> : (
        <Box>
          <PlainTable<RecordEntry> label="Entries" rows={items} keyOf={(e) => String(e.sequence)} columns={[
            { title: 'No.', cell: (e) => e.sequence, numeric: true }, { title: 'When', cell: (e) => showInstant(e.at) }, { title: 'Who', cell: (e) => e.personName ?? 'the program' }, { title: 'What', cell: (e) => <span className="mono">{e.action}</span> },
            { title: 'Details', cell: (e) => <details><summary>{e.noun}</summary><Box component="pre" className="mono" sx={{ fontSize: 11, whiteSpace: 'pre-wrap', overflowWrap: 'anywhere', m: 0 }}>{JSON.stringify(e.details, null, 1)}{'\n'}{e.nounId}</Box></details> },
            { title: 'Hash', cell: (e) => <span className="mono" title={e.hash}>{e.hash.slice(0, 12)}…</span> },
          ]} />
          <Stack direction="row" spacing={1} sx={{ mt: 1, alignItems: 'center' }}>
            <Button disabled={pageNumber === 0} onClick={() => set('page', pageNumber === 1 ? '' : String(pageNumber - 1))}>Newer</Button>
            <Button disabled={(pageNumber + 1) * PAGE_SIZE >= total} onClick={() => set('page', String(pageNumber + 1))}>Older</Button>
            <Typography color="textSecondary">{pageNumber * PAGE_SIZE + 1} to {Math.min((pageNumber + 1) * PAGE_SIZE, total)} of {total.toLocaleString('en-GB')}</Typography>
          </Stack>
        </Box>
      )}</Loaded>
    </Page>
  );
}
