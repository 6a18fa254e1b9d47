/** The tests of data layer, record, outbox and queue once more, on a PostgreSQL server in place of the embedded database. */
import { spawn } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { postgresPrograms, startPostgres, type Postgres } from '../services/postgres';

const root = join(__dirname, '..', '..');
const TESTS = ['src/database/database.spec', 'src/record/', 'src/session/', 'src/fits/', 'src/orders/', 'src/specimens/', 'src/readings/'];

interface Report { numPassedTests: number; numFailedTests: number; numRuntimeErrorTestSuites: number; numPassedTestSuites: number; numPendingTests: number }

async function backendTests(databaseUrl: string): Promise<{ report: Report; output: string }> {
  const folder = mkdtempSync(join(tmpdir(), 'strainwright-report-'));
  const file = join(folder, 'report.json');
  const args = [join(root, 'node_modules', 'jest', 'bin', 'jest.js'), '--config', join(__dirname, 'jest.config.mjs'), '--ci', '--maxWorkers=2', '--testTimeout=60000', '--json', `--outputFile=${file}`, ...TESTS];
  const child = spawn(process.execPath, args, {
    cwd: root, stdio: ['ignore', 'ignore', 'pipe'],
    env: { ...process.env, NODE_OPTIONS: '--experimental-vm-modules --no-warnings', STRAINWRIGHT_TEST_DATABASE_URL: databaseUrl },
  });
  let output = '';
  child.stderr.on('data', (chunk: Buffer) => (output += chunk.toString()));
  await new Promise((resolve) => child.once('exit', resolve));
  const report = JSON.parse(readFileSync(file, 'utf8')) as Report;
  rmSync(folder, { recursive: true, force: true });
  return { report, output };
}

const available = postgresPrograms() !== undefined;
if (!available) console.error('!!! SKIPPED: there is no PostgreSQL server on this machine (Debian package postgresql). The data layer was tested on the embedded database only.');

(available ? describe : describe.skip)('on a PostgreSQL server', () => {
  let postgres: Postgres;
  beforeAll(async () => {
    postgres = await startPostgres();
  }, 60_000);
  afterAll(() => postgres.stop());

  it('the data layer’s own tests pass', async () => {
    const { report, output } = await backendTests(postgres.url);
    const failed = report.numFailedTests + report.numRuntimeErrorTestSuites;
    expect(failed === 0 ? '' : output).toBe('');
    expect(report.numPassedTestSuites).toBeGreaterThanOrEqual(TESTS.length);
    expect(report.numPassedTests).toBeGreaterThan(50);
    expect(report.numPendingTests).toBe(0);
  }, 300_000);
});
