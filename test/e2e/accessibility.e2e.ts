/** axe finds nothing on any page, in either theme. */
import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Page } from '@playwright/test';
import { signIn, type Person } from './people';

const LISTS: Readonly<Record<Exclude<Person, never>, readonly string[]>> = {
  technician: ['/worklist', '/orders', '/specimens', '/nowhere'],
  analyst: ['/worklist', '/determinations'],
  reviewer: ['/worklist', '/record'],
  qualityManager: ['/worklist', '/certificates', '/instruments', '/methods', '/reference-checks'],
  administrator: ['/people'],
  customer: ['/my-orders', '/request-a-test', '/my-certificates'],
};
/** A list whose first row opens a page of its own. */
const OPENED: Partial<Record<Person, readonly string[]>> = {
  technician: ['/orders', '/specimens'], analyst: ['/determinations'], qualityManager: ['/certificates', '/instruments'], customer: ['/my-orders'],
};

async function check(page: Page, what: string): Promise<void> {
  await expect(page.getByRole('main')).toBeVisible();
  await expect(page.getByRole('status', { name: 'Loading' })).toHaveCount(0, { timeout: 20_000 });
  const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']).analyze();
  expect(violations.map((v) => `${what}: ${v.id}, ${v.nodes.map((n) => n.target.join(' ')).slice(0, 3).join(' | ')}`)).toEqual([]);
}

for (const colorScheme of ['light', 'dark'] as const) {
  test.describe(`in ${colorScheme} colours`, () => {
    test.use({ colorScheme });

    test('pages without sign-in', async ({ page }) => {
      for (const path of ['/sign-in', '/verify']) {
        await page.goto(path);
        await check(page, path);
      }
    });

    for (const person of Object.keys(LISTS) as Person[]) {
      test(`pages of the ${person}`, async ({ page }) => {
        await signIn(page, person);
        for (const path of LISTS[person]) {
          await page.goto(path);
          await check(page, path);
        }
        for (const path of OPENED[person] ?? []) {
          await page.goto(path);
          await page.locator('.MuiDataGrid-row[data-id]').first().click();
          await page.waitForURL((url) => url.pathname !== path);
          await check(page, page.url());
        }
      });
    }

    test('a review', async ({ page }) => {
      await signIn(page, 'reviewer');
      await page.goto('/determinations?state=submitted');
      await page.locator('.MuiDataGrid-row[data-id]').first().click();
      await page.waitForURL(/\/reviews\//);
      await page.getByRole('region', { name: 'Uncertainty budget' }).first().waitFor();
      await check(page, 'review');
    });

    test('a specimen’s run, and recording another', async ({ page }) => {
      await signIn(page, 'analyst');
      await page.goto('/specimens?sort=createdAt');
      await page.locator('.MuiDataGrid-row[data-id]').first().click();
      await page.waitForURL(/\/specimens\//);
      const specimen = page.url();
      await page.getByRole('region', { name: 'Runs' }).last().getByRole('link').first().click();
      await page.waitForURL(/\/runs\//);
      await check(page, 'run');
      await page.goto(`${specimen}/record-run`);
      await check(page, 'record-run');
      await page.goto(`${specimen}/label`);
      await check(page, 'label');
    });
  });
}
