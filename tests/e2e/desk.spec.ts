import type { Browser, Page } from '@playwright/test';
import { generateSync } from 'otplib';
import { DEMO_PASSWORD, DEMO_SECOND_FACTOR } from '../../db/story/demo-accounts.ts';
import { another, expect, expectAccessible, origin, test } from './support/check.ts';
import { pageFiles, seeEveryPage } from './support/every-page.ts';
import { openAccount } from './support/people.ts';

test.describe.configure({ mode: 'serial', timeout: 240_000 });

const mark = Date.now().toString(36);
let session: Awaited<ReturnType<ReturnType<Page['context']>['storageState']>>;
let listing = '';

/** A window of the moderator who signed in at the beginning: a code of the second factor works only once. */
async function asModerator(browser: Browser): Promise<Page> {
  const context = await browser.newContext({ baseURL: origin(), storageState: session, viewport: { width: 1280, height: 900 } });
  return context.newPage();
}
const looksRight = async (page: Page): Promise<void> => {
  await expectAccessible(page);
  expect(await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)).toBeLessThanOrEqual(0);
};

test('a person reports a listing and blocks its owner, and takes the block back', async ({ page }) => {
  await openAccount(page, { name: `Rhea Report ${mark}`, email: `rhea-${mark}@desk.example`, as: 'landowner' });
  await page.goto('/logs?zip=54665&radiusMi=40');
  await page.getByRole('region', { name: 'Listings' }).getByRole('listitem').first().getByRole('link').first().click();
  listing = new URL(page.url()).pathname;
  await page.getByRole('link', { name: 'Report this listing' }).click();
  await page.getByRole('button', { name: 'Report', exact: true }).click();
  await expect(page.getByRole('alert')).toContainText('Choose what is wrong.');
  await page.getByLabel('The tree or the photographs are not theirs').check();
  await page.getByLabel('Anything a moderator should know').fill(`These are my photographs. (${mark})`);
  await looksRight(page);
  await page.getByRole('button', { name: 'Report', exact: true }).click();
  await expect(page.getByText('A moderator will look at it')).toBeVisible();
  await page.getByRole('button', { name: /^Block / }).click();
  await expect(page.getByText('is blocked')).toBeVisible();
  await page.goto('/account');
  await looksRight(page);
  await page.getByRole('button', { name: /^Unblock / }).click();
  await expect(page.getByText('You can deal with this person again')).toBeVisible();
});

test('a moderator signs in with a code, hides the reported listing and closes the report', async ({ page, browser }) => {
  await page.goto('/sign-in?next=/desk');
  await page.getByLabel('E-mail address').fill('mo@skidway.example');
  await page.getByLabel('Password').fill(DEMO_PASSWORD);
  await page.locator('main').getByRole('button', { name: 'Sign in' }).click();
  await page.getByLabel('Code').fill(generateSync({ secret: DEMO_SECOND_FACTOR }));
  await page.locator('main').getByRole('button', { name: 'Sign in' }).click();
  await expect(page.getByRole('heading', { level: 1, name: 'What waits' })).toBeVisible();
  session = await page.context().storageState();
  await looksRight(page);

  await page.getByRole('link', { name: 'Read the reports' }).click();
  await looksRight(page);
  await page.getByRole('row').filter({ hasText: `Rhea Report ${mark}` }).getByRole('link').first().click();
  await expect(page.getByText(`These are my photographs. (${mark})`)).toBeVisible();
  await looksRight(page);
  const report = page.url();
  await page.getByRole('link', { name: /^Listing \d+/ }).click();
  await page.getByRole('button', { name: 'Hide the listing' }).click();
  await expect(page.getByRole('alert')).toContainText('the person concerned reads it');
  await page.getByLabel('Hide it because').fill('The photographs belong to someone else.');
  await page.getByRole('button', { name: 'Hide the listing' }).click();
  await expect(page.getByRole('status')).toContainText('Hidden');
  await looksRight(page);

  const visitor = await another(browser);
  expect((await visitor.page.goto(listing))?.status()).toBe(404);
  await page.getByRole('button', { name: 'Show it again' }).click();
  await expect(page.getByRole('status')).toContainText('On show again');
  expect((await visitor.page.goto(listing))?.status()).toBe(200);
  expect(visitor.faults).toEqual([]);

  await page.goto(report);
  await page.getByLabel('What came of it').fill('Hidden until the owner sent the first photographs.');
  await page.getByRole('button', { name: 'Close the report' }).click();
  await expect(page.getByRole('row').filter({ hasText: `Rhea Report ${mark}` })).toHaveCount(0);
});

test('a moderator decides a queried tally line by line', async ({ browser }) => {
  const page = await asModerator(browser);
  await page.goto('/desk');
  await page.getByRole('link', { name: /^Decide: / }).first().click();
  await looksRight(page);
  await page.getByRole('button', { name: 'Decide and sign the tally' }).click();
  await expect(page.getByRole('alert')).toContainText('Decide this line.');
  for (const group of await page.getByRole('radiogroup', { name: 'Decision' }).all()) await group.getByLabel('It stands').check();
  for (const reason of await page.getByRole('textbox', { name: 'Reason' }).all()) await reason.fill('The count on the photographs agrees with the tally.');
  await page.getByRole('button', { name: 'Decide and sign the tally' }).click();
  await expect(page).toHaveURL(/\/bookings\/\d+\/sign$/);
  await expect(page.getByRole('button', { name: 'Decide and sign the tally' })).toHaveCount(0);
  await page.context().close();
});

test('a moderator suspends an account and restores it; both stand in the audit log', async ({ page, browser }) => {
  const email = `gus-${mark}@desk.example`;
  await openAccount(page, { name: `Gus Gone ${mark}`, email, as: 'landowner' });
  const desk = await asModerator(browser);
  await desk.goto('/desk/accounts');
  await desk.getByLabel('Search').fill(email);
  await desk.getByRole('button', { name: 'Show', exact: true }).click();
  await looksRight(desk);
  await desk.getByRole('link', { name: `Gus Gone ${mark}` }).click();
  await desk.getByLabel('Suspend it because').fill('Asked sawyers for cash.');
  await desk.getByRole('button', { name: 'Suspend the account' }).click();
  await expect(desk.getByRole('status')).toContainText('Suspended');
  await looksRight(desk);
  await page.goto('/account');
  await expect(page.getByText('This account is suspended')).toBeVisible();
  await expect(page.getByText('Asked sawyers for cash.')).toBeVisible();

  await desk.getByLabel('Restore it because').fill('A mistake: another account was meant.');
  await desk.getByRole('button', { name: 'Restore the account' }).click();
  await expect(desk.getByRole('status')).toContainText('Restored');
  await page.goto('/account');
  await expect(page.getByText('This account is suspended')).toHaveCount(0);

  await desk.goto('/desk/events');
  await desk.getByLabel('Show', { exact: true }).selectOption('moderators');
  await desk.getByRole('button', { name: 'Show', exact: true }).click();
  await expect(desk.getByRole('row').filter({ hasText: `Gus Gone ${mark}` }).filter({ hasText: 'suspended' }).first()).toBeVisible();
  await looksRight(desk);
  await desk.context().close();
});

test('a view of an exact place is asked for, and recorded', async ({ browser }) => {
  const page = await asModerator(browser);
  await page.goto(listing);
  await page.getByRole('button', { name: 'Show the exact place (recorded)' }).click();
  await expect(page.getByText('That you looked has been recorded.')).toBeVisible();
  await page.goto('/desk/events?kind=places');
  await expect(page.getByRole('row').nth(1)).toContainText('saw the exact place');
  await expect(page.getByRole('row').nth(1)).toContainText(listing.split('/').at(-1) ?? '');
  await page.context().close();
});

test('the desk is closed to everybody else', async ({ page }) => {
  await openAccount(page, { name: 'Nell Nosy', email: `nell-${mark}@desk.example`, as: 'sawyer' });
  for (const path of ['/desk', '/desk/accounts', '/desk/events']) expect((await page.goto(path))?.status()).toBe(403);
  await expect(page.getByRole('heading', { level: 1, name: 'This is not yours to do' })).toBeVisible();
});

test('every room of the desk fits 320 px and has no fault that axe finds', async ({ browser }) => {
  const page = await asModerator(browser);
  const seen = new Set(pageFiles.filter((file) => !file.startsWith('desk/')));
  await seeEveryPage(page, seen, '/desk');
  expect(pageFiles.filter((file) => !seen.has(file))).toEqual([]);
  await page.context().close();
});
