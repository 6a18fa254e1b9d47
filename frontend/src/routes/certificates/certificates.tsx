import { certificateSummary, type CertificateSummary } from '@strainwright/common/contract/certificates';
import { CERTIFICATE_STATES } from '@strainwright/common/contract/states';
import type { GridColDef } from '@mui/x-data-grid';
import { useUser } from '../../api/session';
import { showInstant } from '../../components/moments';
import { Page } from '../../components/page';
import { ServerGrid } from '../../components/server-grid';
import { StateWord } from '../../components/state-word';
import { StateFilter } from '../../features/state-filter';

const COLUMNS: readonly GridColDef<CertificateSummary>[] = [
  { field: 'number', headerName: 'Number', width: 150, cellClassName: 'mono' },
  { field: 'issue', headerName: 'Issue', width: 75, align: 'right', headerAlign: 'right' },
  { field: 'state', headerName: 'State', width: 140, renderCell: ({ row }) => <StateWord state={row.state} /> },
  { field: 'orderNumber', headerName: 'Order', width: 130, cellClassName: 'mono' },
  { field: 'customerName', headerName: 'Customer', flex: 1, minWidth: 160 },
  { field: 'releasedAt', headerName: 'Released', width: 170, valueFormatter: (v: string | null) => showInstant(v) },
  { field: 'reason', headerName: 'Reason', flex: 1, minWidth: 140, sortable: false, valueFormatter: (v: string | null) => v ?? '' },
];

export function Certificates() {
  const isCustomer = useUser().roles.includes('customer');
  return <Page title="Certificates"><ServerGrid schema={certificateSummary} path="/api/certificates" label="certificates" columns={COLUMNS} to={(row) => `/certificates/${row.id}`} filters={<StateFilter states={isCustomer ? CERTIFICATE_STATES.filter((s) => s !== 'draft') : CERTIFICATE_STATES} />} empty={isCustomer ? 'Your certificates appear here when they are released.' : 'Draft one from an order with accepted determinations.'} /></Page>;
}
