/** Requesting a test: by a customer, or by the quality manager on behalf. */
import { zodResolver } from '@hookform/resolvers/zod';
import { DECISION_RULES, newOrder, order as orderSchema, type NewOrder, type Order } from '@strainwright/common/contract/orders';
import { customer } from '@strainwright/common/contract/people';
import { CONSTANTS } from '@strainwright/common/contract/vocabulary';
import { page } from '@strainwright/common/contract/wire';
import { Box, Button, Stack } from '@mui/material';
import { useEffect } from 'react';
import { useFieldArray, useForm } from 'react-hook-form';
import type { z } from 'zod';
import { call } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { FormNumber, FormSelect, FormText, showAtFields } from '../../components/fields';
import { Section } from '../../components/page';
import { ProblemAlert } from '../../components/states';
import { clearDraft, readDraft } from '../../components/use-draft';
import { SYMBOLS } from '../../components/constants-plate';

type Fields = z.input<typeof newOrder>;
const DRAFT = 'order';
const EMPTY: Fields = { title: '', customerReference: '', materialDescription: '', constantsWanted: ['E', 'nu', 'G', 'K'], kindsOfRun: ['pulse'], limits: [], dueOn: null, notes: '' };
const GIGA = 1e9;

/** Limits are typed in GPa (ν as it is) and sent in SI. */
function toWire(fields: NewOrder): NewOrder {
  const si = (constant: string, value: number | null) => (value === null || constant === 'nu' ? value : value * GIGA);
  return { ...fields, limits: fields.limits.map((l) => ({ ...l, lower: si(l.constant, l.lower), upper: si(l.constant, l.upper) })) };
}

export function OrderForm({ chooseCustomer, onDone, onCancel }: { chooseCustomer: boolean; onDone: (order: Order) => void; onCancel?: () => void }) {
  const customers = useApi(page(customer), '/api/customers?pageSize=200', { enabled: chooseCustomer });
  const draft = newOrder.partial().safeParse(readDraft(DRAFT));
  const { control, handleSubmit, setError, watch } = useForm<Fields, unknown, NewOrder>({ resolver: zodResolver(newOrder), defaultValues: { ...EMPTY, ...(draft.success ? draft.data : {}) } });
  const limits = useFieldArray({ control, name: 'limits' });
  useEffect(() => {
    const subscription = watch((values) => localStorage.setItem(`strainwright.draft.${DRAFT}`, JSON.stringify(values)));
    return () => subscription.unsubscribe();
  }, [watch]);
  const act = useAct((fields: NewOrder) => call(orderSchema, 'POST', '/api/orders', toWire(fields)), (order) => {
    clearDraft(DRAFT);
    onDone(order);
  });
  const submit = handleSubmit((fields) => act.mutate(fields, { onError: (error) => showAtFields(error, setError, ['title', 'materialDescription', 'constantsWanted', 'kindsOfRun', 'limits', 'dueOn', 'customerId']) }));
  return (
    <Stack component="form" spacing={2} onSubmit={(e) => void submit(e)} noValidate sx={{ maxWidth: 720 }}>
      <ProblemAlert error={act.error} />
      {chooseCustomer && <FormSelect control={control} name="customerId" label="Customer" options={(customers.data?.items ?? []).map((c) => ({ value: c.id, label: c.name }))} />}
      <FormText control={control} name="title" label="What is to be tested" autoFocus />
      <FormText control={control} name="materialDescription" label="Material, as you know it" multiline minRows={2} hint="Stands on the certificate as supplied by the customer" />
      <Stack direction={{ xs: 'column', sm: 'row' }} spacing={2}>
        <FormText control={control} name="customerReference" label="Your reference" />
        <FormText control={control} name="dueOn" label="Needed by" type="date" />
      </Stack>
      <Stack direction={{ xs: 'column', sm: 'row' }} spacing={2}>
        <FormSelect control={control} name="constantsWanted" label="Constants wanted" multiple options={CONSTANTS.map((c) => ({ value: c, label: SYMBOLS[c] }))} />
        <FormSelect control={control} name="kindsOfRun" label="Kinds of test" multiple options={[{ value: 'pulse', label: 'Pulse (dynamic)' }, { value: 'stress-strain', label: 'Stress–strain (static)' }]} />
      </Stack>
      <Section title="Limits to judge by" action={<Button onClick={() => limits.append({ constant: 'E', lower: null, upper: null, rule: 'guard band' })}>Add a limit</Button>}>
        {limits.fields.map((field, i) => (
          <Box key={field.id} sx={{ display: 'grid', gap: 1, gridTemplateColumns: { xs: '1fr 1fr', sm: '1fr 1fr 1fr 1.5fr auto' }, mb: 1.5 }}>
            <FormSelect control={control} name={`limits.${i}.constant`} label="Constant" options={CONSTANTS.map((c) => ({ value: c, label: SYMBOLS[c] }))} />
            <FormNumber control={control} name={`limits.${i}.lower`} label="Lower, GPa (ν: 1)" />
            <FormNumber control={control} name={`limits.${i}.upper`} label="Upper, GPa (ν: 1)" />
            <FormSelect control={control} name={`limits.${i}.rule`} label="Decision rule" options={DECISION_RULES.map((r) => ({ value: r, label: r }))} />
            <Button onClick={() => limits.remove(i)}>Remove</Button>
          </Box>
        ))}
      </Section>
      <FormText control={control} name="notes" label="Notes" multiline minRows={2} />
      <Stack direction="row" spacing={1}>
        <Button type="submit" variant="contained" color="primary" disabled={act.isPending}>Request the test</Button>
        {onCancel !== undefined && <Button onClick={onCancel}>Cancel</Button>}
      </Stack>
    </Stack>
  );
}
