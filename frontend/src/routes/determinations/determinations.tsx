import { determinationSummary, type DeterminationSummary } from '@strainwright/common/contract/determinations';
import { DETERMINATION_STATES } from '@strainwright/common/contract/states';
import type { GridColDef } from '@mui/x-data-grid';
import { showInstant } from '../../components/moments';
import { Page } from '../../components/page';
import { ServerGrid } from '../../components/server-grid';
import { StateWord } from '../../components/state-word';
import { StateFilter } from '../../features/state-filter';

const COLUMNS: readonly GridColDef<DeterminationSummary>[] = [
  { field: 'specimenMark', headerName: 'Specimen', width: 120, cellClassName: 'mono' },
  { field: 'basis', headerName: 'Basis', width: 100 },
  { field: 'number', headerName: 'No.', width: 70, align: 'right', headerAlign: 'right' },
  { field: 'state', headerName: 'State', width: 140, renderCell: ({ row }) => <StateWord state={row.state} /> },
  { field: 'material', headerName: 'Material', flex: 1, minWidth: 150, sortable: false },
  { field: 'orderNumber', headerName: 'Order', width: 130, cellClassName: 'mono' },
  { field: 'submittedBy', headerName: 'Submitted by', width: 160, sortable: false, valueFormatter: (v: string | null) => v ?? '–' },
  { field: 'submittedAt', headerName: 'Submitted', width: 160, valueFormatter: (v: string | null) => showInstant(v) },
];

export function Determinations() {
  return <Page title="Determinations"><ServerGrid schema={determinationSummary} path="/api/determinations" label="determinations" columns={COLUMNS} to={(row) => (row.state === 'submitted' ? `/reviews/${row.id}` : `/determinations/${row.id}`)} filters={<StateFilter states={DETERMINATION_STATES} />} empty="An analyst composes them from adopted fits." /></Page>;
}
