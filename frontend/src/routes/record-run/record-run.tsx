import { instrument, method as methodSchema, type Instrument, type Method } from '@strainwright/common/contract/instruments';
import { run as runSchema } from '@strainwright/common/contract/run-answers';
import type { FilePurpose } from '@strainwright/common/contract/runs';
import { specimen as specimenSchema, type Specimen } from '@strainwright/common/contract/specimens';
import type { InstrumentKind } from '@strainwright/common/contract/vocabulary';
import { page } from '@strainwright/common/contract/wire';
import { Alert, Box, Button, Checkbox, FormControlLabel, LinearProgress, MenuItem, Stack, TextField, Typography } from '@mui/material';
import { useMemo, useRef, useState } from 'react';
import { useNavigate, useParams } from 'react-router-dom';
import { upload } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { Caution } from '../../components/caution';
import { FileDrop, fileSize } from '../../components/file-drop';
import { useDecimalStyle } from '../../components/measured';
import { Page, Section } from '../../components/page';
import { Loaded, ProblemAlert } from '../../components/states';
import { useDraft } from '../../components/use-draft';
import { DraftFault, emptyRun, runDraft, runToSend, type RunDraft, type WaveDraft } from '../../features/runs/run-draft';

interface Attached { file: File; purpose: FilePurpose }

export function RecordRun() {
  const { id = '' } = useParams();
  const specimen = useApi(specimenSchema, `/api/specimens/${id}`);
  const methods = useApi(page(methodSchema), '/api/methods?pageSize=200');
  const instruments = useApi(page(instrument), '/api/instruments?pageSize=200');
  return (
    <Loaded query={specimen}>{(s) => <Loaded query={methods}>{(m) => <Loaded query={instruments}>{(i) => <RunForm specimen={s} methods={m.items.filter((x) => x.current)} instruments={i.items.filter((x) => x.inService)} />}</Loaded>}</Loaded>}</Loaded>
  );
}

const localNow = () => new Date(Date.now() - new Date().getTimezoneOffset() * 60_000).toISOString().slice(0, 16);

function accept(value: unknown): RunDraft | null {
  const parsed = runDraft.safeParse(value);
  return parsed.success ? parsed.data : null;
}

function RunForm({ specimen, methods, instruments }: { specimen: Specimen; methods: readonly Method[]; instruments: readonly Instrument[] }) {
  const style = useDecimalStyle();
  const navigate = useNavigate();
  const empty = useMemo(() => emptyRun(localNow()), []);
  const { value: draft, setValue, clear, restored } = useDraft<RunDraft>(`run.${specimen.id}`, empty, accept);
  const [files, setFiles] = useState<readonly Attached[]>([]);
  const [fault, setFault] = useState<DraftFault | null>(null);
  const [sent, setSent] = useState(0);
  const key = useRef(crypto.randomUUID());
  const method = methods.find((m) => m.id === draft.methodId);
  const set = (changes: Partial<RunDraft>) => setValue({ ...draft, ...changes });
  const act = useAct(async () => {
    const form = new FormData();
    form.set('run', JSON.stringify(runToSend(draft, method?.kind ?? 'pulse', files.map((f) => f.purpose), style)));
    for (const { file } of files) form.append('files', file, file.name);
    return upload(runSchema, `/api/specimens/${specimen.id}/runs`, form, { 'idempotency-key': key.current }, setSent);
  }, (made) => {
    clear();
    void navigate(`/runs/${made.id}`);
  });
  const submit = () => {
    setFault(null);
    try {
      runToSend(draft, method?.kind ?? 'pulse', files.map((f) => f.purpose), style);
    } catch (error) {
      if (error instanceof DraftFault) return setFault(error);
      throw error;
    }
    return act.mutate(undefined, { onSettled: () => { key.current = crypto.randomUUID(); setSent(0); } });
  };
  const text = (field: keyof RunDraft & string, label: string, hint?: string, type?: string) => {
    const value = draft[field];
    return <TextField label={label} value={typeof value === 'string' ? value : ''} type={type} onChange={(e) => set({ [field]: e.target.value })} error={fault?.field === field} helperText={fault?.field === field ? fault.message : hint} slotProps={type === undefined ? undefined : { inputLabel: { shrink: true } }} />;
  };
  const choose = (field: 'time' | 'force' | 'axial' | 'transverse' | 'frame', label: string, kinds: readonly InstrumentKind[]) => (
    <TextField select label={label} value={draft[field]} onChange={(e) => set({ [field]: e.target.value })}>
      <MenuItem value="">–</MenuItem>
      {instruments.filter((i) => kinds.includes(i.kind)).map((i) => <MenuItem key={i.id} value={i.id}>{i.name}{i.calibrationState === 'lapsed' ? ' (calibration lapsed)' : ''}</MenuItem>)}
    </TextField>
  );
  return (
    <Page title="Record a run" crumbs={[{ label: specimen.orderNumber, to: `/orders/${specimen.orderId}` }, { label: specimen.mark, to: `/specimens/${specimen.id}` }, { label: 'Record a run' }]}>
      <Stack component="form" spacing={2} noValidate onSubmit={(e) => { e.preventDefault(); submit(); }} sx={{ maxWidth: 960 }}>
        {restored && <Alert severity="info" action={<Button onClick={clear}>Discard</Button>}>A run typed earlier and not yet sent is back. Attach its files again.</Alert>}
        <ProblemAlert error={act.error ?? fault} />
        <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: { xs: '1fr', sm: '2fr 1fr 1fr 1fr' } }}>
          <TextField select label="Method" value={draft.methodId} onChange={(e) => { setFiles([]); set({ methodId: e.target.value }); }} error={fault?.field === 'methodId'} helperText={fault?.field === 'methodId' ? fault.message : method?.standard}>
            {methods.map((m) => <MenuItem key={m.id} value={m.id}>{m.code} {m.name} ({m.kind})</MenuItem>)}
          </TextField>
          {text('performedAt', 'Performed', undefined, 'datetime-local')}
          {text('temperature', 'Temperature, °C')}
          {text('humidity', 'Humidity, %')}
        </Box>
        {method !== undefined && method.cautions !== '' && <Caution>{method.cautions}</Caution>}
        {method?.kind === 'pulse' && <>
          <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: { xs: '1fr', sm: '2fr 1fr 1fr' } }}>
            {choose('time', 'Pulse unit', ['pulse unit'])}
            {text('frequency', 'Frequency, kHz', 'Nominal, of the transducers')}
            {text('timeResolution', 'Resolution, µs')}
          </Box>
          {(['P', 'S'] as const).map((wave) => <WaveFields key={wave} wave={wave} draft={draft[wave]} fault={fault} onChange={(w) => set({ [wave]: w })} hasWaveform={files.some((f) => f.purpose === `waveform ${wave}`)} hasZero={files.some((f) => f.purpose === `zero ${wave}`)} />)}
          <Section title="Waveforms">
            <Stack spacing={1}>{(['waveform P', 'waveform S', 'zero P', 'zero S'] as const).map((purpose) => <AttachOne key={purpose} purpose={purpose} files={files} setFiles={setFiles} hint="CSV or XLSX: time and one or more traces; leave out when times are typed" />)}</Stack>
          </Section>
        </>}
        {method?.kind === 'stress-strain' && <>
          <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: { xs: '1fr', sm: '1fr 1fr' } }}>
            {choose('force', 'Force measured by', ['load cell', 'test frame'])}
            {choose('axial', 'Axial strain measured by', ['extensometer', 'strain gauge'])}
            {choose('transverse', 'Transverse strain measured by', ['extensometer', 'strain gauge'])}
            {choose('frame', 'Test frame', ['test frame'])}
            {text('axialGaugeLength', 'Axial gauge length, mm', 'Needed when the file holds an extension')}
            {text('transverseGaugeLength', 'Transverse gauge length, mm', 'Needed when the file holds an extension')}
          </Box>
          <FormControlLabel control={<Checkbox checked={draft.compressive} onChange={(e) => set({ compressive: e.target.checked })} />} label="The specimen is compressed" />
          <AttachOne purpose="record" files={files} setFiles={setFiles} hint="CSV, TSV, TXT or XLSX as the test frame wrote it" />
        </>}
        {text('notes', 'Notes')}
        {act.isPending && <Box><LinearProgress variant={sent < 1 ? 'determinate' : 'indeterminate'} value={sent * 100} aria-label="Upload" /><Typography variant="caption">{sent < 1 ? `${(sent * 100).toFixed(0)} % sent` : 'The server reads the file'}</Typography></Box>}
        <Box><Button type="submit" variant="contained" color="primary" disabled={act.isPending || method === undefined}>Record the run</Button></Box>
      </Stack>
    </Page>
  );
}

function AttachOne({ purpose, files, setFiles, hint }: { purpose: FilePurpose; files: readonly Attached[]; setFiles: (files: readonly Attached[]) => void; hint: string }) {
  const own = files.find((f) => f.purpose === purpose);
  const others = files.filter((f) => f.purpose !== purpose);
  if (own !== undefined) return <Alert severity="success" action={<Button onClick={() => setFiles(others)}>Take off</Button>}>{purpose}: <span className="mono">{own.file.name}</span>, {fileSize(own.file.size)}</Alert>;
  return <FileDrop label={purpose === 'record' ? 'Choose the record' : `Choose ${purpose}`} hint={hint} onFiles={([file]) => file !== undefined && setFiles([...others, { file, purpose }])} />;
}

function WaveFields({ wave, draft, fault, onChange, hasWaveform, hasZero }: { wave: 'P' | 'S'; draft: WaveDraft; fault: DraftFault | null; onChange: (draft: WaveDraft) => void; hasWaveform: boolean; hasZero: boolean }) {
  const field = (name: keyof WaveDraft & string, label: string, hint: string, rows = 1) => (
    <TextField label={label} value={draft[name]} onChange={(e) => onChange({ ...draft, [name]: e.target.value })} multiline={rows > 1} minRows={rows} error={fault?.field === `${wave}.${name}`} helperText={fault?.field === `${wave}.${name}` ? fault.message : hint} slotProps={{ htmlInput: { className: 'mono' } }} />
  );
  return (
    <Section title={wave === 'P' ? 'P wave (longitudinal)' : 'S wave (shear)'}>
      <Box sx={{ display: 'grid', gap: 2, gridTemplateColumns: { xs: '1fr', sm: '1fr 1fr 1fr' }, alignItems: 'start' }}>
        {!hasWaveform && field('times', `Transit times ${wave}, µs`, 'One a line, coupling anew for each', 3)}
        {!hasZero && <TextField select label={`Zero time ${wave} by`} value={draft.zeroBy} onChange={(e) => onChange({ ...draft, zeroBy: runDraft.shape.P.shape.zeroBy.parse(e.target.value) })}>
          {['face to face', 'reference bar', 'several lengths', 'none'].map((by) => <MenuItem key={by} value={by}>{by === 'none' ? 'not determined' : by}</MenuItem>)}
        </TextField>}
        {!hasZero && (draft.zeroBy === 'face to face' || draft.zeroBy === 'reference bar') && field('zeroTimes', `Zero readings ${wave}, µs`, draft.zeroBy === 'reference bar' ? 'Times through the bar' : 'Transducers face to face', 3)}
        {!hasZero && draft.zeroBy === 'reference bar' && <>{field('knownTime', 'Known time of the bar, µs', 'Engraved or certified')}{field('knownUncertainty', 'Its standard uncertainty, µs', 'U/k of the certificate')}</>}
        {!hasZero && draft.zeroBy === 'several lengths' && field('lengths', 'Length (mm) and time (µs)', 'A pair on each line', 4)}
      </Box>
    </Section>
  );
}
