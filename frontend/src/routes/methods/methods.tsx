import { zodResolver } from '@hookform/resolvers/zod';
import { method as schema, newMethod, type Method } from '@strainwright/common/contract/instruments';
import { RUN_KINDS } from '@strainwright/common/contract/vocabulary';
import { page } from '@strainwright/common/contract/wire';
import { Button, Stack, Typography } from '@mui/material';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { call } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useMay } from '../../api/session';
import { Caution } from '../../components/caution';
import { FormSelect, FormText, showAtFields } from '../../components/fields';
import { showInstant } from '../../components/moments';
import { Page, Section } from '../../components/page';
import { EmptyState, Loaded, ProblemAlert } from '../../components/states';

export function Methods() {
  const query = useApi(page(schema), '/api/methods?pageSize=200');
  const mayChange = useMay('methods.change');
  const [editing, setEditing] = useState<Method | 'new' | null>(null);
  return (
    <Page title="Methods" action={mayChange && <Button variant="contained" color="primary" onClick={() => setEditing('new')}>Write a method</Button>}>
      {editing !== null && <Section title={editing === 'new' ? 'New method' : `Next version of ${editing.code}`}><MethodForm key={editing === 'new' ? 'new' : editing.id} from={editing === 'new' ? null : editing} onDone={() => setEditing(null)} /></Section>}
      <Loaded query={query}>{({ items }) => items.length === 0 ? <EmptyState title="No methods yet">A run is made by a written method.</EmptyState> : (
        <Stack spacing={3}>{items.filter((m) => m.current).map((m) => (
          <Section key={m.id} title={`${m.code} version ${m.versionNumber}: ${m.name}`} action={mayChange && <Button onClick={() => setEditing(m)}>Next version</Button>}>
            <Typography color="textSecondary">{m.kind}; {m.standard}. Written by {m.createdBy}, {showInstant(m.createdAt)}.</Typography>
            <Typography sx={{ my: 1, whiteSpace: 'pre-line', maxWidth: 800 }}>{m.description}</Typography>
            {m.cautions !== '' && <Caution>{m.cautions}</Caution>}
            {items.some((o) => o.code === m.code && !o.current) && <Typography variant="caption" color="textSecondary">Earlier versions: {items.filter((o) => o.code === m.code && !o.current).map((o) => `${o.versionNumber} of ${showInstant(o.createdAt)}`).join('; ')}</Typography>}
          </Section>
        ))}</Stack>
      )}</Loaded>
    </Page>
  );
}

type Fields = z.input<typeof newMethod>;

function MethodForm({ from, onDone }: { from: Method | null; onDone: () => void }) {
  const { control, handleSubmit, setError } = useForm<Fields, unknown, z.output<typeof newMethod>>({ resolver: zodResolver(newMethod), defaultValues: { code: from?.code ?? '', name: from?.name ?? '', kind: from?.kind ?? 'pulse', standard: from?.standard ?? '', description: from?.description ?? '', cautions: from?.cautions ?? '' } });
  const act = useAct(({ code, ...body }: z.output<typeof newMethod>) => (from === null ? call(schema, 'POST', '/api/methods', { code, ...body }) : call(schema, 'POST', `/api/methods/${from.id}/versions`, body)), onDone);
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (e) => showAtFields(e, setError, ['code', 'name', 'standard', 'description', 'cautions', 'kind']) }));
  return (
    <Stack component="form" spacing={2} onSubmit={(e) => void submit(e)} noValidate sx={{ maxWidth: 720 }}>
      <ProblemAlert error={act.error} />
      {from === null && <Stack direction={{ xs: 'column', sm: 'row' }} spacing={2}><FormText control={control} name="code" label="Code" autoFocus /><FormSelect control={control} name="kind" label="Kind of run" options={RUN_KINDS.map((k) => ({ value: k, label: k }))} /></Stack>}
      <FormText control={control} name="name" label="Name" />
      <FormText control={control} name="standard" label="Standard followed" hint="Write “settings after …” where the text was not at hand" />
      <FormText control={control} name="description" label="Procedure" multiline minRows={4} />
      <FormText control={control} name="cautions" label="Cautions" multiline minRows={2} hint="Shown where the work starts, and on the certificate" />
      <Stack direction="row" spacing={1}><Button type="submit" variant="contained" color="primary" disabled={act.isPending}>{from === null ? 'Write the method' : 'Write the next version'}</Button><Button onClick={onDone}>Cancel</Button></Stack>
    </Stack>
  );
}
