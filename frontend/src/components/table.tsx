/** A small table that is all there: no paging, scrolls sideways on a phone. */
import { Table, TableBody, TableCell, TableContainer, TableHead, TableRow } from '@mui/material';
import type { ReactNode } from 'react';

export interface Column<R> { title: string; cell: (row: R) => ReactNode; numeric?: boolean }

export function PlainTable<R>({ label, columns, rows, keyOf }: { label: string; columns: readonly Column<R>[]; rows: readonly R[]; keyOf: (row: R) => string }) {
  return (
    <TableContainer tabIndex={0} role="region" aria-label={label}>
      <Table size="small" aria-label={label}>
        <TableHead><TableRow>{columns.map((c) => <TableCell key={c.title} align={c.numeric ? 'right' : 'left'}>{c.title}</TableCell>)}</TableRow></TableHead>
        <TableBody>
          {rows.map((row) => <TableRow key={keyOf(row)}>{columns.map((c) => <TableCell key={c.title} align={c.numeric ? 'right' : 'left'}>{c.cell(row)}</TableCell>)}</TableRow>)}
        </TableBody>
      </Table>
    </TableContainer>
  );
}
