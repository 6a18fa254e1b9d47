import { orderSummary } from '@strainwright/common/contract/orders';
import { ORDER_STATES } from '@strainwright/common/contract/states';
import { Button } from '@mui/material';
import { Link } from 'react-router-dom';
import { Page } from '../../components/page';
import { ServerGrid } from '../../components/server-grid';
import { StateFilter } from '../../features/state-filter';
import { ORDER_COLUMNS } from '../../features/orders/order-columns';

export function MyOrders() {
  return (
    <Page title="My orders" action={<Button component={Link} to="/request-a-test" variant="contained" color="primary">Request a test</Button>}>
      <ServerGrid schema={orderSummary} path="/api/orders" label="orders" columns={ORDER_COLUMNS.filter((c) => c.field !== 'customerName')} to={(row) => `/my-orders/${row.id}`} filters={<StateFilter states={ORDER_STATES} />} empty="Request a test, and follow it here." />
    </Page>
  );
}
