/** How a raw file is read: first rows, proposed columns and units; a person corrects and confirms. */
import { CHANNELS, type Channel, type ColumnMapping, type Layout } from '@strainwright/common/contract/runs';
import { filePreview, run as runSchema, type Run, type RunFile } from '@strainwright/common/contract/run-answers';
import { Alert, Box, Button, MenuItem, Stack, TextField, Typography } from '@mui/material';
import { useState } from 'react';
import { call, download } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useMay } from '../../api/session';
import { fileSize } from '../../components/file-drop';
import { Section } from '../../components/page';
import { Loaded, ProblemAlert } from '../../components/states';
import { PlainTable } from '../../components/table';

const NAMES: Readonly<Record<Channel, string>> = { time: 'time', force: 'force', stress: 'stress', axial1: 'axial 1', axial2: 'axial 2', transverse1: 'transverse 1', transverse2: 'transverse 2', trace: 'trace', ignore: 'not used' };
const UNITS: Readonly<Record<Channel, readonly string[]>> = {
  time: ['s', 'ms', 'µs', 'ns', 'min'], force: ['N', 'daN', 'kN', 'MN', 'kgf', 'lbf', 'kip'], stress: ['Pa', 'kPa', 'MPa', 'GPa', 'bar', 'psi', 'ksi'],
  axial1: ['mm/mm', '%', '‰', 'µε', 'mm', 'µm', 'in'], axial2: ['mm/mm', '%', '‰', 'µε', 'mm', 'µm', 'in'], transverse1: ['mm/mm', '%', '‰', 'µε', 'mm', 'µm', 'in'], transverse2: ['mm/mm', '%', '‰', 'µε', 'mm', 'µm', 'in'],
  trace: ['V', 'mV', ''], ignore: [],
};

/** Confidence under which a proposal is a question. */
const ASKS_UNDER = 0.6;

export function LayoutSection({ run, file }: { run: Run; file: RunFile }) {
  const mayConfirm = useMay('runs.record') && run.state === 'recorded';
  const [open, setOpen] = useState(file.layoutOrigin === 'proposed' && mayConfirm);
  return (
    <Section title={`${file.purpose}: ${file.name}`} action={<><Button onClick={() => void download(`/api/runs/${run.id}/files/${file.id}/content`, file.name)}>Raw file</Button><Button onClick={() => setOpen(!open)} aria-expanded={open}>{open ? 'Hide the layout' : 'Layout'}</Button></>}>
      <Typography color="textSecondary">{file.rowCount.toLocaleString('en-GB')} rows, {fileSize(file.size)}. SHA-256 <span className="mono" style={{ overflowWrap: 'anywhere' }}>{file.sha256}</span></Typography>
      <Typography>{file.layoutOrigin === 'confirmed' ? `Layout confirmed by ${file.confirmedBy ?? 'a person'}.` : file.layoutOrigin === 'remembered' ? 'Layout remembered from an earlier file of this instrument.' : 'Layout proposed by the program; nobody has confirmed it yet.'}</Typography>
      {file.remarks.length > 0 && file.layoutOrigin !== 'confirmed' && <Alert severity={file.confidence < ASKS_UNDER ? 'warning' : 'info'} sx={{ my: 1 }}>{file.confidence < ASKS_UNDER && 'The program is not sure of this layout. '}{file.remarks.join(' ')}</Alert>}
      {open && <LayoutEditor run={run} file={file} mayConfirm={mayConfirm} />}
    </Section>
  );
}

function LayoutEditor({ run, file, mayConfirm }: { run: Run; file: RunFile; mayConfirm: boolean }) {
  const preview = useApi(filePreview, `/api/runs/${run.id}/files/${file.id}/preview`);
  const [layout, setLayout] = useState<Layout>(file.layout);
  const confirm = useAct(() => call(runSchema, 'POST', `/api/runs/${run.id}/files/${file.id}/layout`, { layout }));
  const change = (column: number, changes: Partial<ColumnMapping>) => setLayout({ ...layout, columns: layout.columns.map((c) => (c.column === column ? { ...c, ...changes } : c)) });
  return (
    <Stack spacing={2} sx={{ mt: 1 }}>
      <ProblemAlert error={confirm.error} />
      <PlainTable label="Columns" rows={layout.columns} keyOf={(c) => String(c.column)} columns={[
        { title: 'Column', cell: (c) => <span className="mono">{c.column + 1} {c.heading}</span> },
        { title: 'Channel', cell: (c) => <TextField select label={`Channel of column ${c.column + 1}`} value={c.channel} disabled={!mayConfirm} onChange={(e) => { const channel = CHANNELS.find((x) => x === e.target.value) ?? 'ignore'; change(c.column, { channel, unit: UNITS[channel].includes(c.unit) ? c.unit : (UNITS[channel][0] ?? '') }); }} sx={{ minWidth: 140 }}>{CHANNELS.map((x) => <MenuItem key={x} value={x}>{NAMES[x]}</MenuItem>)}</TextField> },
        { title: 'Unit', cell: (c) => c.channel === 'ignore' ? '' : <TextField select label={`Unit of column ${c.column + 1}`} value={c.unit} disabled={!mayConfirm} onChange={(e) => change(c.column, { unit: e.target.value })} sx={{ minWidth: 110 }}>{[...new Set([c.unit, ...UNITS[c.channel]])].map((u) => <MenuItem key={u} value={u}>{u === '' ? 'none' : u}</MenuItem>)}</TextField> },
        { title: 'Sign', cell: (c) => c.channel === 'ignore' ? '' : <TextField select label={`Sign of column ${c.column + 1}`} value={String(c.sign)} disabled={!mayConfirm} onChange={(e) => change(c.column, { sign: e.target.value === '-1' ? -1 : 1 })} sx={{ minWidth: 120 }}><MenuItem value="1">as it is</MenuItem><MenuItem value="-1">turned</MenuItem></TextField> },
      ]} />
      <Typography variant="caption" color="textSecondary">Signs so that stress and axial strain grow on loading. Data from row {layout.firstDataRow + 1}; {layout.format === 'workbook' ? `sheet “${layout.sheet}”` : `delimiter ${layout.delimiter === '\t' ? 'tab' : layout.delimiter === ' ' ? 'blank' : `“${layout.delimiter}”`}, decimal “${layout.decimal}”, ${layout.encoding}`}.</Typography>
      <Loaded query={preview}>{(p) => (
        <Box tabIndex={0} role="region" aria-label="First rows" sx={{ overflow: 'auto', maxHeight: 280, border: '1px solid', borderColor: 'divider' }}>
          <Box component="table" className="mono" sx={{ fontSize: 12, borderCollapse: 'collapse', '& td': { px: 1, borderBottom: '1px solid', borderColor: 'divider', whiteSpace: 'nowrap' } }}>
            <tbody>{p.firstRows.slice(0, layout.firstDataRow + 12).map((row, i) => (
              <Box component="tr" key={i} sx={{ bgcolor: i === layout.headingRow ? 'action.selected' : 'transparent', color: i < layout.firstDataRow && i !== layout.headingRow ? 'text.secondary' : 'text.primary' }}>
                <td>{i + 1}</td>{row.map((cell, k) => <td key={k}>{cell}</td>)}
              </Box>
            ))}</tbody>
          </Box>
        </Box>
      )}</Loaded>
      {mayConfirm && <Box><Button variant="contained" color="primary" onClick={() => confirm.mutate()} disabled={confirm.isPending}>Confirm the layout</Button></Box>}
    </Stack>
  );
}
