import { customer as customerSchema, laboratory as laboratorySchema, person as personSchema, type Customer, type Person } from '@strainwright/common/contract/people';
import { page } from '@strainwright/common/contract/wire';
import { Button, Stack, Typography } from '@mui/material';
import { useState } from 'react';
import { useApi } from '../../api/queries';
import { showInstant } from '../../components/moments';
import { Page, Section } from '../../components/page';
import { StateWord } from '../../components/state-word';
import { Loaded } from '../../components/states';
import { PlainTable } from '../../components/table';
import { CustomerForm } from './customer-form';
import { LaboratoryForm } from './laboratory-form';
import { PersonForm } from './person-form';

/** Accounts, customers and the laboratory itself: the administrator's page. */
export function People() {
  const people = useApi(page(personSchema), '/api/people?pageSize=200');
  const customers = useApi(page(customerSchema), '/api/customers?pageSize=200');
  const laboratory = useApi(laboratorySchema, '/api/laboratory');
  const [person, setPerson] = useState<Person | 'new' | null>(null);
  const [customer, setCustomer] = useState<Customer | 'new' | null>(null);
  return (
    <Page title="People" action={<Button variant="contained" color="primary" onClick={() => setPerson('new')}>Add a person</Button>}>
      {person !== null && <Section title={person === 'new' ? 'New person' : person.name}><PersonForm key={person === 'new' ? 'new' : person.id} person={person === 'new' ? null : person} customers={customers.data?.items ?? []} onDone={() => setPerson(null)} /></Section>}
      <Loaded query={people}>{({ items }) => (
        <PlainTable label="People" rows={items} keyOf={(p) => p.id} columns={[{ title: 'Name', cell: (p) => p.name }, { title: 'E-mail', cell: (p) => p.email }, { title: 'Roles', cell: (p) => p.roles.join(', ') }, { title: 'Customer', cell: (p) => p.customerName ?? '–' }, { title: 'Account', cell: (p) => <StateWord state={p.active ? 'active' : 'inactive'} /> }, { title: 'Last sign-in', cell: (p) => showInstant(p.lastSignInAt) }, { title: '', cell: (p) => <Button size="small" onClick={() => setPerson(p)} aria-label={`Change ${p.name}`}>Change</Button> }]} />
      )}</Loaded>
      <Section title="Customers" action={<Button onClick={() => setCustomer('new')}>Add a customer</Button>}>
        <Stack spacing={2}>
          {customer !== null && <CustomerForm key={customer === 'new' ? 'new' : customer.id} customer={customer === 'new' ? null : customer} onDone={() => setCustomer(null)} />}
          <Loaded query={customers}>{({ items }) => items.length === 0 ? <Typography color="textSecondary">None yet.</Typography> : <PlainTable label="Customers" rows={items} keyOf={(c) => c.id} columns={[{ title: 'Name', cell: (c) => c.name }, { title: 'Address', cell: (c) => c.address }, { title: 'E-mail', cell: (c) => c.contactEmail }, { title: '', cell: (c) => <Button size="small" onClick={() => setCustomer(c)} aria-label={`Change ${c.name}`}>Change</Button> }]} />}</Loaded>
        </Stack>
      </Section>
      <Section title="Laboratory"><Loaded query={laboratory}>{(l) => <LaboratoryForm key={l.version} laboratory={l} />}</Loaded></Section>
    </Page>
  );
}
