import { specimenSummary, type SpecimenSummary } from '@strainwright/common/contract/orders';
import type { GridColDef } from '@mui/x-data-grid';
import { Page } from '../../components/page';
import { ServerGrid } from '../../components/server-grid';

const COLUMNS: readonly GridColDef<SpecimenSummary>[] = [
  { field: 'mark', headerName: 'Mark', width: 120, cellClassName: 'mono' },
  { field: 'material', headerName: 'Material', flex: 1, minWidth: 160 },
  { field: 'shape', headerName: 'Shape', width: 110 },
  { field: 'orderNumber', headerName: 'Order', width: 130, cellClassName: 'mono' },
  { field: 'customerName', headerName: 'Customer', flex: 1, minWidth: 160 },
  { field: 'readingCount', headerName: 'Readings', width: 95, align: 'right', headerAlign: 'right', sortable: false },
  { field: 'runCount', headerName: 'Runs', width: 75, align: 'right', headerAlign: 'right', sortable: false },
];

export function Specimens() {
  return <Page title="Specimens"><ServerGrid schema={specimenSummary} path="/api/specimens" label="specimens" columns={COLUMNS} to={(row) => `/specimens/${row.id}`} empty="Specimens are logged on an open order." /></Page>;
}
