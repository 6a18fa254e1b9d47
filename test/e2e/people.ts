/** The demo's people at the browser, each in a context of their own. */
import type { Browser, Page } from '@playwright/test';

export const PASSWORD = 'nine quiet pebbles';
export const PEOPLE = {
  administrator: 'admin@corriebank.example', technician: 'technician@corriebank.example', analyst: 'analyst@corriebank.example', reviewer: 'reviewer@corriebank.example',
  qualityManager: 'quality@corriebank.example', customer: 'nora@harbeck.example',
} as const;
export type Person = keyof typeof PEOPLE;

/** Signs in as a person does. */
export async function signIn(page: Page, person: Person): Promise<void> {
  await page.goto('/sign-in');
  await page.getByLabel('E-mail').fill(PEOPLE[person]);
  await page.getByLabel('Password').fill(PASSWORD);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.getByRole('navigation', { name: 'Main' }).waitFor();
}

export async function at(browser: Browser, person: Person): Promise<Page> {
  const page = await (await browser.newContext({ acceptDownloads: true })).newPage();
  await signIn(page, person);
  return page;
}
