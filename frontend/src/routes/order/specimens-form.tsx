import { zodResolver } from '@hookform/resolvers/zod';
import { MOISTURE_STATES, newSpecimens, specimenSummary } from '@strainwright/common/contract/orders';
import { SHAPES } from '@strainwright/common/contract/vocabulary';
import { Button, Stack, Typography } from '@mui/material';
import { useForm } from 'react-hook-form';
import { z } from 'zod';
import { call } from '../../api/client';
import { useAct } from '../../api/queries';
import { FormNumber, FormSelect, FormText, showAtFields } from '../../components/fields';
import { ProblemAlert } from '../../components/states';

type Fields = z.input<typeof newSpecimens>;

/** Logs one specimen or several alike: marks are given by the program. */
export function SpecimensForm({ sampleId, mark, onDone }: { sampleId: string; mark: string; onDone: () => void }) {
  const { control, handleSubmit, setError } = useForm<Fields, unknown, z.output<typeof newSpecimens>>({ resolver: zodResolver(newSpecimens), defaultValues: { shape: 'cylinder', count: 1, orientation: '', moisture: 'not applicable', notes: '' } });
  const act = useAct((fields: z.output<typeof newSpecimens>) => call(z.object({ items: z.array(specimenSummary) }), 'POST', `/api/samples/${sampleId}/specimens`, fields), onDone);
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (e) => showAtFields(e, setError, ['shape', 'count', 'mark']) }));
  return (
    <Stack component="form" spacing={2} onSubmit={(e) => void submit(e)} noValidate sx={{ maxWidth: 720, my: 2 }} aria-label={`New specimens of ${mark}`}>
      <Typography variant="h3">Specimens of <span className="mono">{mark}</span></Typography>
      <ProblemAlert error={act.error} />
      <Stack direction={{ xs: 'column', sm: 'row' }} spacing={2}>
        <FormSelect control={control} name="shape" label="Shape" options={SHAPES.map((s) => ({ value: s, label: s }))} />
        <FormNumber control={control} name="count" label="How many" />
        <FormSelect control={control} name="moisture" label="Moisture" options={MOISTURE_STATES.map((s) => ({ value: s, label: s }))} />
      </Stack>
      <FormText control={control} name="orientation" label="Orientation (bedding, casting, rolling)" />
      <Stack direction="row" spacing={1}><Button type="submit" variant="contained" color="primary" disabled={act.isPending}>Log the specimens</Button><Button onClick={onDone}>Cancel</Button></Stack>
    </Stack>
  );
}
