import { zodResolver } from '@hookform/resolvers/zod';
import { changePerson, newPerson, person as personSchema, type Customer, type Person } from '@strainwright/common/contract/people';
import { ROLES } from '@strainwright/common/contract/vocabulary';
import { Button, Checkbox, FormControlLabel, Stack } from '@mui/material';
import { Controller, useForm } from 'react-hook-form';
import type { z } from 'zod';
import { call } from '../../api/client';
import { useAct } from '../../api/queries';
import { FormSelect, FormText, showAtFields } from '../../components/fields';
import { ProblemAlert } from '../../components/states';

const ROLE_OPTIONS = ROLES.map((r) => ({ value: r, label: r }));

export function PersonForm({ person, customers, onDone }: { person: Person | null; customers: readonly Customer[]; onDone: () => void }) {
  return person === null ? <NewPersonForm customers={customers} onDone={onDone} /> : <ChangePersonForm person={person} customers={customers} onDone={onDone} />;
}

const customerOptions = (customers: readonly Customer[]) => customers.map((c) => ({ value: c.id, label: c.name }));

function NewPersonForm({ customers, onDone }: { customers: readonly Customer[]; onDone: () => void }) {
  type Fields = z.input<typeof newPerson>;
  const { control, handleSubmit, setError, watch } = useForm<Fields>({ resolver: zodResolver(newPerson), defaultValues: { name: '', email: '', roles: [], customerId: null, password: '' } });
  const isCustomer = watch('roles').includes('customer');
  const act = useAct((fields: Fields) => call(personSchema, 'POST', '/api/people', { ...fields, customerId: fields.roles.includes('customer') ? fields.customerId : null }), onDone);
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (e) => showAtFields(e, setError, ['name', 'email', 'roles', 'customerId', 'password']) }));
  return (
    <Stack component="form" spacing={2} onSubmit={(e) => void submit(e)} noValidate sx={{ maxWidth: 560 }}>
      <ProblemAlert error={act.error} />
      <FormText control={control} name="name" label="Name" autoFocus /><FormText control={control} name="email" label="E-mail" type="email" />
      <FormSelect control={control} name="roles" label="Roles" multiple options={ROLE_OPTIONS} />
      {isCustomer && <FormSelect control={control} name="customerId" label="Customer" options={customerOptions(customers)} />}
      <FormText control={control} name="password" label="First password" type="password" autoComplete="new-password" hint="At least 12 characters; a phrase is best" />
      <Stack direction="row" spacing={1}><Button type="submit" variant="contained" color="primary" disabled={act.isPending}>Add the person</Button><Button onClick={onDone}>Cancel</Button></Stack>
    </Stack>
  );
}

function ChangePersonForm({ person, customers, onDone }: { person: Person; customers: readonly Customer[]; onDone: () => void }) {
  type Fields = z.input<typeof changePerson>;
  const { control, handleSubmit, setError, watch } = useForm<Fields>({ resolver: zodResolver(changePerson), defaultValues: { name: person.name, roles: person.roles, customerId: person.customerId, active: person.active, version: person.version } });
  const isCustomer = watch('roles').includes('customer');
  const act = useAct((fields: Fields) => call(personSchema, 'PATCH', `/api/people/${person.id}`, fields), onDone);
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (e) => showAtFields(e, setError, ['name', 'roles', 'customerId', 'password']) }));
  return (
    <Stack component="form" spacing={2} onSubmit={(e) => void submit(e)} noValidate sx={{ maxWidth: 560 }}>
      <ProblemAlert error={act.error} />
      <FormText control={control} name="name" label="Name" /><FormSelect control={control} name="roles" label="Roles" multiple options={ROLE_OPTIONS} />
      {isCustomer && <FormSelect control={control} name="customerId" label="Customer" options={customerOptions(customers)} />}
      <Controller control={control} name="active" render={({ field }) => <FormControlLabel control={<Checkbox checked={field.value} onChange={(e) => field.onChange(e.target.checked)} />} label="May sign in" />} />
      <FormText control={control} name="password" label="New password, if it is to change" type="password" autoComplete="new-password" />
      <Stack direction="row" spacing={1}><Button type="submit" variant="contained" color="primary" disabled={act.isPending}>Keep the change</Button><Button onClick={onDone}>Cancel</Button></Stack>
    </Stack>
  );
}
