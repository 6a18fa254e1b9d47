// `npm start`: installs and builds what is missing or out of date, then starts the program. With DATABASE_URL, which leaves fits to
// workers of their own, one worker is started beside it.
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { buildWhatChanged, installPackages, root } from './prepare.mjs';

installPackages();
buildWhatChanged();

const children = [];
let stopping = false;

function start(entry) {
  const child = spawn(process.execPath, ['--enable-source-maps', join(root, 'backend', 'dist', entry)], { cwd: root, stdio: 'inherit', env: { NODE_ENV: 'production', ...process.env } });
  children.push(child);
  child.once('exit', (code, signal) => {
    if (!stopping) stop('SIGTERM');
    process.exitCode ||= code ?? (signal === null || stopping ? 0 : 1);
  });
}

function stop(signal) {
  stopping = true;
  for (const child of children) if (child.exitCode === null) child.kill(signal);
}

start('main.js');
if (process.env.DATABASE_URL) start('worker.js');
// Ctrl+C reaches the children by themselves; a signal sent to this process alone does not.
process.on('SIGTERM', () => stop('SIGTERM'));
process.on('SIGINT', () => {
  stopping = true;
});
