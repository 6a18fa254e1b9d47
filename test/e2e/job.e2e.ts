/** The whole job on the screens: from a customer's order to a verified certificate, five people signed in, one test a kind of run. */
import { join } from 'node:path';
import { expect, test } from '@playwright/test';
import { recordText } from '../faults/record-text';
import { at } from './people';
import { accept, choose, confirmLayouts, enterReadings, expectTruth, fetchAndVerify, fitAndSubmit, logSpecimen, release, requestTest } from './steps';

const sample = (name: string) => join(__dirname, '..', '..', 'samples', name);

test('a pulse run, from waveforms of the samples', async ({ browser, page }) => {
  test.setTimeout(240_000);
  const customer = await at(browser, 'customer');
  const orderId = await requestTest(customer, 'Glass plate, dynamic constants', 'Pulse (dynamic)');

  const technician = await at(browser, 'technician');
  await logSpecimen(technician, orderId, 'optical glass', 'glass', 'plate');
  await enterReadings(technician, { 'Length (along the test axis)': ['29.99', '30.00', '30.01'], Width: ['59.99', '60.00', '60.01'], Thickness: ['59.99', '60.00', '60.01'], Mass: ['271.404'] });
  await technician.getByRole('link', { name: 'Record a run' }).click();
  await choose(technician, 'Method', /\(pulse\)/);
  await choose(technician, 'Pulse unit', /./);
  await technician.getByLabel('Frequency, kHz').fill('2000');
  for (const [wave, zero] of [['P', '0.349\n0.350\n0.351'], ['S', '0.519\n0.520\n0.521']] as const) {
    await technician.getByLabel(`Zero readings ${wave}, µs`).fill(zero);
    await technician.getByLabel(`Choose waveform ${wave}`).setInputFiles(sample(`glass-${wave.toLowerCase()}.csv`));
  }
  await technician.getByRole('button', { name: 'Record the run' }).click();
  await technician.waitForURL(/\/runs\//);
  await confirmLayouts(technician);

  const analyst = await at(browser, 'analyst');
  await fitAndSubmit(analyst, technician.url(), 'dynamic');
  await accept(await at(browser, 'reviewer'), analyst.url());
  const document = await release(await at(browser, 'qualityManager'), orderId);
  expectTruth(document, { E: 81.7e9, nu: 0.207 });
  await fetchAndVerify(customer, page, orderId, document);
});

test('a stress–strain run of 200 000 rows', async ({ browser, page }) => {
  test.setTimeout(300_000);
  const customer = await at(browser, 'customer');
  const orderId = await requestTest(customer, 'Aluminium rod, static constants', 'Stress–strain (static)');

  const technician = await at(browser, 'technician');
  await logSpecimen(technician, orderId, 'aluminium alloy', 'metal', 'cylinder');
  await enterReadings(technician, { 'Length (along the test axis)': ['99.99', '100.00', '100.01'], Diameter: ['19.99', '20.00', '20.01'] });
  await technician.getByRole('link', { name: 'Record a run' }).click();
  await choose(technician, 'Method', /\(stress-strain\)/);
  await choose(technician, 'Force measured by', /^[^–]/);
  await choose(technician, 'Axial strain measured by', /^[^–]/);
  await choose(technician, 'Transverse strain measured by', /^[^–]/);
  await technician.getByLabel('The specimen is compressed').uncheck();
  await technician.getByLabel('Choose the record').setInputFiles({ name: 'rod.csv', mimeType: 'text/csv', buffer: Buffer.from(recordText(200_000)) });
  await technician.getByRole('button', { name: 'Record the run' }).click();
  await technician.waitForURL(/\/runs\//, { timeout: 60_000 });
  await expect(technician.getByText('200,000 rows').first()).toBeVisible();
  await expect(technician.getByRole('img', { name: /Raw record\. 200,000 rows/ })).toBeVisible({ timeout: 30_000 });
  await confirmLayouts(technician);

  const analyst = await at(browser, 'analyst');
  await fitAndSubmit(analyst, technician.url(), 'static');
  await accept(await at(browser, 'reviewer'), analyst.url());
  const document = await release(await at(browser, 'qualityManager'), orderId);
  expectTruth(document, { E: 70e9, nu: 0.33 });
  await fetchAndVerify(customer, page, orderId, document);
});
