/** `npm run bench`: what the program takes of time and memory, in one run on one machine, against the goals. A benchmark, not a test. */
import { availableParallelism } from 'node:os';
import { recordText } from '../faults/record-text';
import type { Client } from '../services/client';
import { cylinderReadings, fitEnded, logSpecimen, recordRun, setUpLaboratory, stressStrainRun, type Laboratory } from '../services/laboratory';
import { removeFolder, temporaryFolder } from '../services/server';
import { startIdle, startObserved, type ObservedServer } from './observed-server';

const ROWS = [1_000, 100_000, 1_000_000];
const REQUESTS = 200;
const FIT = { settings: { kind: 'stress-strain', region: { by: 'automatic' } } };

interface Line { what: string; value: number; unit: string; goal?: number }
const lines: Line[] = [];

function tell(what: string, value: number, unit: string, goal?: number): void {
  lines.push({ what, value, unit, goal });
  const judged = goal === undefined ? '' : `   goal ≤ ${goal} ${unit}: ${value <= goal ? 'met' : 'MISSED'}`;
  console.log(`${what.padEnd(62)} ${value.toPrecision(3).padStart(9)} ${unit.padEnd(3)}${judged}`);
}

const median = (values: number[]): number => values.toSorted((a, b) => a - b)[Math.floor(values.length / 2)] ?? NaN;

/** Reads what open pages read, one request after another, until told to stop. @returns the time of each answer, ms */
async function readPages(by: Client, paths: string[], goOn: (asked: number) => boolean): Promise<number[]> {
  const times: number[] = [];
  while (goOn(times.length)) {
    const began = performance.now();
    await by.get(paths[times.length % paths.length] ?? '/api/orders');
    times.push(performance.now() - began);
    await new Promise((resolve) => setTimeout(resolve, 5));
  }
  return times;
}

async function newRun(lab: Laboratory, specimenId: string, rows: number): Promise<string> {
  const bytes = recordText(rows);
  return (await recordRun(lab.technician, specimenId, stressStrainRun(lab, [{ purpose: 'record' }]), [{ name: 'record.csv', bytes }])).id;
}

async function fit(lab: Laboratory, runId: string): Promise<void> {
  const { fit: asked } = await lab.analyst.post<{ fit: { id: string } }>(`/api/runs/${runId}/fits`, FIT);
  const { state, error } = await fitEnded(lab.analyst, asked.id, 300_000);
  if (state !== 'done') throw new Error(`The fit ended ${state}: ${error}`);
}

async function measureResponses(server: ObservedServer, lab: Laboratory, specimenId: string, orderId: string): Promise<void> {
  const runId = await newRun(lab, specimenId, 100_000);
  await fit(lab, runId);
  const paths = ['/api/orders', `/api/orders/${orderId}`, `/api/specimens/${specimenId}`, '/api/worklist', `/api/runs/${runId}`];
  await readPages(lab.analyst, paths, (asked) => asked < 50);
  const idleProcess = await startIdle();
  await server.longestPause();
  const before = await readPages(lab.analyst, paths, (asked) => asked < REQUESTS / 2);
  const idlePause = await server.longestPause();
  await idleProcess.longestPause();

  let fitting = true;
  const fits = (async () => {
    for (let i = 0; i < 3; i += 1) await Promise.all(Array.from({ length: availableParallelism() }, () => fit(lab, runId)));
    fitting = false;
  })();
  const during = await readPages(lab.analyst, paths, () => fitting);
  await fits;
  const pause = await server.longestPause();
  const machinePause = await idleProcess.longestPause();
  idleProcess.stop();
  const after = await readPages(lab.analyst, paths, (asked) => asked < REQUESTS / 2);

  const idle = median([...before, ...after]);
  tell('median answer, idle', idle, 'ms');
  tell(`median answer during fits (${during.length} requests)`, median(during), 'ms');
  tell('median answer during fits over idle', median(during) / idle, '', 2);
  tell('longest pause of the event loop, no fit', idlePause, 'ms');
  tell('longest pause of the event loop during fits', pause, 'ms', 50);
  tell('longest pause of an idle process meanwhile (the machine’s)', machinePause, 'ms');
}

async function measureRecords(lab: Laboratory, specimenId: string): Promise<void> {
  let per1000 = NaN;
  for (const rows of ROWS) {
    const bytes = recordText(rows);
    const began = performance.now();
    const run = await recordRun(lab.technician, specimenId, stressStrainRun(lab, [{ purpose: 'record' }]), [{ name: 'record.csv', bytes }]);
    const uploaded = performance.now();
    await fit(lab, run.id);
    const seconds = (performance.now() - began) / 1000;
    if (Number.isNaN(per1000)) per1000 = seconds;
    tell(`${rows} rows (${(bytes.length / 1e6).toFixed(1)} MB), upload`, (uploaded - began) / 1000, 's');
    tell(`${rows} rows, upload to result`, seconds, 's');
    tell(`${rows} rows, upload to result over that of ${ROWS[0]} rows`, seconds / per1000, '');
  }
}

async function main(): Promise<void> {
  const data = temporaryFolder();
  const first = await startObserved(data);
  tell('start-up, new database', first.startUp / 1000, 's');
  await first.stop();
  const server = await startObserved(data);
  try {
    tell('start-up, second time', server.startUp / 1000, 's', 5);
    tell('resident memory after start', server.memory().resident, 'MB', 450);
    const lab = await setUpLaboratory(server.url);
    const { orderId, specimenId } = await logSpecimen(lab);
    await lab.technician.post(`/api/specimens/${specimenId}/readings`, cylinderReadings(lab, { length: 100, diameter: 20, mass: 84.82 }));
    await measureResponses(server, lab, specimenId, orderId);
    await measureRecords(lab, specimenId);
    tell('resident memory at the end', server.memory().resident, 'MB');
    tell('resident memory at its peak', server.memory().peak, 'MB', 900);
  } finally {
    await server.stop();
    removeFolder(data);
  }
  const judged = lines.filter((line) => line.goal !== undefined);
  console.log(`\n${judged.filter((line) => line.value <= (line.goal ?? NaN)).length} of ${judged.length} goals met, on ${availableParallelism()} cores.`);
}

main().catch((error: unknown) => {
  console.error(error);
  process.exit(1);
});
