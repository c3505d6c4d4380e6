import { expect, expectAccessible, test } from './support/check.ts';
import { makeJob, type Job } from './support/job.ts';

let job: Job;
test.beforeAll(() => {
  job = makeJob();
});

test('both sides read the boards of a listing and its cut sheet; nobody else does', async ({ page }) => {
  await page.goto(`/bookings/${job.number}/cut-sheet`);
  await expect(page).toHaveURL(/sign-in/);
  await page.goto(`/sign-in?next=/bookings/${job.number}`);
  await page.getByLabel('E-mail').fill(job.landowner);
  await page.getByLabel('Password').fill(job.password);
  await page.locator('main').getByRole('button', { name: 'Sign in' }).click();
  await page.getByRole('link', { name: 'Cut sheet' }).click();
  await expect(page.getByRole('heading', { name: 'Cut sheet' })).toBeVisible();
  await expect(page.getByRole('heading', { name: 'Log 1' })).toBeVisible();
  await expect(page.getByText('Toe board under the small end').first()).toBeVisible();
  await expect(page.getByRole('table', { name: 'Cuts of Log 1 in order' }).getByRole('row')).not.toHaveCount(1);
  await expectAccessible(page);
  await page.setViewportSize({ width: 320, height: 800 });
  expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(320);
});

test('anyone sees the boards of an open listing drawn, on a mill of their choice, and scrubs along a log', async ({ page }) => {
  await page.goto('/logs');
  await page.locator('main a[href^="/listings/"]').first().click();
  await page.getByRole('link', { name: /See the boards in these logs/ }).click();
  await expect(page.getByRole('heading', { name: 'Boards in these logs' })).toBeVisible();
  await expect(page.getByText('Expected lumber tally')).toBeVisible();
  const first = page.locator('[data-plan]').first();
  await expect(first.getByRole('img', { name: /at its large end, \d+ boards/ })).toBeVisible();
  const slider = first.getByRole('slider');
  await slider.focus();
  await slider.press('Home');
  await expect(first.getByText('0 ft')).toBeVisible();
  await expect(first.locator('[data-wood]')).toHaveAttribute('transform', /scale\(0\./);
  await expectAccessible(page);
  await page.setViewportSize({ width: 320, height: 800 });
  expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(320);
});

test('anyone tries a list of their own on the logs, watches it, and stops it', async ({ page }) => {
  await page.goto('/logs');
  await page.locator('main a[href^="/listings/"]').first().click();
  await page.getByRole('link', { name: /See the boards in these logs/ }).click();
  const own = page.getByRole('region', { name: 'Try a list of your own' });
  await own.scrollIntoViewIfNeeded();
  await expect(page.locator('astro-island:has(h2:text("Try a list of your own")):not([ssr])')).toBeAttached();
  const rows = own.getByRole('group');
  while ((await rows.count()) > 0) await own.getByRole('button', { name: /^Remove size/ }).first().click();
  const work = own.getByRole('button', { name: 'Work it out' });
  await work.click();
  await expect(own.getByRole('alert')).toHaveText('Write at least one size.');
  await own.getByRole('button', { name: 'Add a size' }).click();
  await own.getByLabel('Thickness').fill('1');
  await own.getByLabel('Width').fill('4');
  await own.getByLabel('Length').fill('4 ft');
  await own.getByLabel('How many').fill('some');
  await work.click();
  await expect(own.getByText('Write how many, as a whole number.')).toBeVisible();
  await own.getByLabel('How many').fill('2');
  await work.click();
  await expect(own.getByRole('heading', { name: /These logs make the whole list, from 1 log/ })).toBeVisible();
  await expectAccessible(page);

  await own.getByLabel('How many').fill('5000');
  await work.click();
  await own.getByRole('button', { name: 'Cancel' }).click();
  await expect(own.getByText('Stopped. What you wrote is still here.')).toBeVisible();
  await expect(own.getByLabel('How many')).toHaveValue('5000');
});
