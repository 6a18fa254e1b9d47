import { instrument, newReferenceCheck, newReferencePiece, referencePiece as schema, type ReferencePiece } from '@strainwright/common/contract/instruments';
import { page } from '@strainwright/common/contract/wire';
import { Box, Button, Stack, Typography } from '@mui/material';
import { zodResolver } from '@hookform/resolvers/zod';
import { useMemo, useState } from 'react';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { call } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useMay } from '../../api/session';
import { FormNumber, FormSelect, FormText, showAtFields } from '../../components/fields';
import { Numeral } from '../../components/measured';
import { showInstant } from '../../components/moments';
import { Page, Section } from '../../components/page';
import { Plot, type PlotSeries } from '../../components/plot';
import { StateWord } from '../../components/state-word';
import { EmptyState, Loaded, ProblemAlert } from '../../components/states';
import { PlainTable } from '../../components/table';

/** Runs on pieces of known constants, each on its control chart. */
export function ReferenceChecks() {
  const query = useApi(page(schema), '/api/reference-pieces?pageSize=200');
  const mayEnter = useMay('reference-checks.enter');
  const [adding, setAdding] = useState(false);
  return (
    <Page title="Reference checks" action={mayEnter && <Button variant="contained" color="primary" onClick={() => setAdding(true)}>Add a reference piece</Button>}>
      {adding && <Section title="New reference piece"><PieceForm onDone={() => setAdding(false)} /></Section>}
      <Loaded query={query}>{({ items }) => items.length === 0 ? <EmptyState title="No reference pieces yet">Bars and blocks of known constants keep the instruments honest between calibrations.</EmptyState> : <>{items.map((piece) => <Piece key={piece.id} piece={piece} mayEnter={mayEnter} />)}</>}</Loaded>
    </Page>
  );
}

function Piece({ piece, mayEnter }: { piece: ReferencePiece; mayEnter: boolean }) {
  const [entering, setEntering] = useState(false);
  const x = useMemo(() => piece.checks.map((_, i) => i + 1), [piece]);
  const series = useMemo<PlotSeries[]>(() => [
    { name: 'Measured', values: piece.checks.map((c) => c.value), role: 'data' }, { name: 'Known', values: piece.checks.map(() => piece.knownValue), role: 'fit' },
    { name: 'Upper limit', values: piece.checks.map((c) => piece.knownValue + Math.hypot(c.expandedUncertainty, piece.knownExpandedUncertainty)), role: 'other' },
    { name: 'Lower limit', values: piece.checks.map((c) => piece.knownValue - Math.hypot(c.expandedUncertainty, piece.knownExpandedUncertainty)), role: 'other' },
  ], [piece]);
  return (
    <Section title={piece.name} action={<><StateWord state={piece.withinLimits ? 'within limits' : 'out of limits'} />{mayEnter && <Button onClick={() => setEntering(!entering)}>Enter a check</Button>}</>}>
      <Typography color="textSecondary">{piece.quantity}, known <Numeral value={piece.knownValue} digits={7} /> ± <Numeral value={piece.knownExpandedUncertainty} digits={2} /> {piece.unit}; measured with {piece.instrumentName}. Limits where |E_n| = 1.</Typography>
      {entering && <CheckForm piece={piece} onDone={() => setEntering(false)} />}
      {piece.checks.length > 1 && <Plot title={`Control chart of ${piece.name}`} x={x} series={series} xLabel="Check" yLabel={`${piece.quantity}, ${piece.unit}`} height={240} summary={`${piece.checks.length} checks, ${piece.checks.filter((c) => !c.withinLimits).length} out of limits`} />}
      <PlainTable label={`Checks of ${piece.name}`} rows={[...piece.checks].reverse()} keyOf={(c) => c.id} columns={[{ title: 'When', cell: (c) => showInstant(c.checkedAt) }, { title: 'By', cell: (c) => c.personName }, { title: 'Value', cell: (c) => <><Numeral value={c.value} digits={7} /> {piece.unit}</>, numeric: true }, { title: 'E_n', cell: (c) => <Numeral value={c.en} digits={3} />, numeric: true }, { title: 'Verdict', cell: (c) => <StateWord state={c.withinLimits ? 'within limits' : 'out of limits'} /> }]} />
    </Section>
  );
}

type CheckFields = z.input<typeof newReferenceCheck>;

function CheckForm({ piece, onDone }: { piece: ReferencePiece; onDone: () => void }) {
  const { control, handleSubmit, setError } = useForm<CheckFields>({ resolver: zodResolver(newReferenceCheck), defaultValues: { value: piece.knownValue, unit: piece.unit, expandedUncertainty: piece.knownExpandedUncertainty, checkedAt: new Date().toISOString() } });
  const act = useAct((fields: CheckFields) => call(schema, 'POST', `/api/reference-pieces/${piece.id}/checks`, fields), onDone);
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (e) => showAtFields(e, setError, ['value', 'expandedUncertainty']) }));
  return (
    <Box component="form" onSubmit={(e) => void submit(e)} noValidate sx={{ display: 'flex', gap: 1, my: 2, flexWrap: 'wrap', maxWidth: 640 }}>
      <ProblemAlert error={act.error} />
      <FormNumber control={control} name="value" label={`Value, ${piece.unit}`} /><FormNumber control={control} name="expandedUncertainty" label={`U, ${piece.unit}`} />
      <Button type="submit" variant="contained" color="primary" disabled={act.isPending}>Enter it</Button>
    </Box>
  );
}

type PieceFields = z.input<typeof newReferencePiece>;

function PieceForm({ onDone }: { onDone: () => void }) {
  const instruments = useApi(page(instrument), '/api/instruments?pageSize=200');
  const { control, handleSubmit, setError } = useForm<PieceFields>({ resolver: zodResolver(newReferencePiece), defaultValues: { name: '', quantity: 'transit time P', knownValue: 0, knownExpandedUncertainty: 0, unit: 'µs', instrumentId: '' } });
  const act = useAct((fields: PieceFields) => call(schema, 'POST', '/api/reference-pieces', fields), onDone);
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (e) => showAtFields(e, setError, ['name', 'knownValue', 'knownExpandedUncertainty', 'unit', 'instrumentId']) }));
  return (
    <Stack component="form" spacing={2} onSubmit={(e) => void submit(e)} noValidate sx={{ maxWidth: 640 }}>
      <ProblemAlert error={act.error} />
      <FormText control={control} name="name" label="Name" autoFocus />
      <FormSelect control={control} name="quantity" label="Quantity" options={['transit time P', 'transit time S', 'E'].map((q) => ({ value: q, label: q }))} />
      <Stack direction="row" spacing={2}><FormNumber control={control} name="knownValue" label="Known value" /><FormNumber control={control} name="knownExpandedUncertainty" label="Its U" /><FormText control={control} name="unit" label="Unit" /></Stack>
      <FormSelect control={control} name="instrumentId" label="Measured with" options={(instruments.data?.items ?? []).map((i) => ({ value: i.id, label: i.name }))} />
      <Stack direction="row" spacing={1}><Button type="submit" variant="contained" color="primary" disabled={act.isPending}>Add it</Button><Button onClick={onDone}>Cancel</Button></Stack>
    </Stack>
  );
}
