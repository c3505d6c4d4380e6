import type { Page } from '@playwright/test';
import { another, expect, expectAccessible, test } from './support/check.ts';
import { chargesOf, expireSessions, makeJob } from './support/job.ts';
import { payByCard } from './support/pay.ts';
import { signIn } from './support/people.ts';

const DECLINED = '4000 0000 0000 0002';
const GOOD = '4242 4242 4242 4242';

const pay = (page: Page) => page.getByRole('button', { name: /^Pay \$.* by card$/ });

test('a double click, two tabs and going back charge a card once', async ({ browser }) => {
  const job = makeJob('agreed');
  const { page: first, faults } = await another(browser, { phone: true });
  await signIn(first, job.landowner, job.password, `/bookings/${job.number}/pay`);
  const second = await first.context().newPage();
  await second.goto(`/bookings/${job.number}/pay`);

  await pay(first).dblclick();
  await expect(first.getByText('Stand-in card page')).toBeVisible();
  await pay(second).click();
  await payByCard(first, DECLINED);
  await expect(first.getByRole('alert')).toContainText('declined');
  expect(await chargesOf(job.number)).toEqual([]);
  await payByCard(second, GOOD);
  await expect(second.getByRole('heading', { name: 'Your money is held' })).toBeVisible();
  const charges = await chargesOf(job.number);
  expect(charges).toHaveLength(1);

  // The tab left behind sends its card again, then goes back and presses once more.
  await payByCard(first, GOOD);
  await expect(first.getByRole('heading', { name: 'Already paid' })).toBeVisible();
  await first.getByRole('link', { name: 'Go on' }).click();
  await expect(first.getByRole('heading', { name: 'Your money is held' })).toBeVisible();
  await second.goBack();
  await second.goBack();
  await expect(second).toHaveURL(/\/pay$/);
  if (await pay(second).isVisible()) await pay(second).click();
  await expect(second.getByText('Nothing is due here now')).toBeVisible();
  await expectAccessible(second);
  expect(await chargesOf(job.number)).toEqual(charges);
  expect(faults).toEqual([]);
});

test('a session that ends before the card page, and again on it, loses no payment', async ({ page }) => {
  const job = makeJob('agreed');
  await signIn(page, job.landowner, job.password, `/bookings/${job.number}/pay`);
  expireSessions(job.landowner);
  await pay(page).click();
  await expect(page).toHaveURL(/sign-in/);
  await page.getByLabel('E-mail address').fill(job.landowner);
  await page.getByLabel('Password').fill(job.password);
  await page.locator('main').getByRole('button', { name: 'Sign in' }).click();
  await expect(page).toHaveURL(new RegExp(`/bookings/${job.number}/pay$`));
  await pay(page).click();
  await expect(page.getByText('Stand-in card page')).toBeVisible();
  expireSessions(job.landowner);
  await payByCard(page, GOOD);
  await expect(page).toHaveURL(/sign-in/);
  await page.getByLabel('E-mail address').fill(job.landowner);
  await page.getByLabel('Password').fill(job.password);
  await page.locator('main').getByRole('button', { name: 'Sign in' }).click();
  await expect(page.getByRole('heading', { name: 'Your money is held' })).toBeVisible();
  expect(await chargesOf(job.number)).toHaveLength(1);

  // Both sides read where the money is, and the landowner's payments name it.
  await page.goto('/account/payments');
  await expect(page.locator('main')).toContainText('Held');
  await expectAccessible(page);
});

test('what a sawyer is paid stands on the page of payouts, by month, as chart and table', async ({ page }) => {
  await signIn(page, 'bram@skidway.example', 'boards-in-hand', '/account/payouts');
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Payouts');
  await expect(page.getByRole('table', { name: 'Pay, job by job' }).getByRole('row')).not.toHaveCount(1);
  await expectAccessible(page);
  const [statement] = await Promise.all([page.request.get(await page.getByRole('link', { name: /PDF/ }).first().getAttribute('href') ?? '')]);
  expect(statement.headers()['content-type']).toBe('application/pdf');
  expect((await statement.body()).subarray(0, 5).toString()).toBe('%PDF-');
});
