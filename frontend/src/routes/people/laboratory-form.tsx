import { zodResolver } from '@hookform/resolvers/zod';
import { changeLaboratory, laboratory as schema, type Laboratory } from '@strainwright/common/contract/people';
import { Alert, Box, Button, Checkbox, FormControlLabel, Stack } from '@mui/material';
import { Controller, useForm } from 'react-hook-form';
import type { z } from 'zod';
import { call } from '../../api/client';
import { useAct } from '../../api/queries';
import { FormText, showAtFields } from '../../components/fields';
import { ProblemAlert } from '../../components/states';

type Fields = z.input<typeof changeLaboratory>;

export function LaboratoryForm({ laboratory }: { laboratory: Laboratory }) {
  const { control, handleSubmit, setError, watch } = useForm<Fields>({ resolver: zodResolver(changeLaboratory), defaultValues: laboratory });
  const act = useAct((fields: Fields) => call(schema, 'PATCH', '/api/laboratory', fields));
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (e) => showAtFields(e, setError, ['name', 'address', 'timeZone']) }));
  return (
    <Stack component="form" spacing={2} onSubmit={(e) => void submit(e)} noValidate sx={{ maxWidth: 560 }} aria-label="Laboratory">
      <ProblemAlert error={act.error} />
      <FormText control={control} name="name" label="Name" /><FormText control={control} name="address" label="Address" multiline minRows={2} /><FormText control={control} name="timeZone" label="Time zone" hint="Such as Europe/London" />
      <Controller control={control} name="separationOfDuties" render={({ field }) => <FormControlLabel control={<Checkbox checked={field.value} onChange={(e) => field.onChange(e.target.checked)} />} label="Who did the work may neither review nor release it" />} />
      {!watch('separationOfDuties') && <Alert severity="warning">For a sole practitioner only. Certificates and the record will say that this rule was off.</Alert>}
      <Box><Button type="submit" disabled={act.isPending}>Keep the change</Button></Box>
    </Stack>
  );
}
