// `npm run dev`: compiles and restarts the server when its sources change, and serves the client through Vite, which reloads by itself.
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { buildWhatChanged, installPackages, root } from './prepare.mjs';

installPackages();
buildWhatChanged(['common', 'backend']);

const bin = (name) => join(root, 'node_modules', '.bin', process.platform === 'win32' ? `${name}.cmd` : name);
const swc = ['src', '--out-dir', 'dist', '--strip-leading-paths', '--config-file', '../.swcrc', '--ignore', '**/*.spec.ts', '--watch', '--quiet'];
const programs = [
  { command: bin('swc'), args: swc, cwd: join(root, 'common') },
  { command: bin('swc'), args: swc, cwd: join(root, 'backend') },
  { command: process.execPath, args: ['--watch', '--watch-preserve-output', '--enable-source-maps', 'dist/main.js'], cwd: join(root, 'backend') },
  { command: bin('vite'), args: [], cwd: join(root, 'frontend') },
];
const children = programs.map(({ command, args, cwd }) => spawn(command, args, { cwd, stdio: 'inherit', shell: process.platform === 'win32' }));

function stop() {
  for (const child of children) if (child.exitCode === null) child.kill('SIGTERM');
}
process.on('SIGTERM', stop);
process.on('SIGINT', () => {});
for (const child of children) child.once('exit', stop);
