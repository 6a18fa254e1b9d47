import { defineConfig } from '@playwright/test';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

const port = Number(process.env.E2E_PORT ?? 4399);
const data = process.env.E2E_DATA ?? mkdtempSync(join(tmpdir(), 'strainwright-e2e-'));
process.env.E2E_DATA = data;

export default defineConfig({
  testDir: '.',
  testMatch: '**/*.e2e.ts',
  workers: 1,
  timeout: 120_000,
  expect: { timeout: 15_000 },
  outputDir: join(data, 'test-results'),
  use: {
    baseURL: `http://127.0.0.1:${port}`,
    viewport: { width: 1280, height: 800 },
    trace: 'retain-on-failure',
    launchOptions: {
      executablePath: '/usr/bin/chromium',
      args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'],
    },
  },
  webServer: {
    command: 'node backend/dist/main.js',
    cwd: join(__dirname, '..', '..'),
    url: `http://127.0.0.1:${port}/api/health`,
    timeout: 90_000,
    env: { PORT: String(port), STRAINWRIGHT_DATA: join(data, 'data'), STRAINWRIGHT_DEMO: 'on', LOG_LEVEL: 'warn' },
  },
});
