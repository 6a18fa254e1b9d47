// Takes the README's pictures from the running program with its demo: npm run tour -w test (BASE names the address).
import { dirname } from 'node:path';
import { fileURLToPath } from 'node:url';
import { chromium } from '@playwright/test';

const base = process.env.BASE ?? 'http://127.0.0.1:4310';
const here = dirname(fileURLToPath(import.meta.url));
const browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking'] });

async function as(email, visit, options = {}) {
  const context = await browser.newContext({ viewport: { width: 1280, height: 860 }, ...options });
  const page = await context.newPage();
  await page.goto(`${base}/sign-in`);
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password').fill('nine quiet pebbles');
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.getByRole('navigation', { name: 'Main' }).waitFor();
  const picture = async (name) => {
    await page.waitForTimeout(800);
    await page.screenshot({ path: `${here}/${name}.png` });
  };
  await visit(page, picture);
  await context.close();
}

const firstRow = (page) => page.locator('.MuiDataGrid-row[data-id]').first();

await as('quality@corriebank.example', async (page, picture) => {
  await page.goto(`${base}/worklist`);
  await picture('worklist');
  await page.goto(`${base}/reference-checks`);
  await picture('reference-checks');
  await page.goto(`${base}/certificates?state=released`);
  await page.waitForTimeout(800);
  await firstRow(page).click();
  await page.waitForURL(/certificates\/./);
  await picture('certificate');
});
await as('technician@corriebank.example', async (page, picture) => {
  await page.goto(`${base}/specimens?sort=createdAt`);
  await page.waitForTimeout(800);
  await firstRow(page).click();
  await page.getByRole('region', { name: 'Runs', exact: true }).last().waitFor();
  await picture('specimen');
  await page.setViewportSize({ width: 390, height: 844 });
  await page.getByRole('button', { name: 'Enter readings' }).click();
  await page.getByRole('form', { name: 'Enter readings' }).scrollIntoViewIfNeeded();
  await picture('phone');
});
await as('analyst@corriebank.example', async (page, picture) => {
  await page.goto(`${base}/determinations?q=concrete`);
  await page.waitForTimeout(800);
  await firstRow(page).click();
  await page.waitForURL(/(determinations|reviews)\/./);
  await page.getByRole('navigation', { name: 'Where you are' }).getByRole('link').last().click();
  await page.getByRole('region', { name: 'Runs', exact: true }).last().getByRole('link').first().click();
  await page.waitForURL(/runs\//);
  await page.getByRole('img', { name: /Raw record/ }).waitFor();
  await page.getByRole('img', { name: /Raw record/ }).scrollIntoViewIfNeeded();
  await picture('run');
});
await as('reviewer@corriebank.example', async (page, picture) => {
  await page.goto(`${base}/determinations?state=submitted`);
  await page.waitForTimeout(800);
  await firstRow(page).click();
  await page.waitForURL(/reviews\/./);
  await page.getByRole('region', { name: 'Uncertainty budget' }).first().waitFor();
  await picture('review');
}, { colorScheme: 'dark' });
await as('nora@harbeck.example', async (page, picture) => {
  await page.goto(`${base}/my-orders`);
  await page.waitForTimeout(800);
  await firstRow(page).click();
  await page.waitForURL(/my-orders\/./);
  await picture('customer');
});
await browser.close();
