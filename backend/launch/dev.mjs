// `npm run dev`: compiles and restarts the server when its sources change, and serves the client through Vite, which reloads by itself.
import { spawn } from 'node:child_process';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { buildWhatChanged, installPackages, root } from './prepare.mjs';

installPackages();
buildWhatChanged(['common', 'backend']);

/** The program of a package, as the workspace finds it: run by Node itself, so that stopping it stops it. */
const program = (workspace, name, file) => join(dirname(createRequire(join(root, workspace, 'package.json')).resolve(`${name}/package.json`)), file);
const compile = (workspace) => ({
  cwd: workspace,
  args: [program(workspace, '@swc/cli', 'bin/swc.js'), 'src', '--out-dir', 'dist', '--strip-leading-paths', '--config-file', '../.swcrc', '--ignore', '**/*.spec.ts', '--watch', '--quiet'],
});
const programs = [
  compile('common'),
  compile('backend'),
  { cwd: 'backend', args: ['--watch', '--watch-preserve-output', '--enable-source-maps', 'dist/main.js'] },
  { cwd: 'frontend', args: [program('frontend', 'vite', 'bin/vite.js')] },
];
const children = programs.map(({ cwd, args }) => spawn(process.execPath, args, { cwd: join(root, cwd), stdio: 'inherit' }));

function stop() {
  for (const child of children) if (child.exitCode === null) child.kill('SIGTERM');
}
process.on('SIGTERM', stop);
process.on('SIGINT', () => {});
for (const child of children) child.once('exit', stop);
