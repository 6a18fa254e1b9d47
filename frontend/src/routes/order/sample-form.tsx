import { zodResolver } from '@hookform/resolvers/zod';
import { newSample, sample, type Sample } from '@strainwright/common/contract/orders';
import { MATERIAL_CLASSES } from '@strainwright/common/contract/vocabulary';
import { Button, Stack } from '@mui/material';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { call } from '../../api/client';
import { useAct } from '../../api/queries';
import { FormSelect, FormText, showAtFields } from '../../components/fields';
import { ProblemAlert } from '../../components/states';

type Fields = z.input<typeof newSample>;

export function SampleForm({ orderId, onDone, onCancel }: { orderId: string; onDone: (sample: Sample) => void; onCancel: () => void }) {
  const { control, handleSubmit, setError } = useForm<Fields, unknown, z.output<typeof newSample>>({
    resolver: zodResolver(newSample), defaultValues: { material: '', materialClass: 'rock', receivedOn: new Date().toISOString().slice(0, 10), condition: '', description: '', sampledOn: null, sampledBy: '' },
  });
  const act = useAct((fields: z.output<typeof newSample>) => call(sample, 'POST', `/api/orders/${orderId}/samples`, fields), onDone);
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (e) => showAtFields(e, setError, ['material', 'materialClass', 'receivedOn', 'sampledOn', 'condition']) }));
  return (
    <Stack component="form" spacing={2} onSubmit={(e) => void submit(e)} noValidate sx={{ maxWidth: 720, mb: 2 }} aria-label="New sample">
      <ProblemAlert error={act.error} />
      <Stack direction={{ xs: 'column', sm: 'row' }} spacing={2}>
        <FormText control={control} name="material" label="Material" autoFocus />
        <FormSelect control={control} name="materialClass" label="Class" options={MATERIAL_CLASSES.map((c) => ({ value: c, label: c }))} />
        <FormText control={control} name="receivedOn" label="Received" type="date" />
      </Stack>
      <FormText control={control} name="condition" label="Condition on receipt" />
      <Stack direction={{ xs: 'column', sm: 'row' }} spacing={2}>
        <FormText control={control} name="sampledOn" label="Sampled on" type="date" />
        <FormText control={control} name="sampledBy" label="Sampled by" />
      </Stack>
      <Stack direction="row" spacing={1}><Button type="submit" variant="contained" color="primary" disabled={act.isPending}>Log the sample</Button><Button onClick={onCancel}>Cancel</Button></Stack>
    </Stack>
  );
}
