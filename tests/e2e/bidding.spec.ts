import type { Locator, Page } from '@playwright/test';
import { dayAhead, publishListing, setUpSawing, bidFields } from '../support/bidding-forms.ts';
import { Browser, PASSWORD } from '../support/browser.ts';
import { OAK_CARD } from '../support/rate-cards.ts';
import { another, expect, expectAccessible, mailbox, origin, test } from './support/check.ts';

// The sawyer bids, the landowner compares and chooses, with keys alone: nothing in this file clicks.

/** People and a listing of their own for each check, so that checks do not meet. */
async function people(tag: string): Promise<{ owner: string; sawyer: string; number: number }> {
  const [owner, sawyer, rival] = [new Browser(origin()), new Browser(origin()), new Browser(origin())];
  const mark = Date.now();
  const address = (name: string): string => `${name}.${tag}.${mark}@e2e.example`;
  await owner.signUp({ name: 'Olga Owner', email: address('olga'), as: ['landowner'] }, mailbox());
  await sawyer.signUp({ name: 'Sven Sawyer', email: address('sven'), as: ['sawyer'] }, mailbox());
  await rival.signUp({ name: 'Rita Rival', email: address('rita'), as: ['sawyer'] }, mailbox());
  await setUpSawing(sawyer, 'Sven Swing');
  await setUpSawing(rival, 'Rita Resaws', { ...OAK_CARD, setUpPerLanding: 20_000 });
  const number = await publishListing(owner);
  const placed = await rival.post(`/listings/${number}/bid`, await bidFields(rival, number, { message: 'Any day after the first frost.' }));
  expect(placed.status).toBe(303);
  return { owner: address('olga'), sawyer: address('sven'), number };
}

/** Walks with Tab until the control has the focus, as a person without a pointer does. */
async function tabTo(page: Page, control: Locator): Promise<void> {
  await expect(control).toBeVisible();
  // Found once: to look for a control by its role and name costs more than the step itself.
  const node = await control.elementHandle();
  for (let step = 0; step < 150; step += 1) {
    if (await node?.evaluate((found) => found === document.activeElement)) return;
    await page.keyboard.press('Tab');
  }
  throw new Error(`Tab never came to ${control.toString()}`);
}

async function press(page: Page, control: Locator, key = 'Enter'): Promise<void> {
  await tabTo(page, control);
  await page.keyboard.press(key);
}

async function signIn(page: Page, email: string, next: string): Promise<void> {
  await page.goto(`/sign-in?next=${encodeURIComponent(next)}`);
  await tabTo(page, page.getByLabel('E-mail address'));
  await page.keyboard.type(email);
  await tabTo(page, page.getByLabel('Password'));
  await page.keyboard.type(PASSWORD);
  await page.keyboard.press('Enter');
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
}

/** A date typed into the browser's own field for one: month, day and year one after the other. */
const asTyped = (day: string): string => `${day.slice(5, 7)}${day.slice(8, 10)}${day.slice(0, 4)}`;

async function sawyerBids(page: Page, email: string, number: number): Promise<void> {
  await signIn(page, email, `/listings/${number}`);
  await press(page, page.getByRole('link', { name: 'Bid on these logs' }));
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Bid on these logs');
  await expectAccessible(page);
  await tabTo(page, page.getByRole('radio', { name: 'The landowner provides one' }));
  await page.keyboard.press('ArrowDown');
  await expect(page.getByRole('radio', { name: 'I bring one' })).toBeChecked();
  // The figures follow by themselves, at the rate with the sawyer's own off-bearer.
  await expect(page.locator('#figures')).toContainText('bf at $0.60');

  // Without a day it is refused, the summary has the focus and leads to the days.
  await press(page, page.getByRole('button', { name: 'Place this bid' }));
  await expect(page.getByRole('alert')).toBeFocused();
  await expectAccessible(page);
  await press(page, page.getByRole('alert').getByRole('link', { name: /at least one day/ }));
  await expect(page.getByRole('radio', { name: 'I bring one' })).toBeChecked();
  // By its value: once offered, a day is no longer called open.
  const day = await page.getByRole('checkbox', { name: /^Mon .*, open$/ }).nth(1).inputValue();
  const monday = page.locator(`input[name="days[]"][value="${day}"]`);
  await press(page, monday, ' ');
  await expect(monday).toBeChecked();
  await tabTo(page, page.getByLabel('Or type a day'));
  await page.keyboard.type(asTyped(dayAhead(11)));
  await tabTo(page, page.getByLabel('Message'));
  await page.keyboard.type('I can saw them in two days.');
  await press(page, page.getByRole('button', { name: 'Work out the figures' }));
  await expect(page.getByLabel('Message')).toHaveValue('I can saw them in two days.');
  await press(page, page.getByRole('button', { name: 'Place this bid' }));
  await expect(page.getByRole('status').filter({ hasText: 'Your bid is placed.' })).toBeVisible();
  await expect(monday).toBeChecked();
  await expectAccessible(page);
}

async function ownerChooses(page: Page, email: string, number: number): Promise<void> {
  await signIn(page, email, `/listings/${number}`);
  await press(page, page.getByRole('link', { name: 'Compare the bids' }));
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('2 bids, worked on the same logs');
  await expect(page.getByLabel('Which is lowest, and why')).toContainText('Sven Swing has the lowest estimate');
  await expectAccessible(page);
  await press(page, page.getByRole('link', { name: 'distance' }));
  await expect(page).toHaveURL(/sort=distance/);
  await expect(page.getByRole('link', { name: 'distance' })).toHaveAttribute('aria-current', 'true');
}

async function agrees(page: Page): Promise<void> {
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Choose Sven Swing?');
  await expect(page.getByRole('heading', { name: /No promise of yield/ })).toBeVisible();
  await expectAccessible(page);
  await press(page, page.getByRole('button', { name: 'Choose this bid' }).last());
  await expect(page).toHaveURL(/\/bookings\/\d+$/);
  await press(page, page.getByRole('link', { name: 'Work agreement' }));
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('Work agreement');
  await expectAccessible(page);
}

const sideways = (page: Page): Promise<number> => page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);

test('at a desk: a sawyer bids, the landowner compares and chooses, by keys alone', async ({ page, browser }) => {
  const { owner, sawyer, number } = await people('desk');
  const { page: sawyers, faults } = await another(browser);
  await sawyerBids(sawyers, sawyer, number);
  await ownerChooses(page, owner, number);
  const table = page.getByRole('table', { name: /side by side/ });
  await expect(table.getByRole('columnheader')).toHaveCount(3);
  await expect(table.getByRole('row', { name: /^Estimate/ })).toContainText('lowest');
  await press(page, table.getByRole('link', { name: 'Choose this bid of Sven Swing' }));
  await agrees(page);
  await sawyers.reload();
  await press(sawyers, sawyers.getByRole('link', { name: 'Go to the booking' }));
  await press(sawyers, sawyers.getByRole('link', { name: 'Work agreement' }));
  await expect(sawyers.getByRole('heading', { level: 1 })).toHaveText('Work agreement');
  expect(faults).toEqual([]);
});

test('on a phone: one bid at a time, by keys alone', async ({ browser }) => {
  const { owner, sawyer, number } = await people('phone');
  const { page: sawyers, faults: theirs } = await another(browser, { phone: true });
  await sawyerBids(sawyers, sawyer, number);
  expect(await sideways(sawyers)).toBe(0);
  const { page, faults } = await another(browser, { phone: true });
  await ownerChooses(page, owner, number);
  expect(await sideways(page)).toBe(0);
  await press(page, page.getByRole('list', { name: 'The bids' }).getByRole('link', { name: /Rita Resaws/ }));
  await expect(page.getByRole('article')).toHaveCount(1);
  await expect(page.getByRole('article', { name: 'Rita Resaws' })).toContainText('Any day after the first frost.');
  await press(page, page.getByRole('list', { name: 'The bids' }).getByRole('link', { name: /Sven Swing/ }));
  await press(page, page.getByRole('article', { name: 'Sven Swing' }).getByRole('link', { name: 'Choose this bid' }));
  await agrees(page);
  expect(await sideways(page)).toBe(0);
  expect([...faults, ...theirs]).toEqual([]);
});

test.describe('without JavaScript', () => {
  test.use({ javaScriptEnabled: false });
  test('the form answers with figures and keeps what was typed', async ({ page }) => {
    const { sawyer, number } = await people('plain');
    await signIn(page, sawyer, `/listings/${number}/bid`);
    await expect(page.getByText('You would receive')).toBeVisible();
    await page.getByLabel('Road miles, one way').fill('125');
    await page.getByRole('button', { name: 'Work out the figures' }).press('Enter');
    await expect(page.getByText('200 miles at $2.00')).toBeVisible();
    await expect(page.getByLabel('Road miles, one way')).toHaveValue('125');
  });
});
