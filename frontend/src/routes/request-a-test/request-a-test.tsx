import { useNavigate } from 'react-router-dom';
import { Page } from '../../components/page';
import { OrderForm } from '../../features/orders/order-form';

export function RequestATest() {
  const navigate = useNavigate();
  return <Page title="Request a test"><OrderForm chooseCustomer={false} onDone={(order) => void navigate(`/my-orders/${order.id}`)} /></Page>;
}
