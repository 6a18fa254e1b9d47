/** The steps of the job, as people do them on the screens. */
import { readFileSync } from 'node:fs';
import { expect, type Page } from '@playwright/test';
import { certificateDocument, type CertificateDocument } from '@strainwright/common/contract/certificates';
import { PASSWORD } from './people';

/** Chooses in one of MUI's select fields. */
export async function choose(page: Page, label: string | RegExp, option: string | RegExp): Promise<void> {
  await page.getByRole('combobox', { name: label }).click();
  await page.getByRole('option', { name: option }).first().click();
}

/** @returns the order's id */
export async function requestTest(customer: Page, title: string, kind: 'Pulse (dynamic)' | 'Stress–strain (static)'): Promise<string> {
  await customer.goto('/request-a-test');
  await customer.getByLabel('What is to be tested').fill(title);
  await customer.getByLabel('Material, as you know it').fill('As delivered, no coating');
  if (kind === 'Stress–strain (static)') {
    await customer.getByRole('combobox', { name: 'Kinds of test' }).click();
    await customer.getByRole('option', { name: 'Pulse (dynamic)' }).click();
    await customer.getByRole('option', { name: kind }).click();
    await customer.keyboard.press('Escape');
  }
  await customer.getByRole('button', { name: 'Request the test' }).click();
  await customer.waitForURL(/\/my-orders\/[0-9a-f-]{36}/);
  return customer.url().split('/').pop() ?? '';
}

/** Opens the order and logs one specimen. Ends on the specimen's page. */
export async function logSpecimen(technician: Page, orderId: string, material: string, materialClass: string, shape: string): Promise<void> {
  await technician.goto(`/orders/${orderId}`);
  await technician.getByRole('button', { name: 'Open the order' }).click();
  await technician.getByRole('button', { name: 'Log a sample' }).click();
  await technician.getByRole('textbox', { name: 'Material' }).fill(material);
  await choose(technician, 'Class', materialClass);
  await technician.getByRole('button', { name: 'Log the sample' }).click();
  await choose(technician, 'Shape', shape);
  await technician.getByRole('button', { name: 'Log the specimens' }).click();
  await technician.getByRole('link', { name: 'S1-01' }).click();
  await technician.getByRole('form', { name: 'Enter readings' }).waitFor();
}

/** Types readings by station: `Length (along the test axis)` and so on; a column is pasted from a spreadsheet. */
export async function enterReadings(technician: Page, columns: Readonly<Record<string, readonly string[]>>): Promise<void> {
  for (const [name, values] of Object.entries(columns)) {
    const first = technician.getByRole('textbox', { name: `${name}, station 1` });
    if (values.length === 1) await first.fill(values[0] ?? '');
    else {
      await first.evaluate((element, text) => {
        const data = new DataTransfer();
        data.setData('text', text);
        element.dispatchEvent(new ClipboardEvent('paste', { clipboardData: data, bubbles: true, cancelable: true }));
      }, values.join('\n'));
    }
  }
  await technician.getByRole('button', { name: 'Enter the readings' }).click();
  await expect(technician.getByRole('region', { name: 'Statistics' })).toBeVisible();
}

/** A person looks at each proposed layout and confirms it. */
export async function confirmLayouts(technician: Page): Promise<void> {
  const confirm = technician.getByRole('button', { name: 'Confirm the layout' });
  await confirm.first().waitFor();
  for (let left = await confirm.count(); left > 0; left -= 1) {
    await confirm.first().click();
    await expect(confirm).toHaveCount(left - 1, { timeout: 30_000 });
  }
}

/** Fits with the settings proposed, adopts, composes and submits; every warning gets a reason. Ends on the determination's page. */
export async function fitAndSubmit(analyst: Page, runUrl: string, basis: 'static' | 'dynamic'): Promise<void> {
  await analyst.goto(runUrl);
  await analyst.getByRole('button', { name: 'Fit', exact: true }).click();
  await analyst.getByRole('button', { name: 'Adopt fit 1' }).click({ timeout: 90_000 });
  await expect(analyst.getByText('Fit 1 is adopted for this run.')).toBeVisible();
  await analyst.getByRole('navigation', { name: 'Where you are' }).getByRole('link', { name: 'S1-01' }).click();
  await analyst.getByRole('button', { name: `Compose the ${basis} determination` }).click();
  await analyst.waitForURL(/\/determinations\//);
  await analyst.getByText('Uncertainty budget').waitFor();
  for (const field of await analyst.locator('input[data-reason]').all()) await field.fill('Known and judged: within the method');
  await analyst.getByRole('button', { name: 'Submit for review' }).click();
  await expect(analyst.getByText('submitted', { exact: true })).toBeVisible();
}

export async function accept(reviewer: Page, determinationUrl: string): Promise<void> {
  await reviewer.goto(determinationUrl.replace('/determinations/', '/reviews/'));
  await reviewer.getByRole('region', { name: 'Readings' }).first().waitFor();
  await reviewer.getByRole('button', { name: 'Accept' }).click();
  await expect(reviewer.getByText('accepted', { exact: true }).first()).toBeVisible();
}

/** Drafts and releases. @returns the signed data file */
export async function release(manager: Page, orderId: string): Promise<CertificateDocument> {
  await manager.goto(`/orders/${orderId}`);
  await manager.getByRole('button', { name: 'Draft a certificate' }).click();
  await manager.waitForURL(/\/certificates\//);
  await manager.getByRole('button', { name: 'Release' }).click();
  await manager.getByLabel('Your password').fill(PASSWORD);
  await manager.getByRole('dialog').getByRole('button', { name: 'Release' }).click();
  await expect(manager.getByText('released', { exact: true }).first()).toBeVisible({ timeout: 30_000 });
  return certificateDocument.parse(JSON.parse(readFileSync(await downloaded(manager, 'Data file'), 'utf8')));
}

/** Presses a download button. @returns the path of the file */
export async function downloaded(page: Page, button: string): Promise<string> {
  const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('button', { name: button }).first().click()]);
  return download.path();
}

export interface Truth { E: number; nu: number }

/** The certificate's constants agree with the truth within their stated expanded uncertainty. */
export function expectTruth(document: CertificateDocument, { E, nu }: Truth): void {
  const constants = document.snapshot.results[0]?.result.constants;
  const truth = { E, nu, G: E / (2 * (1 + nu)), K: E / (3 * (1 - 2 * nu)) };
  for (const name of ['E', 'nu', 'G', 'K'] as const) {
    const c = constants?.[name];
    expect(c, name).toBeTruthy();
    expect(Math.abs((c?.value ?? Number.NaN) - truth[name]), name).toBeLessThanOrEqual(c?.expandedUncertainty ?? 0);
  }
}

/** The customer finds the certificate, downloads both files, and verifies by code and by file without a sign-in. */
export async function fetchAndVerify(customer: Page, stranger: Page, orderId: string, document: CertificateDocument): Promise<void> {
  const { number, verification } = document.snapshot;
  await customer.goto(`/my-orders/${orderId}`);
  await expect(customer.getByRole('link', { name: number })).toBeVisible();
  const pdf = await downloaded(customer, 'PDF');
  expect(readFileSync(pdf).subarray(0, 5).toString()).toBe('%PDF-');
  const sheet = await downloaded(customer, 'Spreadsheet');
  expect(readFileSync(sheet).subarray(0, 2).toString()).toBe('PK');
  await stranger.goto('/verify');
  await stranger.getByLabel('Certificate number').fill(number);
  await stranger.getByLabel('Verification code').fill(verification.code);
  await stranger.getByRole('button', { name: 'Verify', exact: true }).click();
  await expect(stranger.getByText('genuine and current')).toBeVisible();
  await stranger.goto('/verify');
  await stranger.getByLabel('Choose the PDF, spreadsheet or data file').setInputFiles(pdf);
  await expect(stranger.getByText('genuine and current')).toBeVisible();
  await stranger.goto('/verify');
  await stranger.getByLabel('Choose the PDF, spreadsheet or data file').setInputFiles({ name: 'forged.pdf', mimeType: 'application/pdf', buffer: Buffer.concat([readFileSync(pdf), Buffer.from('\n')]) });
  await expect(stranger.getByText('not ours')).toBeVisible();
}
