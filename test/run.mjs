// `npm test`: installs what it needs, runs every runner, and ends with one line for all of them together.
import { spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = dirname(dirname(fileURLToPath(import.meta.url)));
const scratch = mkdtempSync(join(tmpdir(), 'strainwright-test-'));
const total = { passed: 0, failed: 0, skipped: 0 };
const isRoot = process.getuid?.() === 0;

/** Debian packages that tests use when they are there; without them the run says so loudly and counts their tests as skipped. */
const PACKAGES = [
  { name: 'chromium', there: () => existsSync('/usr/bin/chromium'), need: 'the browser tests', required: true },
  { name: 'postgresql', there: () => existsSync('/usr/lib/postgresql'), need: 'the tests on a PostgreSQL server', required: false },
  { name: 'redis-server', there: () => existsSync('/usr/bin/redis-server'), need: 'the queue tests on Redis', required: false },
];

function run(command, args, env = {}) {
  console.log(`\n$ ${command} ${args.join(' ')}`);
  const began = Date.now();
  const { status, error } = spawnSync(command, args, { cwd: root, stdio: 'inherit', env: { ...process.env, ...env } });
  console.log(`  (${((Date.now() - began) / 1000).toFixed(1)} s)`);
  return error === undefined && status === 0;
}

function check(title, ok) {
  total[ok ? 'passed' : 'failed'] += 1;
  if (!ok) console.error(`\nFAILED: ${title}`);
  return ok;
}

function finish() {
  console.log(`\n${total.passed} passed, ${total.failed} failed${total.skipped > 0 ? `, ${total.skipped} skipped` : ''}`);
  process.exit(total.failed === 0 ? 0 : 1);
}

function installPackages() {
  const missing = PACKAGES.filter((p) => !p.there());
  if (missing.length === 0) return true;
  const names = missing.map((p) => p.name);
  if (isRoot && existsSync('/usr/bin/apt-get')) {
    const quiet = { DEBIAN_FRONTEND: 'noninteractive' };
    run('apt-get', ['update', '-qq'], quiet);
    run('apt-get', ['install', '-y', '-qq', '--no-install-recommends', ...names], quiet);
  }
  for (const p of missing.filter((m) => !m.there())) {
    console.error(`\n!!! ${p.name} is not installed: ${p.need} cannot run. Install it with: sudo apt-get install ${p.name}`);
  }
  return missing.every((p) => p.there() || !p.required);
}

function readReport(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch {
    return null;
  }
}

function jest() {
  const file = join(scratch, 'jest.json');
  const options = `${process.env.NODE_OPTIONS ?? ''} --experimental-vm-modules --no-warnings`.trim();
  const ok = run('npx', ['jest', '--ci', '--silent', '--maxWorkers=2', '--json', `--outputFile=${file}`], { NODE_OPTIONS: options });
  const report = readReport(file);
  if (report === null) return check('jest ran', false);
  total.passed += report.numPassedTests;
  total.failed += report.numFailedTests + report.numRuntimeErrorTestSuites;
  total.skipped += report.numPendingTests;
  if (!ok && report.numFailedTests + report.numRuntimeErrorTestSuites === 0) check('jest ended well', false);
}

function playwright() {
  const file = join(scratch, 'playwright.json');
  const ok = run('npx', ['playwright', 'test', '--config', 'test/e2e/playwright.config.ts', '--reporter=list,json'], { PLAYWRIGHT_JSON_OUTPUT_NAME: file });
  const stats = readReport(file)?.stats;
  if (stats === undefined) return check('playwright ran', false);
  total.passed += stats.expected + stats.flaky;
  total.failed += stats.unexpected;
  total.skipped += stats.skipped;
  if (!ok && stats.unexpected === 0) check('playwright ended well', false);
}

if (!existsSync(join(root, 'node_modules', '.package-lock.json')) && !check('npm ci', run('npm', ['ci', '--no-audit', '--no-fund']))) finish();
const browser = installPackages();
check('types', run('npm', ['run', '--silent', 'typecheck']));
check('lint', run('npm', ['run', '--silent', 'lint']));
if (check('build', run('npm', ['run', '--silent', 'build']))) {
  jest();
  if (browser) playwright();
  else check('browser tests (no browser)', false);
}
finish();
