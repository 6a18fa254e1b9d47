import { orderSummary, type OrderSummary } from '@strainwright/common/contract/orders';
import { ORDER_STATES } from '@strainwright/common/contract/states';
import { Button, MenuItem, TextField } from '@mui/material';
import type { GridColDef } from '@mui/x-data-grid';
import { useState } from 'react';
import { useNavigate, useSearchParams } from 'react-router-dom';
import { useMay } from '../../api/session';
import { OrderForm } from '../../features/orders/order-form';
import { showDay } from '../../components/moments';
import { Page, Section } from '../../components/page';
import { ServerGrid } from '../../components/server-grid';
import { StateWord } from '../../components/state-word';

export const ORDER_COLUMNS: readonly GridColDef<OrderSummary>[] = [
  { field: 'number', headerName: 'Number', width: 130, cellClassName: 'mono' },
  { field: 'title', headerName: 'Title', flex: 1, minWidth: 180 },
  { field: 'customerName', headerName: 'Customer', flex: 1, minWidth: 160 },
  { field: 'state', headerName: 'State', width: 130, renderCell: ({ row }) => <StateWord state={row.state} /> },
  { field: 'specimenCount', headerName: 'Specimens', width: 100, align: 'right', headerAlign: 'right', sortable: false },
  { field: 'dueOn', headerName: 'Due', width: 120, valueFormatter: (value: string | null) => showDay(value) },
];

/** A filter by state, kept in the address. */
export function StateFilter({ states }: { states: readonly string[] }) {
  const [params, setParams] = useSearchParams();
  return (
    <TextField select label="State" value={params.get('state') ?? ''} sx={{ width: 180 }}
      onChange={(e) => setParams((before) => {
        const next = new URLSearchParams(before);
        if (e.target.value === '') next.delete('state');
        else next.set('state', e.target.value);
        next.delete('page');
        return next;
      })}>
      <MenuItem value="">Any</MenuItem>
      {states.map((s) => <MenuItem key={s} value={s}>{s}</MenuItem>)}
    </TextField>
  );
}

export function Orders() {
  const mayRequest = useMay('orders.request');
  const navigate = useNavigate();
  const [adding, setAdding] = useState(false);
  return (
    <Page title="Orders" action={mayRequest && <Button variant="contained" color="primary" onClick={() => setAdding(true)}>Request for a customer</Button>}>
      {adding && <Section title="New order"><OrderForm chooseCustomer onDone={(order) => void navigate(`/orders/${order.id}`)} onCancel={() => setAdding(false)} /></Section>}
      <ServerGrid schema={orderSummary} path="/api/orders" label="orders" columns={ORDER_COLUMNS} to={(row) => `/orders/${row.id}`} filters={<StateFilter states={ORDER_STATES} />} empty="Orders appear here when customers request them." />
    </Page>
  );
}
