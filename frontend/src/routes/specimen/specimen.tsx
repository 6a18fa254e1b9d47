import { determination } from '@strainwright/common/contract/determinations';
import { specimen as specimenSchema, type Specimen } from '@strainwright/common/contract/specimens';
import { BASIS_OF_RUN, type Basis } from '@strainwright/common/contract/vocabulary';
import { Button, Link as MuiLink, Stack, Typography } from '@mui/material';
import { useState } from 'react';
import { Link, useNavigate, useParams } from 'react-router-dom';
import { call } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useMay } from '../../api/session';
import { ConstantsPlate } from '../../components/constants-plate';
import { FindingsList } from '../../components/findings-list';
import { showInstant } from '../../components/moments';
import { Facts, Page, Section } from '../../components/page';
import { StateWord } from '../../components/state-word';
import { EmptyState, Loaded, ProblemAlert } from '../../components/states';
import { PlainTable } from '../../components/table';
import { ReadingsForm } from '../../features/specimens/readings-form';
import { ReadingsTable, StatisticsTable } from '../../features/specimens/readings-table';

export function SpecimenPage() {
  const { id = '' } = useParams();
  return <Loaded query={useApi(specimenSchema, `/api/specimens/${id}`)}>{(specimen) => <SpecimenView specimen={specimen} />}</Loaded>;
}

function SpecimenView({ specimen }: { specimen: Specimen }) {
  const mayEnter = useMay('readings.enter');
  const mayRun = useMay('runs.record');
  const mayCompose = useMay('determinations.compose');
  const navigate = useNavigate();
  const [entering, setEntering] = useState(specimen.readings.length === 0);
  const compose = useAct((basis: Basis) => call(determination, 'POST', `/api/specimens/${specimen.id}/determinations`, { basis }), (made) => void navigate(`/determinations/${made.id}`));
  const composable = [...new Set(specimen.runs.filter((r) => r.state === 'recorded' && r.fits.some((f) => f.adopted)).map((r) => BASIS_OF_RUN[r.kind]))];
  const runButton = mayRun && <Button component={Link} to={`/specimens/${specimen.id}/record-run`} variant="contained" color="primary">Record a run</Button>;
  return (
    <Page title={specimen.mark} crumbs={[{ label: 'Orders', to: '/orders' }, { label: specimen.orderNumber, to: `/orders/${specimen.orderId}` }, { label: specimen.sampleMark }, { label: specimen.mark }]}
      action={<><Button component={Link} to={`/specimens/${specimen.id}/label`}>Label</Button>{runButton}</>}>
      <ProblemAlert error={compose.error} />
      {specimen.determinations.filter((d) => d.state !== 'superseded').length > 0 && (
        <Stack direction="row" spacing={2} sx={{ flexWrap: 'wrap', rowGap: 2 }}>
          {specimen.determinations.filter((d) => d.state !== 'superseded').map((d) => (
            <div key={d.id}><MuiLink component={Link} to={`/determinations/${d.id}`}>{d.basis} determination {d.number}</MuiLink> <StateWord state={d.state} /><ConstantsPlate constants={d.result.constants} basis={d.basis} /></div>
          ))}
        </Stack>
      )}
      {specimen.measurement.findings.length > 0 && <FindingsList findings={specimen.measurement.findings} />}
      <Facts facts={[['Material', `${specimen.material} (${specimen.materialClass})`], ['Customer', specimen.customerName], ['Shape', specimen.shape], ['Orientation', specimen.orientation || '–'], ['Moisture', specimen.moisture], ['Logged', showInstant(specimen.createdAt)]]} />
      <Section title="Readings" action={mayEnter && <Button onClick={() => setEntering(!entering)}>{entering ? 'Hide the form' : 'Enter readings'}</Button>}>
        <Stack spacing={3}>
          {entering && mayEnter && <ReadingsForm specimen={specimen} />}
          {specimen.readings.length === 0 ? <EmptyState title="No readings yet">Dimensions at three stations and the mass.</EmptyState> : <><StatisticsTable measurement={specimen.measurement} /><ReadingsTable readings={specimen.readings} mayCorrect={mayEnter} /></>}
        </Stack>
      </Section>
      <Section title="Runs" action={mayCompose && composable.map((basis) => <Button key={basis} onClick={() => compose.mutate(basis)} disabled={compose.isPending}>Compose the {basis} determination</Button>)}>
        {specimen.runs.length === 0 ? <EmptyState title="No runs yet">A pulse run or a stress–strain run.</EmptyState> : (
          <PlainTable label="Runs" rows={specimen.runs} keyOf={(r) => r.id} columns={[
            { title: 'Run', cell: (r) => <MuiLink component={Link} to={`/runs/${r.id}`}>{r.number}, {r.kind}</MuiLink> }, { title: 'Method', cell: (r) => r.methodName }, { title: 'State', cell: (r) => <StateWord state={r.state} /> },
            { title: 'Performed', cell: (r) => `${r.performedBy}, ${showInstant(r.performedAt)}` }, { title: 'Fits', cell: (r) => (r.fits.length === 0 ? 'none' : r.fits.map((f) => `${f.number} ${f.state}${f.adopted ? ', adopted' : ''}`).join('; ')) },
          ]} />
        )}
        <Typography variant="caption" color="textSecondary">A determination is composed from adopted fits; static and dynamic apart.</Typography>
      </Section>
    </Page>
  );
}
