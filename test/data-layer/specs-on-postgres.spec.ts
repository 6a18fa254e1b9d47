/** Every test of the data layer again, on a PostgreSQL server of Debian's package. */
import { spawn } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, readdirSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, relative } from 'node:path';
import { postgresPrograms, startPostgres, type Postgres } from '../services/postgres';

const root = join(__dirname, '..', '..');

/** The backend's specs that open a database; the demo's plays whole weeks and tells nothing more about the database. */
const specs = readdirSync(join(root, 'backend', 'src'), { recursive: true, encoding: 'utf8' })
  .filter((name) => name.endsWith('.spec.ts') && !name.startsWith('demo'))
  .map((name) => join(root, 'backend', 'src', name))
  .filter((path) => /from '\.[^']*\/(testing\/(app|laboratory|finished-work)|testing)'/.test(readFileSync(path, 'utf8')))
  .map((path) => relative(root, path))
  .sort();

interface FileResult {
  name: string;
  message: string;
  assertionResults: { status: string }[];
}

/** Debian's server is looked for, not asked for: `npm test` says loudly when it is missing, and counts these as skipped. */
const installed = postgresPrograms() !== undefined;

(installed ? describe : describe.skip)('the data layer on a PostgreSQL server', () => {
  let postgres: Postgres;
  let results: FileResult[];

  beforeAll(async () => {
    postgres = await startPostgres();
    const report = join(mkdtempSync(join(tmpdir(), 'strainwright-report-')), 'jest.json');
    const args = ['jest', '--ci', '--silent', '--selectProjects', 'backend', '--maxWorkers=2', '--json', `--outputFile=${report}`, '--testTimeout=30000', '--runTestsByPath', ...specs];
    const child = spawn('npx', args, { cwd: root, stdio: ['ignore', 'ignore', 'pipe'], env: { ...process.env, STRAINWRIGHT_TEST_DATABASE_URL: postgres.url, NODE_OPTIONS: '--experimental-vm-modules --no-warnings' } });
    let printed = '';
    child.stderr.on('data', (chunk: Buffer) => (printed += chunk.toString()));
    await new Promise((resolve) => child.once('exit', resolve));
    if (!existsSync(report)) throw new Error(`The specs did not run:\n${printed}`);
    results = (JSON.parse(readFileSync(report, 'utf8')) as { testResults: FileResult[] }).testResults;
  }, 900_000);
  afterAll(() => postgres.stop());

  it.each(specs)('%s', (spec) => {
    const result = results.find((r) => relative(root, r.name) === spec);
    const failed = result?.assertionResults.filter((a) => a.status === 'failed').length;
    expect({ spec, failed, message: result?.message }).toEqual({ spec, failed: 0, message: '' });
    expect(result?.assertionResults.length).toBeGreaterThan(0);
  });
});
