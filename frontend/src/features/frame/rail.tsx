/** The rail: where one can go, in words; at the bottom of a phone. */
import type { Action } from '@strainwright/common/contract/permissions';
import { mayDo } from '@strainwright/common/contract/permissions';
import { Box } from '@mui/material';
import { NavLink } from 'react-router-dom';
import { useUser } from '../../api/session';

export interface Place { to: string; label: string; action: Action; key: string }

export const LAB_PLACES: readonly Place[] = [
  { to: '/worklist', label: 'Worklist', action: 'worklist.read', key: 'w' },
  { to: '/orders', label: 'Orders', action: 'orders.read', key: 'o' },
  { to: '/specimens', label: 'Specimens', action: 'specimens.read', key: 's' },
  { to: '/determinations', label: 'Determinations', action: 'determinations.read', key: 'd' },
  { to: '/certificates', label: 'Certificates', action: 'certificates.read', key: 'c' },
  { to: '/instruments', label: 'Instruments', action: 'instruments.read', key: 'i' },
  { to: '/methods', label: 'Methods', action: 'methods.read', key: 'm' },
  { to: '/reference-checks', label: 'Reference checks', action: 'reference-checks.read', key: 'r' },
  { to: '/people', label: 'People', action: 'people.read', key: 'p' },
  { to: '/record', label: 'Record', action: 'record.read', key: 'l' },
];
export const CUSTOMER_PLACES: readonly Place[] = [
  { to: '/my-orders', label: 'My orders', action: 'orders.read', key: 'o' },
  { to: '/request-a-test', label: 'Request a test', action: 'orders.request', key: 'n' },
  { to: '/my-certificates', label: 'Certificates', action: 'certificates.read', key: 'c' },
];

/** Places of the signed-in person. */
export function usePlaces(): readonly Place[] {
  const { roles } = useUser();
  return roles.includes('customer') ? CUSTOMER_PLACES : LAB_PLACES.filter((p) => mayDo(roles, p.action));
}

export function Rail() {
  const places = usePlaces();
  return (
    <Box component="nav" aria-label="Main" sx={{
      position: { xs: 'fixed', sm: 'sticky' }, bottom: { xs: 0, sm: 'auto' }, top: { sm: 56 }, left: 0, right: { xs: 0, sm: 'auto' }, zIndex: 5,
      display: 'flex', flexDirection: { xs: 'row', sm: 'column' }, overflowX: { xs: 'auto', sm: 'visible' }, width: { xs: '100%', sm: 168 }, flexShrink: 0, alignSelf: 'flex-start',
      bgcolor: 'background.default', borderTop: { xs: '1px solid', sm: 'none' }, borderColor: 'divider', py: { xs: 0, sm: 2 },
    }}>
      {places.map(({ to, label }) => (
        <Box key={to} component={NavLink} to={to} sx={{
          color: 'text.primary', textDecoration: 'none', px: 2, py: 1, minHeight: { xs: 48, sm: 36 }, display: 'flex', alignItems: 'center', whiteSpace: 'nowrap',
          borderLeft: { sm: '3px solid transparent' }, borderTop: { xs: '3px solid transparent', sm: 'none' },
          '&:hover': { bgcolor: 'action.hover' }, '&.active': { borderColor: 'primary.main', fontWeight: 500 },
        }}>{label}</Box>
      ))}
    </Box>
  );
}
