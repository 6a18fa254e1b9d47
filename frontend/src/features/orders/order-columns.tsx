import type { OrderSummary } from '@strainwright/common/contract/orders';
import type { GridColDef } from '@mui/x-data-grid';
import { showDay } from '../../components/moments';
import { StateWord } from '../../components/state-word';

export const ORDER_COLUMNS: readonly GridColDef<OrderSummary>[] = [
  { field: 'number', headerName: 'Number', width: 130, cellClassName: 'mono' },
  { field: 'title', headerName: 'Title', flex: 1, minWidth: 180 },
  { field: 'customerName', headerName: 'Customer', flex: 1, minWidth: 160 },
  { field: 'state', headerName: 'State', width: 130, renderCell: ({ row }) => <StateWord state={row.state} /> },
  { field: 'specimenCount', headerName: 'Specimens', width: 100, align: 'right', headerAlign: 'right', sortable: false },
  { field: 'dueOn', headerName: 'Due', width: 120, valueFormatter: (value: string | null) => showDay(value) },
];
