// What start and dev share: packages as the lock file says, and a build as the sources are. Needs nothing but Node.js and npm.
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

export const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));

/** In the order of their dependencies; a change of `common` builds the client anew, into which it is bundled. */
const WORKSPACES = [
  { name: 'common', sources: ['common/src'], product: 'common/dist' },
  { name: 'backend', sources: ['backend/src'], product: 'backend/dist/main.js' },
  { name: 'frontend', sources: ['frontend/src', 'frontend/index.html', 'frontend/vite.config.ts', 'frontend/public', 'common/src'], product: 'frontend/dist/index.html' },
];

const npm = process.platform === 'win32' ? 'npm.cmd' : 'npm';

function run(title, args) {
  console.log(`${title} …`);
  const { status } = spawnSync(npm, args, { cwd: root, stdio: ['ignore', 'inherit', 'inherit'], shell: process.platform === 'win32' });
  if (status !== 0) {
    console.error(`\n${title} failed: npm ${args.join(' ')}`);
    process.exit(1);
  }
}

/** True when every package that the lock file names for all machines is there in that version. */
function packagesAreThere() {
  const present = join(root, 'node_modules', '.package-lock.json');
  if (!existsSync(present)) return false;
  const { packages: wanted } = JSON.parse(readFileSync(join(root, 'package-lock.json'), 'utf8'));
  const { packages: there } = JSON.parse(readFileSync(present, 'utf8'));
  return Object.entries(wanted).every(([path, { version, optional, devOptional, link }]) => !path.includes('node_modules/') || optional || devOptional || link || there[path]?.version === version);
}

export function installPackages() {
  if (packagesAreThere()) return;
  run('Installing packages', ['ci', '--no-audit', '--no-fund', '--loglevel=error']);
}

function* filesUnder(path) {
  const full = join(root, path);
  if (!existsSync(full)) return;
  if (/\.[a-z]+$/.test(path) && !path.endsWith('/')) {
    yield path;
    return;
  }
  for (const entry of readdirSync(full, { withFileTypes: true, recursive: true })) {
    const name = join(entry.parentPath ?? entry.path, entry.name);
    if (entry.isFile() && !/\.spec\.tsx?$/.test(name)) yield name.slice(root.length + 1);
  }
}

/** SHA-256 over the names and contents of everything that a build is made from. */
function fingerprint({ name, sources }) {
  const hash = createHash('sha256');
  const files = [...sources, '.swcrc', 'package-lock.json', `${name}/package.json`].flatMap((path) => [...filesUnder(path)]);
  if (existsSync(join(root, '.swcrc'))) files.push('.swcrc');
  for (const file of [...new Set(files)].sort()) hash.update(`${file}\0`).update(readFileSync(join(root, file))).update('\0');
  return hash.digest('hex');
}

export function buildWhatChanged(only = WORKSPACES.map((w) => w.name)) {
  const cache = join(root, 'node_modules', '.cache', 'strainwright');
  mkdirSync(cache, { recursive: true });
  for (const workspace of WORKSPACES.filter((w) => only.includes(w.name))) {
    const mark = join(cache, `built-${workspace.name}`);
    const now = fingerprint(workspace);
    const built = existsSync(mark) ? readFileSync(mark, 'utf8') : '';
    if (built === now && existsSync(join(root, workspace.product))) continue;
    if (workspace.name !== 'frontend') rmSync(join(root, workspace.name, 'dist'), { recursive: true, force: true });
    run(`Building ${workspace.name}`, ['run', '--silent', 'build', '-w', workspace.name]);
    writeFileSync(mark, now);
  }
}
