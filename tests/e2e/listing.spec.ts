import type { Page } from '@playwright/test';
import { another, awake, expect, expectAccessible, test } from './support/check.ts';
import { field, fillTheRest } from './support/listing-form.ts';
import { confirmAddress, fillSignUp, openAccount, signIn } from './support/people.ts';

const kept = (page: Page, words: RegExp) => expect(page.getByRole('status').filter({ hasText: words, visible: true })).toBeVisible();

const lotte = { name: 'Lotte Landing', as: 'landowner' } as const;

test('a visitor begins, makes an account at publishing, and loses nothing', async ({ page: first }) => {
  let page = first;
  const email = 'lotte@e2e.example';
  await page.goto('/listings/new');
  await awake(page);
  await field(page, 'logs.0.species').fill('White oak');
  await field(page, 'logs.0.smallEnd').fill('16 x 16');
  await field(page, 'logs.0.length').fill("12' 6\"");
  // 16 in × 12 ft by the published tables: International ¼ 130, Doyle 108.
  await expect(page.locator('#logs').getByText('130 bf').first()).toBeVisible();
  await expect(page.locator('#logs').getByText('108 bf').first()).toBeVisible();
  await page.getByRole('button', { name: 'Add another log' }).click();
  await expect(field(page, 'logs.1.smallEnd')).toBeFocused();
  await expect(field(page, 'logs.1.species')).toHaveValue('White oak');
  await field(page, 'logs.1.smallEnd').fill('14');
  await field(page, 'logs.1.largeEnd').fill('12');
  await field(page, 'logs.1.length').fill('10 ft');
  await expect(page.getByText('The large end (12 in) is smaller than the small end (14 in).')).toBeVisible();
  await kept(page, /Kept in this browser/);

  await page.getByRole('button', { name: 'Publish this listing' }).click();
  await expect(page.getByText('You need an account to save or publish')).toBeVisible();
  await expect(field(page, 'logs.1.largeEnd')).toHaveValue('12');
  await page.getByRole('link', { name: 'Make an account' }).click();
  await fillSignUp(page, { ...lotte, email });

  await expect(field(page, 'logs.1.largeEnd')).toHaveValue('12');
  await kept(page, /Confirm your e-mail address first/);
  page = await confirmAddress(page, email);
  await expect(field(page, 'logs.1.largeEnd')).toHaveValue('12');
  await kept(page, /^Saved \d+:\d\d [ap]m$/);
  await expect(page).toHaveURL(/\/listings\/\d+\/edit$/);
  // The window left behind does not make a second draft of the same text.
  await kept(first, /saved somewhere else/);

  await page.getByRole('button', { name: 'Publish this listing' }).click();
  await expect(page.getByRole('alert')).toContainText('The large end (12 in) is smaller');
  await page.getByRole('link', { name: /The large end/ }).click();
  await expect(field(page, 'logs.1.largeEnd')).toBeFocused();
  await field(page, 'logs.1.largeEnd').fill('15 1/2');
  await fillTheRest(page);
  await expect(page.getByText('Near Viroqua, WI, in Vernon County')).toBeVisible();
  await expect(page.getByRole('complementary', { name: 'Take care: Overhead lines' })).toBeVisible();
  await expectAccessible(page);
  await page.getByRole('button', { name: 'Publish this listing' }).click();
  await expect(page.getByText('Your listing is on show')).toBeVisible();
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('White oak, 2 logs');
  await expectAccessible(page);

  // What this browser had kept is gone: the next listing begins empty.
  await page.goto('/listings/new');
  await awake(page);
  await expect(field(page, 'logs.0.smallEnd')).toHaveValue('');
});

test('two devices, a lost connection and a lost session never lose a word', async ({ page, browser }) => {
  const email = 'lars@e2e.example';
  await openAccount(page, { ...lotte, email });
  await page.goto('/listings/new');
  await awake(page);
  await field(page, 'logs.0.smallEnd').fill('15');
  await expect(page).toHaveURL(/\/listings\/\d+\/edit$/);
  const address = page.url();

  const { page: phone, faults } = await another(browser, { phone: true });
  await signIn(phone, email, undefined, new URL(address).pathname);
  await expect(field(phone, 'logs.0.smallEnd')).toHaveValue('15');
  await awake(phone);
  await field(phone, 'note').fill('from the phone');
  await kept(phone, /^Saved/);

  await field(page, 'note').fill('from the desk');
  await kept(page, /saved somewhere else/);
  await page.getByRole('button', { name: 'Keep what is here' }).click();
  await kept(page, /^Saved/);
  // A slow connection: what is typed before the form's script has come is kept like anything else.
  let arrive = (): void => {};
  const arrived = new Promise<void>((resolve) => (arrive = resolve));
  await phone.route(/ListingForm.*\.js/, async (route) => {
    await arrived;
    await route.continue();
  });
  await phone.reload({ waitUntil: 'commit' });
  await expect(field(phone, 'note')).toHaveValue('from the desk');
  await field(phone, 'note').fill('typed before the form woke');
  await field(phone, 'logs.0.length').fill('11');
  arrive();
  await kept(phone, /^Saved/);
  await expect(field(phone, 'note')).toHaveValue('typed before the form woke');
  await expect(field(phone, 'logs.0.length')).toBeFocused();
  await phone.unroute(/ListingForm.*\.js/);

  const cookies = await phone.context().cookies();
  await phone.context().clearCookies();
  await field(phone, 'note').fill('typed after the session had ended');
  await kept(phone, /You were signed out/);
  await phone.context().addCookies(cookies);
  await phone.goto(address);
  await awake(phone);
  await expect(field(phone, 'note')).toHaveValue('typed after the session had ended');
  await kept(phone, /^Saved/);

  await phone.context().setOffline(true);
  await field(phone, 'note').fill('typed in the woods');
  await kept(phone, /There is no connection/);
  await phone.context().setOffline(false);
  await kept(phone, /^Saved/);
  await phone.goto('/listings');
  await phone.goBack();
  await expect(field(phone, 'note')).toHaveValue('typed in the woods');
  expect(faults.filter((fault) => !/ERR_INTERNET_DISCONNECTED/.test(fault))).toEqual([]);
});

test.describe('without JavaScript', () => {
  test.use({ javaScriptEnabled: false });
  test('rows come and go by buttons, and figures are there after each', async ({ page }) => {
    await page.goto('/listings/new');
    await field(page, 'logs.0.species').fill('white oak');
    await field(page, 'logs.0.smallEnd').fill('16');
    await field(page, 'logs.0.length').fill('12');
    await page.getByRole('button', { name: 'Add another log' }).click();
    await expect(page.locator('#logs').getByText('130 bf').first()).toBeVisible();
    await field(page, 'logs.1.smallEnd').fill('13 1/4');
    await page.getByRole('button', { name: 'Remove log 1' }).click();
    await expect(field(page, 'logs.0.smallEnd')).toHaveValue('13 1/4');
    await page.getByRole('button', { name: 'Save and go on later' }).click();
    await expect(page.getByText('You need an account to save or publish')).toBeVisible();
    await expect(field(page, 'logs.0.smallEnd')).toHaveValue('13 1/4');
  });
});
