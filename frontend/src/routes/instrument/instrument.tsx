import { zodResolver } from '@hookform/resolvers/zod';
import { instrument as schema, newCalibration, type Calibration, type Instrument } from '@strainwright/common/contract/instruments';
import { fromSI, unit } from '@strainwright/common/quantities/units';
import { Box, Button, Checkbox, FormControlLabel, Stack } from '@mui/material';
import { useState } from 'react';
import { Controller, useForm } from 'react-hook-form';
import { useParams } from 'react-router-dom';
import type { z } from 'zod';
import { call } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useMay } from '../../api/session';
import { FormNumber, FormText, showAtFields } from '../../components/fields';
import { Numeral } from '../../components/measured';
import { showDay, showInstant } from '../../components/moments';
import { Facts, Page, Section } from '../../components/page';
import { StateWord } from '../../components/state-word';
import { EmptyState, Loaded, ProblemAlert } from '../../components/states';
import { PlainTable } from '../../components/table';

export function InstrumentPage() {
  const { id = '' } = useParams();
  return <Loaded query={useApi(schema, `/api/instruments/${id}`)}>{(i) => <View instrument={i} />}</Loaded>;
}

function View({ instrument: i }: { instrument: Instrument }) {
  const mayChange = useMay('instruments.change');
  const [adding, setAdding] = useState(false);
  const service = useAct(() => call(schema, 'PATCH', `/api/instruments/${i.id}`, { name: i.name, location: i.location, inService: !i.inService, version: i.version }));
  // An offset does not belong to a difference: only the factor turns an uncertainty back.
  const own = (c: Calibration, value: number) => (c.relative ? value * 100 : fromSI(value + (unit(i.unit)?.offset ?? 0), i.unit));
  const suffix = (c: Calibration) => (c.relative ? '% of reading' : i.unit);
  return (
    <Page title={i.name} state={<StateWord state={i.calibrationState} />} crumbs={[{ label: 'Instruments', to: '/instruments' }, { label: i.name }]}
      action={mayChange && <><Button onClick={() => service.mutate()} disabled={service.isPending}>{i.inService ? 'Take out of service' : 'Put into service'}</Button><Button variant="contained" color="primary" onClick={() => setAdding(true)}>Enter a calibration</Button></>}>
      <ProblemAlert error={service.error} />
      <Facts facts={[['Kind', i.kind], ['Maker, model', [i.maker, i.model].filter((x) => x !== '').join(', ') || '–'], ['Serial', <span key="s" className="mono">{i.serial}</span>], ['Place', i.location || '–'], ['In service', i.inService ? 'yes' : 'no'],
        ['Resolution', <span key="r"><Numeral value={i.resolution} /> {i.unit}</span>], ['Range', i.rangeLow === null && i.rangeHigh === null ? '–' : `${i.rangeLow ?? '–'} to ${i.rangeHigh ?? '–'} ${i.unit}`]]} />
      <Section title="Calibrations">
        {adding && <CalibrationForm instrument={i} onDone={() => setAdding(false)} />}
        {i.calibrations.length === 0 ? <EmptyState title="Never calibrated">Results with it carry a warning until a calibration is entered.</EmptyState> : (
          <PlainTable label="Calibrations" rows={i.calibrations} keyOf={(c) => c.id} columns={[
            { title: 'Calibrated', cell: (c) => showDay(c.calibratedOn) }, { title: 'Due', cell: (c) => showDay(c.dueOn) }, { title: 'Certificate', cell: (c) => `${c.certificate}, ${c.laboratory}` },
            { title: 'U', cell: (c) => <><Numeral value={own(c, c.expandedUncertainty)} digits={4} /> {suffix(c)}</>, numeric: true }, { title: 'k', cell: (c) => c.coverageFactor, numeric: true },
            { title: 'Correction', cell: (c) => <><Numeral value={own(c, c.correction)} digits={4} /> {suffix(c)}</>, numeric: true }, { title: 'Entered', cell: (c) => `${c.enteredBy}, ${showInstant(c.enteredAt)}` },
          ]} />
        )}
      </Section>
    </Page>
  );
}

type Fields = z.input<typeof newCalibration>;

function CalibrationForm({ instrument, onDone }: { instrument: Instrument; onDone: () => void }) {
  const { control, handleSubmit, setError, watch } = useForm<Fields, unknown, z.output<typeof newCalibration>>({ resolver: zodResolver(newCalibration), defaultValues: { calibratedOn: '', dueOn: '', certificate: '', laboratory: '', relative: false, expandedUncertainty: 0, coverageFactor: 2, correction: 0 } });
  const relative = watch('relative');
  const act = useAct((fields: z.output<typeof newCalibration>) => call(schema, 'POST', `/api/instruments/${instrument.id}/calibrations`, fields), onDone);
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (e) => showAtFields(e, setError, ['calibratedOn', 'dueOn', 'certificate', 'laboratory', 'expandedUncertainty', 'coverageFactor', 'correction']) }));
  const suffix = relative ? 'as a fraction of the reading' : instrument.unit;
  return (
    <Stack component="form" spacing={2} onSubmit={(e) => void submit(e)} noValidate sx={{ maxWidth: 720, mb: 2 }} aria-label="New calibration">
      <ProblemAlert error={act.error} />
      <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: { xs: '1fr', sm: '1fr 1fr' } }}>
        <FormText control={control} name="calibratedOn" label="Calibrated on" type="date" /><FormText control={control} name="dueOn" label="Due on" type="date" />
        <FormText control={control} name="certificate" label="Certificate" /><FormText control={control} name="laboratory" label="Calibration laboratory" />
        <FormNumber control={control} name="expandedUncertainty" label={`Expanded uncertainty U, ${suffix}`} /><FormNumber control={control} name="coverageFactor" label="Coverage factor k" />
        <FormNumber control={control} name="correction" label={`Correction, ${suffix}`} hint="Added to a reading" />
        <Controller control={control} name="relative" render={({ field }) => <FormControlLabel control={<Checkbox checked={field.value} onChange={(e) => field.onChange(e.target.checked)} />} label="Relative to the reading (force, extension, time base)" />} />
      </Box>
      <Stack direction="row" spacing={1}><Button type="submit" variant="contained" color="primary" disabled={act.isPending}>Enter it</Button><Button onClick={onDone}>Cancel</Button></Stack>
    </Stack>
  );
}
