import { zodResolver } from '@hookform/resolvers/zod';
import { instrument as schema, newInstrument, type Instrument } from '@strainwright/common/contract/instruments';
import { INSTRUMENT_KINDS } from '@strainwright/common/contract/vocabulary';
import { Box, Button, Stack } from '@mui/material';
import type { GridColDef } from '@mui/x-data-grid';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import { useNavigate } from 'react-router-dom';
import type { z } from 'zod';
import { call } from '../../api/client';
import { useAct } from '../../api/queries';
import { useMay } from '../../api/session';
import { FormNumber, FormSelect, FormText, showAtFields } from '../../components/fields';
import { showDay } from '../../components/moments';
import { Page, Section } from '../../components/page';
import { ServerGrid } from '../../components/server-grid';
import { StateWord } from '../../components/state-word';
import { ProblemAlert } from '../../components/states';
import { StateFilter } from '../../features/state-filter';

const COLUMNS: readonly GridColDef<Instrument>[] = [
  { field: 'name', headerName: 'Name', flex: 1, minWidth: 160 }, { field: 'kind', headerName: 'Kind', width: 130 }, { field: 'serial', headerName: 'Serial', width: 140, cellClassName: 'mono' },
  { field: 'location', headerName: 'Place', width: 140, sortable: false }, { field: 'calibrationState', headerName: 'Calibration', width: 170, sortable: false, renderCell: ({ row }) => <StateWord state={row.calibrationState} /> },
  { field: 'dueOn', headerName: 'Due', width: 130, sortable: false, valueFormatter: (v: string | null) => showDay(v) }, { field: 'inService', headerName: 'In service', width: 100, sortable: false, valueFormatter: (v: boolean) => (v ? 'yes' : 'no') },
];

export function Instruments() {
  const mayChange = useMay('instruments.change');
  const navigate = useNavigate();
  const [adding, setAdding] = useState(false);
  return (
    <Page title="Instruments" action={mayChange && <Button variant="contained" color="primary" onClick={() => setAdding(true)}>Add an instrument</Button>}>
      {adding && <Section title="New instrument"><InstrumentForm onDone={(made) => void navigate(`/instruments/${made.id}`)} onCancel={() => setAdding(false)} /></Section>}
      <ServerGrid schema={schema} path="/api/instruments" label="instruments" columns={COLUMNS} to={(row) => `/instruments/${row.id}`} filters={<StateFilter states={['in calibration', 'due soon', 'lapsed', 'never calibrated']} />} empty="Add the laboratory’s instruments with their calibrations." />
    </Page>
  );
}

type Fields = z.input<typeof newInstrument>;

function InstrumentForm({ onDone, onCancel }: { onDone: (instrument: Instrument) => void; onCancel: () => void }) {
  const { control, handleSubmit, setError } = useForm<Fields, unknown, z.output<typeof newInstrument>>({ resolver: zodResolver(newInstrument), defaultValues: { name: '', kind: 'caliper', maker: '', model: '', serial: '', location: '', unit: 'mm', resolution: 0, rangeLow: null, rangeHigh: null } });
  const act = useAct((fields: z.output<typeof newInstrument>) => call(schema, 'POST', '/api/instruments', fields), onDone);
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (e) => showAtFields(e, setError, ['name', 'serial', 'unit', 'resolution', 'rangeHigh', 'rangeLow']) }));
  return (
    <Stack component="form" spacing={2} onSubmit={(e) => void submit(e)} noValidate sx={{ maxWidth: 720 }}>
      <ProblemAlert error={act.error} />
      <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: { xs: '1fr', sm: '1fr 1fr' } }}>
        <FormText control={control} name="name" label="Name" autoFocus /><FormSelect control={control} name="kind" label="Kind" options={INSTRUMENT_KINDS.map((k) => ({ value: k, label: k }))} />
        <FormText control={control} name="maker" label="Maker" /><FormText control={control} name="model" label="Model" />
        <FormText control={control} name="serial" label="Serial" /><FormText control={control} name="location" label="Place" />
        <FormText control={control} name="unit" label="Unit" hint="mm, g, µs, kN, °C …" /><FormNumber control={control} name="resolution" label="Resolution, in that unit" />
        <FormNumber control={control} name="rangeLow" label="Range from" /><FormNumber control={control} name="rangeHigh" label="Range to" />
      </Box>
      <Stack direction="row" spacing={1}><Button type="submit" variant="contained" color="primary" disabled={act.isPending}>Add it</Button><Button onClick={onCancel}>Cancel</Button></Stack>
    </Stack>
  );
}
