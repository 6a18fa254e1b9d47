/** Readings that stand and those superseded, statistics, and corrections. */
import { readingsAnswer, type Reading, type SpecimenMeasurementAnswer } from '@strainwright/common/contract/specimens';
import type { ReadingQuantity } from '@strainwright/common/contract/vocabulary';
import { fromSI } from '@strainwright/common/quantities/units';
import { Button, Dialog, DialogActions, DialogContent, DialogTitle, Stack, TextField } from '@mui/material';
import { useState } from 'react';
import { call } from '../../api/client';
import { useAct } from '../../api/queries';
import { NumberField } from '../../components/fields';
import { MeasuredQuantity, Numeral } from '../../components/measured';
import { showInstant } from '../../components/moments';
import { Facts } from '../../components/page';
import { ProblemAlert } from '../../components/states';
import { PlainTable } from '../../components/table';
import { QUANTITY_NAMES } from './readings-draft';

const SHOWN_IN: Readonly<Record<string, string>> = { m: 'mm', kg: 'g', K: '°C' };
const inShown = (value: number, unit: string) => fromSI(value, SHOWN_IN[unit] ?? unit);
const difference = (value: number, unit: string) => (unit === 'K' ? value : value * 1000);

export function StatisticsTable({ measurement }: { measurement: SpecimenMeasurementAnswer }) {
  return (
    <Stack spacing={2}>
      <PlainTable label="Statistics" rows={measurement.statistics} keyOf={(s) => s.quantity} columns={[
        { title: 'Quantity', cell: (s) => QUANTITY_NAMES[s.quantity] }, { title: 'n', cell: (s) => s.n, numeric: true },
        { title: 'Mean', cell: (s) => <><Numeral value={inShown(s.mean, s.unit)} digits={7} /> {SHOWN_IN[s.unit]}</>, numeric: true },
        { title: 's', cell: (s) => (s.standardDeviation === null ? '–' : <Numeral value={difference(s.standardDeviation, s.unit)} digits={3} />), numeric: true },
        { title: 'Range', cell: (s) => <Numeral value={difference(s.range, s.unit)} digits={3} />, numeric: true },
        { title: 'u', cell: (s) => <Numeral value={difference(s.standardUncertainty, s.unit)} digits={2} />, numeric: true },
      ]} />
      <Facts facts={[
        ['Density by dimensions', <MeasuredQuantity key="d" quantity={measurement.densityByDimensions} />],
        ['Density in water', <MeasuredQuantity key="w" quantity={measurement.densityInWater} />],
        ['Density used', <MeasuredQuantity key="u" quantity={measurement.density} />],
        ['Cross-section', <MeasuredQuantity key="a" quantity={measurement.area} scale={1e-6} unit="mm²" />],
      ]} />
    </Stack>
  );
}

export function ReadingsTable({ readings, mayCorrect }: { readings: readonly Reading[]; mayCorrect: boolean }) {
  const [correcting, setCorrecting] = useState<Reading | null>(null);
  return (
    <>
      <PlainTable label="Readings" rows={readings} keyOf={(r) => r.id} columns={[
        { title: 'Quantity', cell: (r) => QUANTITY_NAMES[r.quantity as ReadingQuantity] }, { title: 'Station', cell: (r) => r.station, numeric: true },
        { title: 'Value', cell: (r) => <span style={{ textDecoration: r.supersededBy === null ? 'none' : 'line-through' }}><Numeral value={r.typedValue} digits={10} /> {r.unit}</span>, numeric: true },
        { title: 'Instrument', cell: (r) => r.instrumentName }, { title: 'Read by', cell: (r) => `${r.personName}, ${showInstant(r.readAt)}` },
        { title: 'Note', cell: (r) => (r.supersededBy !== null ? 'superseded' : r.reason === null ? '' : `corrected: ${r.reason}`) },
        { title: '', cell: (r) => mayCorrect && r.supersededBy === null && <Button size="small" onClick={() => setCorrecting(r)} aria-label={`Correct ${r.quantity} at station ${r.station}`}>Correct</Button> },
      ]} />
      {correcting !== null && <Correction reading={correcting} onClose={() => setCorrecting(null)} />}
    </>
  );
}

function Correction({ reading, onClose }: { reading: Reading; onClose: () => void }) {
  const [value, setValue] = useState<number | null>(reading.typedValue);
  const [reason, setReason] = useState('');
  const act = useAct(() => call(readingsAnswer, 'POST', `/api/readings/${reading.id}/correct`, { value, unit: reading.unit, instrumentId: reading.instrumentId, reason }), onClose);
  return (
    <Dialog open onClose={onClose} fullWidth maxWidth="sm" aria-labelledby="correct-title">
      <DialogTitle id="correct-title">Correct {reading.quantity}, station {reading.station}</DialogTitle>
      <DialogContent>
        <Stack spacing={2} sx={{ pt: 1 }}>
          <span>The reading is superseded, never overwritten: both stay, with the reason.</span>
          <ProblemAlert error={act.error} />
          <NumberField label={`Value, ${reading.unit}`} value={value} onChange={setValue} />
          <TextField label="Reason" value={reason} onChange={(e) => setReason(e.target.value)} multiline minRows={2} />
        </Stack>
      </DialogContent>
      <DialogActions><Button onClick={onClose}>Cancel</Button><Button variant="contained" color="primary" disabled={value === null || reason.trim().length < 5 || act.isPending} onClick={() => act.mutate()}>Supersede the reading</Button></DialogActions>
    </Dialog>
  );
}

