import type { Page } from '@playwright/test';
import { dayAhead, publishListing, setUpSawing } from '../support/bidding-forms.ts';
import { Browser, PASSWORD, readMail } from '../support/browser.ts';
import { another, expect, expectAccessible, mailbox, origin, test } from './support/check.ts';
import { signIn } from './support/people.ts';

/** A day that is not a Sunday, far enough ahead for everybody to answer. */
const tripDay = [8, 9].map(dayAhead).find((day) => new Date(`${day}T12:00:00Z`).getUTCDay() !== 0) ?? dayAhead(8);

const narrow = async (page: Page): Promise<void> => expect(await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)).toBeLessThanOrEqual(0);

test('from a saved search to a trip that two landowners share', async ({ page, browser }) => {
  test.setTimeout(240_000);
  const mark = Date.now().toString(36);
  const email = (name: string): string => `${name}.${mark}@trips.example`;
  const [sawyer, pia, quin] = [new Browser(origin()), new Browser(origin()), new Browser(origin())];
  await sawyer.signUp({ name: 'Tove Trips', email: email('tove'), as: ['sawyer'] }, mailbox());
  await setUpSawing(sawyer, 'Tove Sawing');
  await pia.signUp({ name: 'Pia Pine', email: email('pia'), as: ['landowner'] }, mailbox());
  await quin.signUp({ name: 'Quin Quarter', email: email('quin'), as: ['landowner'] }, mailbox());

  // The sawyer saves a search from the list of logs.
  await signIn(page, email('tove'), PASSWORD, '/logs?zip=54665&radiusMi=40&fits=1&minPerHour=10');
  await expect(page.locator('[data-fit="yes"]').first()).toContainText('an hour');
  await page.getByRole('link', { name: 'Tell me about new logs like these' }).click();
  await expect(page.getByText('within 40 miles of ZIP 54665, $10 an hour or more, fits your mill')).toBeVisible();
  await expectAccessible(page);
  await page.getByLabel('Name').fill('Round Viroqua');
  await page.getByRole('button', { name: 'Save this search' }).click();
  await expect(page.getByRole('status')).toContainText('Saved');
  await expectAccessible(page);

  // Two listings appear; the letter leads to the first, and the sawyer bids on it.
  const first = await publishListing(pia);
  const second = await publishListing(quin, { lat: '43.5861', lng: '-90.8484' });
  const letter = await readMail(mailbox(), email('tove'), 'White oak, 3 logs');
  expect(letter.text).toContain('Your mill: fits Wide band');
  const link = letter.links.find((one) => /\/listings\/\d+$/.test(one)) ?? '';
  await page.goto(new URL(link).pathname);
  await expect(page.getByRole('heading', { name: 'Fits Wide band' })).toBeVisible();
  await page.goto(`/listings/${first}`);
  await page.getByRole('link', { name: 'Bid on these logs' }).click();
  await page.getByLabel('Or type a day').fill(tripDay);
  await page.getByRole('button', { name: 'Place this bid' }).click();
  await expect(page.getByText('Your bid is placed.')).toBeVisible();

  // The two are joined into one outing; the second gets its bid with the offer.
  await page.goto(`/sawyer/trips/new?day=${tripDay}`);
  for (const number of [first, second]) await page.locator(`#stop-${number}`).check();
  await page.getByRole('button', { name: 'Work it out' }).click();
  await expect(page.getByRole('heading', { name: 'These places as one outing' })).toBeVisible();
  await expect(page.getByText('Saved by all, on travel')).toBeVisible();
  await expectAccessible(page);
  await page.getByRole('button', { name: 'Ask these landowners' }).click();
  await expect(page.getByRole('status')).toContainText('They have been asked.');
  const trip = new URL(page.url()).pathname;
  await expectAccessible(page);

  // Each landowner sees their own figures alone, and agrees.
  for (const [name, own, other, said] of [['pia', first, second, 'You have agreed.'], ['quin', second, first, 'All have agreed']] as const) {
    const { page: theirs, faults } = await another(browser, { phone: true });
    expect((await readMail(mailbox(), email(name), 'A shared trip')).text).toContain('Your part of the travel');
    await signIn(theirs, email(name), PASSWORD, '/listings');
    await theirs.getByText('A sawyer asks you to join a shared trip').locator('xpath=../..').getByRole('link').first().click();
    await theirs.waitForURL(new RegExp(`${trip}$`));
    await expect(theirs.locator(`[data-stop="${own}"]`)).toContainText('Your part of the travel');
    await expect(theirs.locator(`[data-stop="${other}"]`)).toHaveCount(0);
    expect(await theirs.content()).not.toContain(`/listings/${other}`);
    await expectAccessible(theirs);
    await narrow(theirs);
    await theirs.getByRole('button', { name: 'Agree to this trip' }).click();
    await expect(theirs.getByRole('status')).toContainText(said);
    expect(faults).toEqual([]);
    await theirs.context().close();
  }

  // The day sheet has both stops and what to pack, hides the places until the money is held, and prints.
  await page.goto(`/sawyer/days/${tripDay}`);
  await expect(page.locator('ol > li[data-stop]')).toHaveCount(2);
  await expect(page.getByText('The money is not held yet.')).toHaveCount(2);
  await expect(page.getByRole('heading', { name: 'To pack' })).toBeVisible();
  expect(await page.content()).not.toMatch(/43\.5561|43\.5861|Blue gate/);
  await expectAccessible(page);
  await page.setViewportSize({ width: 390, height: 844 });
  await narrow(page);
  expect((await page.pdf({ format: 'Letter' })).length).toBeGreaterThan(10_000);

  // One click in the letter stops the search, signed in or not.
  const { page: anybody, faults } = await another(browser);
  await anybody.goto(new URL(letter.links.find((one) => one.includes('/searches/stop/')) ?? '').pathname);
  await anybody.getByRole('button', { name: 'Stop these letters' }).click();
  await expect(anybody.getByRole('heading', { name: 'Letters stopped' })).toBeVisible();
  expect(faults).toEqual([]);
});
