import type { Page } from '@playwright/test';
import { PASSWORD, readMail } from '../support/browser.ts';
import { another, awake, expect, expectAccessible, mailbox, test } from './support/check.ts';
import { dayFromNow, field, fillTheRest } from './support/listing-form.ts';
import { payByCard } from './support/pay.ts';
import { openAccount, signIn } from './support/people.ts';
import { setUpSawyer } from './support/sawyer-form.ts';

/** A listing of two oak logs that the page's owner publishes; answers its number. */
async function publish(page: Page): Promise<number> {
  await page.goto('/listings/new');
  await awake(page);
  for (const [index, smallEnd] of ['16', '14'].entries()) {
    if (index > 0) await page.getByRole('button', { name: 'Add another log' }).click();
    await field(page, `logs.${index}.species`).fill('White oak');
    await field(page, `logs.${index}.smallEnd`).fill(smallEnd);
    await field(page, `logs.${index}.length`).fill('12 ft 6 in');
  }
  await fillTheRest(page);
  await expect(page.getByText('Near Viroqua, WI, in Vernon County')).toBeVisible();
  await page.getByRole('button', { name: 'Publish this listing' }).click();
  await expect(page.getByText('Your listing is on show')).toBeVisible();
  return Number(/\/listings\/(\d+)/.exec(page.url())?.[1]);
}

/** Says what a page says of money, without its sign. */
const cents = (text: string | null): number => Math.round(Number((/\$([\d,]+\.\d\d)/.exec(text ?? '')?.[1] ?? '').replaceAll(',', '')) * 100);

for (const phone of [false, true]) {
  test(`a tree becomes boards and money, two browsers side by side${phone ? ', at phone size' : ''}`, async ({ browser }) => {
    test.setTimeout(240_000);
    const tag = `${phone ? 'phone' : 'desk'}-${Date.now()}`;
    const ada = { name: 'Adele Ashgrove', email: `adele-${tag}@e2e.example`, as: 'landowner' } as const;
    const bo = { name: 'Bo Barkley', email: `bo-${tag}@e2e.example`, as: 'sawyer' } as const;
    const { page: owner, faults: ownerFaults } = await another(browser, { phone });
    const { page: sawyer, faults: sawyerFaults } = await another(browser, { phone });

    await openAccount(owner, ada);
    await openAccount(sawyer, bo);
    await setUpSawyer(sawyer, `Barkley Sawing ${tag}`);
    const listing = await publish(owner);

    // The sawyer finds it by place, asks, and bids.
    await sawyer.goto('/logs?zip=54665&radiusMi=40&species=white-oak');
    await expect(sawyer.locator(`a[href^="/listings/${listing}"]`).first()).toBeVisible();
    await sawyer.goto(`/listings/${listing}/bid`);
    await expect(sawyer.getByRole('heading', { name: 'What it comes to' })).toBeVisible();
    await sawyer.locator('[name="offBearer"][value="landowner-provides"]').check();
    await field(sawyer, 'days[]').last().fill(dayFromNow(9));
    await field(sawyer, 'message').fill('I would saw these to 4/4 and leave the heart in a cant.');
    await sawyer.getByRole('button', { name: 'Place this bid' }).click();
    await expect(sawyer.getByText('Your bid is placed.')).toBeVisible();
    await expectAccessible(sawyer);

    // The landowner compares, reads the terms and chooses.
    await readMail(mailbox(), ada.email, 'bid');
    await owner.goto(`/listings/${listing}/bids`);
    await expectAccessible(owner);
    await owner.getByRole('link', { name: /^Choose this bid/ }).filter({ visible: true }).click();
    await expectAccessible(owner);
    await owner.getByRole('button', { name: 'Choose this bid' }).first().click();
    await expect(owner).toHaveURL(/\/bookings\/\d+$/);
    const booking = new URL(owner.url()).pathname;
    await expectAccessible(owner);

    // A day is proposed by one and confirmed by the other; the invitation goes to both, without the place.
    await field(owner, 'typedDay').fill(dayFromNow(9));
    await owner.getByRole('button', { name: 'Propose', exact: true }).click();
    await expect(owner.getByText('You propose', { exact: true })).toBeVisible();
    await sawyer.goto(booking);
    await sawyer.getByRole('button', { name: 'Confirm this day' }).click();
    await expect(sawyer.getByText(/^Waiting for .* to pay the hold/)).toBeVisible();
    await expect(sawyer.getByRole('heading', { name: 'Place' })).toBeHidden();

    // The hold is paid: first a card that is declined, then one that is not.
    await owner.goto(booking);
    await owner.getByRole('link', { name: 'Pay the hold' }).click();
    await expectAccessible(owner);
    const pay = owner.getByRole('button', { name: /^Pay \$.* by card$/ });
    const hold = cents(await pay.textContent());
    await pay.click();
    await payByCard(owner, '4000 0000 0000 0002');
    await expect(owner.getByRole('alert')).toContainText('declined');
    await payByCard(owner, '4242 4242 4242 4242');
    await expect(owner.getByRole('heading', { name: 'Your money is held' })).toBeVisible({ timeout: 30_000 });
    await expectAccessible(owner);

    // Now the sawyer sees the place, sets up payouts, saws and tallies.
    await sawyer.goto(booking);
    await expect(sawyer.getByRole('heading', { name: 'Place' })).toBeVisible();
    await sawyer.goto('/account/payouts');
    await sawyer.getByRole('button', { name: 'Set up payouts' }).click();
    await field(sawyer, 'name').fill(bo.name);
    await sawyer.getByRole('button', { name: 'Agree and submit' }).click();
    await expect(sawyer).toHaveURL(/\/account\/payouts/);
    await sawyer.goto(`${booking}/tally`);
    await expectAccessible(sawyer);
    for (const point of await sawyer.locator('[name="check"]').all()) await point.check();
    await sawyer.getByRole('button', { name: 'Start sawing' }).click();
    await sawyer.getByRole('group', { name: 'Width, in' }).getByRole('button', { name: '8', exact: true }).click();
    await sawyer.getByLabel('How many').fill('20');
    await sawyer.getByRole('button', { name: /^Add 20 boards/ }).click();
    // 4/4 × 8 in × 12 ft: surface measure 8, 20 boards are 160 bf by the hardwood rule.
    await expect(sawyer.getByTestId('sawn-so-far')).toHaveText('160 bf');
    await expect(sawyer.getByText('All sent')).toBeVisible();
    await expectAccessible(sawyer);
    await sawyer.getByRole('button', { name: 'Offer the tally for signing' }).click();
    await expect(sawyer.getByText(/^Waiting for .* to sign/)).toBeVisible();

    // The landowner signs: 160 bf × $0.50 + set-up $75 = $155, under the minimum of $200.
    await owner.goto(`${booking}/sign`);
    await expectAccessible(owner);
    await field(owner, 'name').fill(ada.name);
    await field(owner, 'agreed').check();
    await owner.getByRole('button', { name: 'Sign the tally' }).click();
    await expect(async () => {
      await owner.goto(booking);
      await expect(owner.getByText('Stack and sticker the boards the same day.')).toBeVisible({ timeout: 1000 });
    }).toPass({ timeout: 30_000 });
    await owner.goto(`${booking}/receipt`);
    await expect(owner.getByRole('row', { name: /The work came to/ })).toContainText('$200.00');
    await expect(owner.locator('main')).toContainText(`$${((hold - 20_000) / 100).toFixed(2)}`);
    await expectAccessible(owner);
    await sawyer.goto(`${booking}/receipt`);
    // The fee is 5 % of $200.00.
    await expect(sawyer.locator('main')).toContainText('$190.00');
    expect((await readMail(mailbox(), bo.email, 'Your pay is released')).text).toContain('190.00');
    expect((await readMail(mailbox(), ada.email, 'Receipt')).text).toContain('200.00');

    // Each reviews the other, and they write to each other.
    for (const page of [owner, sawyer]) {
      await page.goto(`${booking}/review`);
      await expectAccessible(page);
      await page.locator('[name="stars"][value="5"]').check();
      await field(page, 'body').fill('Straight dealing from the first message to the last board.');
      await page.getByRole('button', { name: 'Publish the review' }).click();
      await expect(page).toHaveURL(new RegExp(`${booking}$`));
    }
    await owner.getByRole('link', { name: /^Messages with/ }).click();
    await field(owner, 'body').fill('Thank you. The stickers are dry.');
    await owner.getByRole('button', { name: 'Send' }).click();
    await expectAccessible(owner);
    await sawyer.goto('/messages');
    await expect(sawyer.getByText('Thank you. The stickers are dry.')).toBeVisible();
    await expectAccessible(sawyer);
    expect([...ownerFaults, ...sawyerFaults]).toEqual([]);
    await Promise.all([owner.context().close(), sawyer.context().close()]);
  });
}

test('a password is forgotten and set anew, and the sessions of an account can be seen and ended', async ({ page, browser }) => {
  const email = `fern-${Date.now()}@e2e.example`;
  await openAccount(page, { name: 'Fern Fellside', email, as: 'landowner' });
  const { page: elsewhere } = await another(browser);
  await signIn(elsewhere, email);
  await page.goto('/account/sessions');
  await expectAccessible(page);
  await page.getByRole('button', { name: 'End all others' }).click();
  await elsewhere.goto('/account');
  await expect(elsewhere).toHaveURL(/sign-in/);

  await elsewhere.goto('/forgot-password');
  await expectAccessible(elsewhere);
  await elsewhere.getByLabel('E-mail address').fill(email);
  await elsewhere.getByRole('button', { name: 'Send the link' }).click();
  const letter = await readMail(mailbox(), email, 'assword');
  await elsewhere.goto(letter.links.find((one) => one.includes('/reset-password/')) ?? '');
  await expectAccessible(elsewhere);
  await elsewhere.getByLabel('New password').fill('another sound board 77');
  await elsewhere.getByRole('button', { name: 'Change the password' }).click();
  await page.goto('/account');
  await expect(page).toHaveURL(/sign-in/);
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(PASSWORD);
  await page.locator('main').getByRole('button', { name: 'Sign in' }).click();
  await expect(page.getByRole('alert')).toBeVisible();
  await signIn(page, email, 'another sound board 77');

  await page.goto('/account/security');
  await expectAccessible(page);
  await field(page, 'newEmail').fill(`new-${email}`);
  await field(page, 'emailPassword').fill('another sound board 77');
  await page.getByRole('button', { name: 'Send the link' }).click();
  const change = await readMail(mailbox(), `new-${email}`);
  await page.goto(change.links.find((one) => one.includes('/confirm-email/')) ?? '');
  await expectAccessible(page);
  await page.getByRole('button', { name: 'Confirm this address' }).click();
  await page.goto('/account');
  await page.getByText('Fern Fellside').first().click();
  await page.getByRole('button', { name: 'Sign out' }).filter({ visible: true }).click();
  await expect(page.getByRole('link', { name: 'Sign in', exact: true })).toBeVisible();
  await signIn(page, `new-${email}`, 'another sound board 77');
  await elsewhere.context().close();
});
