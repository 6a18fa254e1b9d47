/** A list of the server: searched, sorted and paged there, its place kept in the address. */
import { page } from '@strainwright/common/contract/wire';
import { Box, TextField } from '@mui/material';
import { DataGrid, type GridColDef, type GridValidRowModel } from '@mui/x-data-grid';
import { useState, type ReactNode } from 'react';
import { useNavigate, useSearchParams } from 'react-router-dom';
import type { z } from 'zod';
import { useApi } from '../api/queries';
import { EmptyState, FailedState } from './states';

interface Props<R extends GridValidRowModel> {
  schema: z.ZodType<R>;
  /** Path of the list, with query parameters that stay. */
  path: string;
  columns: readonly GridColDef<R>[];
  label: string;
  /** Where a row leads. */
  to?: (row: R) => string;
  empty: ReactNode;
  filters?: ReactNode;
}

const PAGE_SIZE = 50;

export function ServerGrid<R extends GridValidRowModel>({ schema, path, columns, label, to, empty, filters }: Props<R>) {
  const navigate = useNavigate();
  const [params, setParams] = useSearchParams();
  const [typed, setTyped] = useState(params.get('q') ?? '');
  const set = (changes: Record<string, string | null>) => setParams((before) => {
    const next = new URLSearchParams(before);
    for (const [name, value] of Object.entries(changes)) if (value === null || value === '') next.delete(name); else next.set(name, value);
    return next;
  }, { replace: true });
  const sort = params.get('sort');
  const pageNumber = Number(params.get('page') ?? 0);
  const query = new URLSearchParams([...params.entries()].filter(([name]) => ['q', 'sort', 'page', 'state', 'kind'].includes(name)));
  query.set('pageSize', String(PAGE_SIZE));
  const list = useApi(page(schema), `${path}${path.includes('?') ? '&' : '?'}${query.toString()}`);
  return (
    <Box>
      <Box component="form" role="search" aria-label={`Search ${label}`} onSubmit={(e) => { e.preventDefault(); set({ q: typed, page: null }); }} sx={{ display: 'flex', gap: 2, mb: 1, maxWidth: 640 }}>
        <TextField label={`Search ${label}`} value={typed} onChange={(e) => setTyped(e.target.value)} onBlur={() => set({ q: typed, page: null })} type="search" />
        {filters}
      </Box>
      {list.isError ? <FailedState error={list.error} retry={() => void list.refetch()} /> : (
        <DataGrid
          aria-label={label} rows={list.data?.items ?? []} columns={[...columns]} loading={list.isPending} rowCount={list.data?.total ?? 0} autoHeight
          paginationMode="server" sortingMode="server" filterMode="server" pageSizeOptions={[PAGE_SIZE]} paginationModel={{ page: pageNumber, pageSize: PAGE_SIZE }}
          onPaginationModelChange={(model) => set({ page: model.page === 0 ? null : String(model.page) })}
          sortModel={sort === null ? [] : [{ field: sort.replace(/^-/, ''), sort: sort.startsWith('-') ? 'desc' : 'asc' }]}
          onSortModelChange={([first]) => set({ sort: first === undefined ? null : `${first.sort === 'desc' ? '-' : ''}${first.field}`, page: null })}
          onRowClick={to === undefined ? undefined : ({ row }) => void navigate(to(row))}
          onCellKeyDown={to === undefined ? undefined : ({ row }, event) => event.key === 'Enter' && void navigate(to(row))}
          slots={{ noRowsOverlay: () => <Box sx={{ p: 2 }}><EmptyState title={params.get('q') === null ? 'Nothing here yet' : 'Nothing found'}>{empty}</EmptyState></Box> }}
          sx={{ '--DataGrid-overlayHeight': '180px', '& .MuiDataGrid-row': { cursor: to === undefined ? 'default' : 'pointer' } }}
        />
      )}
    </Box>
  );
}
