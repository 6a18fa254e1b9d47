import { Link } from '@mui/material';
import { EmptyState } from '../../components/states';
import { Page } from '../../components/page';

export function NotFound() {
  return <Page title="Not found"><EmptyState title="There is nothing at this address">It may belong to somebody else, or was mistyped. <Link href="/">Go to the start</Link></EmptyState></Page>;
}
