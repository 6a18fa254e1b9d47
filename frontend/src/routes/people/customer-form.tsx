import { zodResolver } from '@hookform/resolvers/zod';
import { customer as schema, newCustomer, type Customer } from '@strainwright/common/contract/people';
import { Button, Stack } from '@mui/material';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { call } from '../../api/client';
import { useAct } from '../../api/queries';
import { FormText, showAtFields } from '../../components/fields';
import { ProblemAlert } from '../../components/states';

type Fields = z.input<typeof newCustomer>;

export function CustomerForm({ customer, onDone }: { customer: Customer | null; onDone: () => void }) {
  const { control, handleSubmit, setError } = useForm<Fields>({ resolver: zodResolver(newCustomer), defaultValues: { name: customer?.name ?? '', address: customer?.address ?? '', contactEmail: customer?.contactEmail ?? '' } });
  const act = useAct((fields: Fields) => (customer === null ? call(schema, 'POST', '/api/customers', fields) : call(schema, 'PATCH', `/api/customers/${customer.id}`, { ...fields, version: customer.version })), onDone);
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (e) => showAtFields(e, setError, ['name', 'address', 'contactEmail']) }));
  return (
    <Stack component="form" spacing={2} onSubmit={(e) => void submit(e)} noValidate sx={{ maxWidth: 560 }} aria-label="Customer">
      <ProblemAlert error={act.error} />
      <FormText control={control} name="name" label="Name" autoFocus /><FormText control={control} name="address" label="Address" multiline minRows={2} /><FormText control={control} name="contactEmail" label="E-mail" type="email" />
      <Stack direction="row" spacing={1}><Button type="submit" variant="contained" color="primary" disabled={act.isPending}>{customer === null ? 'Add the customer' : 'Keep the change'}</Button><Button onClick={onDone}>Cancel</Button></Stack>
    </Stack>
  );
}
