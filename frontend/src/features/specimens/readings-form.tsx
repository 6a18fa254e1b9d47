/** Readings by station: unit and instrument once a quantity, Enter goes on, a column pastes from a spreadsheet, drafts are kept. */
import { instrument, type Instrument } from '@strainwright/common/contract/instruments';
import { readingsAnswer, type Specimen } from '@strainwright/common/contract/specimens';
import { DIMENSIONS_OF_SHAPE, type ReadingQuantity } from '@strainwright/common/contract/vocabulary';
import { page } from '@strainwright/common/contract/wire';
import { Alert, Box, Button, MenuItem, Stack, TextField, Typography } from '@mui/material';
import { useMemo, useRef, useState } from 'react';
import { ApiProblem, call } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useDecimalStyle } from '../../components/measured';
import { ProblemAlert } from '../../components/states';
import { useDraft } from '../../components/use-draft';
import { KINDS_OF, pastedValues, QUANTITY_NAMES, readingsDraft, readingsToSend, UNITS_OF, type DraftProblem, type DraftRow, type ReadingsDraft } from './readings-draft';

const STATIONS = 3;

function accept(value: unknown): ReadingsDraft | null {
  const parsed = readingsDraft.safeParse(value);
  return parsed.success && Object.keys(parsed.data).length > 0 ? parsed.data : null;
}

export function ReadingsForm({ specimen }: { specimen: Specimen }) {
  const style = useDecimalStyle();
  const instruments = useApi(page(instrument), '/api/instruments?pageSize=200');
  const quantities = useMemo<readonly ReadingQuantity[]>(() => [...DIMENSIONS_OF_SHAPE[specimen.shape], 'mass', 'massInWater', 'waterTemperature'], [specimen.shape]);
  const empty = useMemo<ReadingsDraft>(() => ({}), []);
  const draft = useDraft<ReadingsDraft>(`readings.${specimen.id}`, empty, accept);
  const [problems, setProblems] = useState<readonly DraftProblem[]>([]);
  const key = useRef(crypto.randomUUID());
  const form = useRef<HTMLFormElement>(null);
  const firstStation = (quantity: string) => Math.max(0, ...specimen.readings.filter((r) => r.quantity === quantity).map((r) => r.station)) + 1;
  const act = useAct((body: unknown) => call(readingsAnswer, 'POST', `/api/specimens/${specimen.id}/readings`, body, { 'idempotency-key': key.current }), () => {
    key.current = crypto.randomUUID();
    draft.clear();
  });
  const rowOf = (quantity: ReadingQuantity): DraftRow => draft.value[quantity] ?? { unit: UNITS_OF[quantity][0] ?? '', instrumentId: suited(instruments.data?.items ?? [], quantity)[0]?.id ?? '', values: Array.from({ length: STATIONS }, () => '') };
  const change = (quantity: ReadingQuantity, changes: Partial<DraftRow>) => {
    key.current = crypto.randomUUID();
    draft.setValue({ ...draft.value, [quantity]: { ...rowOf(quantity), ...changes } });
  };
  const send = () => {
    const { readings, problems: found } = readingsToSend(draft.value, style, firstStation);
    setProblems(found);
    if (found.length > 0 || readings.length === 0) return;
    act.mutate(readings, {
      onError: (error) => error instanceof ApiProblem && setProblems(error.errors.flatMap(({ path, message }) => {
        const reading = readings[Number(path.split('.')[0])];
        return reading === undefined ? [] : [{ quantity: reading.quantity, station: reading.station - firstStation(reading.quantity), message }];
      })),
    });
  };
  const next = (event: React.KeyboardEvent) => {
    if (event.key !== 'Enter') return;
    event.preventDefault();
    const inputs = [...(form.current?.querySelectorAll<HTMLInputElement>('input[data-reading]') ?? [])];
    inputs[inputs.indexOf(event.target as HTMLInputElement) + 1]?.focus();
  };
  return (
    <Stack component="form" ref={form} spacing={1.5} aria-label="Enter readings" onSubmit={(e) => { e.preventDefault(); send(); }}>
      {draft.restored && Object.keys(draft.value).length > 0 && <Alert severity="info" action={<Button onClick={draft.clear}>Discard</Button>}>Readings typed earlier and not yet sent are back.</Alert>}
      <ProblemAlert error={act.error} />
      {quantities.map((quantity) => (
        <QuantityRow key={quantity} quantity={quantity} row={rowOf(quantity)} instruments={suited(instruments.data?.items ?? [], quantity)} first={firstStation(quantity)} problems={problems.filter((p) => p.quantity === quantity)} onChange={(changes) => change(quantity, changes)} onKeyDown={next} />
      ))}
      <Box><Button type="submit" variant="contained" color="primary" disabled={act.isPending}>Enter the readings</Button></Box>
    </Stack>
  );
}

function suited(instruments: readonly Instrument[], quantity: ReadingQuantity): Instrument[] {
  return instruments.filter((i) => i.inService && KINDS_OF[quantity].includes(i.kind)).sort((a, b) => Number(a.calibrationState === 'lapsed') - Number(b.calibrationState === 'lapsed'));
}

interface RowProps {
  quantity: ReadingQuantity;
  row: DraftRow;
  instruments: readonly Instrument[];
  first: number;
  problems: readonly DraftProblem[];
  onChange: (changes: Partial<DraftRow>) => void;
  onKeyDown: (event: React.KeyboardEvent) => void;
}

function QuantityRow({ quantity, row, instruments, first, problems, onChange, onKeyDown }: RowProps) {
  const name = QUANTITY_NAMES[quantity];
  const set = (i: number, text: string) => onChange({ values: row.values.map((v, k) => (k === i ? text : v)) });
  const paste = (i: number) => (event: React.ClipboardEvent) => {
    const values = pastedValues(event.clipboardData.getData('text'));
    if (values.length < 2) return;
    event.preventDefault();
    onChange({ values: [...row.values.slice(0, i), ...values, ...row.values.slice(i + values.length)] });
  };
  return (
    <Box role="group" aria-label={name} sx={{ display: 'grid', gap: 1, alignItems: 'start', gridTemplateColumns: { xs: '1fr 1fr', md: '200px 90px 220px 1fr' } }}>
      <Typography sx={{ pt: 1, gridColumn: { xs: '1 / -1', md: 'auto' } }}>{name}</Typography>
      <TextField select label="Unit" value={row.unit} onChange={(e) => onChange({ unit: e.target.value })}>{UNITS_OF[quantity].map((u) => <MenuItem key={u} value={u}>{u}</MenuItem>)}</TextField>
      <TextField select label="Instrument" value={row.instrumentId} onChange={(e) => onChange({ instrumentId: e.target.value })}>
        {instruments.map((i) => <MenuItem key={i.id} value={i.id}>{i.name}{i.calibrationState === 'lapsed' ? ' (calibration lapsed)' : ''}</MenuItem>)}
      </TextField>
      <Box sx={{ display: 'flex', flexWrap: 'wrap', gap: 1, gridColumn: { xs: '1 / -1', md: 'auto' } }}>
        {row.values.map((value, i) => {
          const problem = problems.find((p) => p.station === i);
          return (
            <TextField key={i} label={`Station ${first + i}`} value={value} onChange={(e) => set(i, e.target.value)} onPaste={paste(i)} onKeyDown={onKeyDown} error={problem !== undefined} helperText={problem?.message} sx={{ width: 128 }}
              slotProps={{ htmlInput: { inputMode: 'decimal', 'data-reading': true, 'aria-label': `${name}, station ${first + i}`, className: 'mono', style: { textAlign: 'right' } } }} />
          );
        })}
        <Button onClick={() => onChange({ values: [...row.values, ''] })} aria-label={`Another station of ${name}`}>+</Button>
      </Box>
    </Box>
  );
}
