// Loaded into the server by the benchmark: tells the longest pause of its event loop since the last time it was asked (SIGUSR2).
import { writeSync } from 'node:fs';
import { monitorEventLoopDelay } from 'node:perf_hooks';
import { isMainThread } from 'node:worker_threads';

const RESOLUTION_MS = 2;

if (isMainThread) {
  const delay = monitorEventLoopDelay({ resolution: RESOLUTION_MS });
  delay.enable();
  process.on('SIGUSR2', () => {
    writeSync(1, `loop-probe ${JSON.stringify({ longest: Math.max(0, delay.max / 1e6 - RESOLUTION_MS) })}\n`);
    delay.reset();
  });
}
