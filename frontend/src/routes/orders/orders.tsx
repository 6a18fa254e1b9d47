import { orderSummary } from '@strainwright/common/contract/orders';
import { ORDER_STATES } from '@strainwright/common/contract/states';
import { Button } from '@mui/material';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { useMay } from '../../api/session';
import { ORDER_COLUMNS } from '../../features/orders/order-columns';
import { OrderForm } from '../../features/orders/order-form';
import { Page, Section } from '../../components/page';
import { ServerGrid } from '../../components/server-grid';
import { StateFilter } from '../../features/state-filter';

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
