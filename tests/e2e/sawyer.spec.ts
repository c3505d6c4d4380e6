import type { Page } from '@playwright/test';
import { plainJpeg } from '../support/sample-pictures.ts';
import { awake, expect, expectAccessible, test } from './support/check.ts';
import { openAccount } from './support/people.ts';

// Three long forms, each looked at in both themes.
test.setTimeout(240_000);

const newSawyer = (page: Page, name: string, email: string): Promise<void> => openAccount(page, { name, email, as: 'sawyer' });

/** No fault that axe finds, in both themes, and nothing wider than the screen. */
async function expectSound(page: Page): Promise<void> {
  for (const colorScheme of ['light', 'dark'] as const) {
    await page.emulateMedia({ colorScheme });
    await expectAccessible(page);
  }
  expect(await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)).toBeLessThanOrEqual(0);
}

for (const { name, width, script } of [{ name: 'at a desk', width: 1280, script: true }, { name: 'on a phone of 320 px without JavaScript', width: 320, script: false }]) {
  test.describe(name, () => {
    test.use({ javaScriptEnabled: script, viewport: { width, height: 800 } });

    test('a new sawyer sets up everything from nothing', async ({ page }) => {
      await newSawyer(page, 'Nell Newblade', `nell-${width}@skidway.example`);
      await page.goto('/sawyer');
      await expect(page.getByText('Three things before your first bid')).toBeVisible();
      if (script) await expectSound(page);

      await page.getByRole('list', { name: 'Before your first bid' }).getByRole('link', { name: 'Profile' }).click();
      await page.getByLabel('Name you work under').fill('Newblade Sawing');
      await page.getByLabel('ZIP code of your base').fill('5466');
      await page.getByLabel('Sunday').check();
      await page.getByRole('button', { name: 'Save the profile' }).click();
      await expect(page.getByRole('alert')).toContainText('Write the five digits of your ZIP code.');
      await expect(page.getByLabel('Name you work under')).toHaveValue('Newblade Sawing');
      if (script) await expectSound(page);
      await page.getByLabel('ZIP code of your base').fill('54665');
      await page.getByLabel('Kiln drying').check();
      await page.getByRole('button', { name: 'Save the profile' }).click();

      await expect(page.getByRole('heading', { level: 1, name: 'Your mill' })).toBeVisible();
      await page.getByLabel('Name', { exact: true }).fill('Wide band');
      await page.getByLabel('Band', { exact: true }).check();
      for (const [label, value] of [['Kerf, measured', '3/32'], ['Largest log', '30'], ['Widest cut', '26'], ['Widest board', '24'], ['Longest log', '18'], ['Shortest log', '4'], ['Pace', '200']] as const) await page.getByLabel(label).fill(value);
      await page.getByLabel('Machine', { exact: true }).check();
      await page.getByRole('button', { name: 'Save this mill' }).click();

      await expect(page.getByRole('heading', { level: 1, name: 'Your rates' })).toBeVisible();
      await expect(page.getByRole('combobox', { name: 'Log rule' })).toBeHidden();
      await page.getByLabel('Board foot of log scale').check();
      await page.getByRole('combobox', { name: 'Log rule' }).selectOption('doyle');
      await page.getByLabel('Rate, landowner provides the off-bearer').fill('0.48');
      await page.getByLabel('Rate, you bring the off-bearer').fill('0.60');
      await page.getByLabel('Set-up, per landing').fill('85');
      await page.getByLabel('Free miles', { exact: true }).fill('25');
      await page.getByLabel('Travel, per mile beyond').fill('2');
      await page.getByLabel('Minimum', { exact: true }).fill('200');
      await page.getByLabel('Metal hit, blade re-sharpened').fill('10');
      await page.getByLabel('Metal hit, blade destroyed').fill('35');
      await page.getByLabel('Cap for one job').fill('105');
      await page.getByText('Waiting, moving the mill, waste, stickers, delivery').click();
      await page.getByLabel('Waiting', { exact: true }).fill('sixty');
      await page.getByRole('button', { name: 'Save the rates' }).click();
      // The part that holds the mistake is open when the page comes again.
      await expect(page.getByLabel('Waiting', { exact: true })).toHaveValue('sixty');
      if (script) await expectSound(page);
      await page.getByLabel('Waiting', { exact: true }).fill('60');
      await page.getByRole('button', { name: 'Save the rates' }).click();

      await expect(page.getByText('You are ready to bid.')).toBeVisible();
      await expect(page.getByRole('link', { name: 'Find logs near Viroqua' })).toHaveAttribute('href', '/logs?zip=54665');
      await page.goto('/sawyer/rates');
      await expect(page.getByRole('region', { name: 'Your card now' })).toContainText('log scale, Doyle');
      if (script) await expectSound(page);

      // A photograph of earlier work, seen on the page that landowners find.
      await page.goto('/sawyer/profile');
      await expect(page.getByRole('heading', { name: 'Photographs of your work' })).toBeVisible();
      if (!script) return;
      await awake(page);
      await page.getByLabel('Choose pictures').setInputFiles({ name: 'slabs.jpg', mimeType: 'image/jpeg', buffer: await plainJpeg(900, 600) });
      await page.getByLabel('Caption of slabs.jpg').fill('Walnut slabs');
      await expect(page.getByRole('list', { name: 'Photographs, in order' }).getByRole('img', { name: 'Walnut slabs' })).toBeVisible({ timeout: 20_000 });
      await expectSound(page);
      await page.getByRole('link', { name: 'See your page as they do' }).click();
      await expect(page.getByRole('region', { name: 'Photographs of work' }).getByRole('img', { name: 'Walnut slabs' })).toBeVisible();

      await page.context().grantPermissions(['geolocation']);
      await page.context().setGeolocation({ latitude: 43.5571, longitude: -90.8891 });
      await page.getByRole('navigation', { name: 'Breadcrumb' }).getByRole('link', { name: 'Sawyers near you' }).click();
      await page.getByRole('button', { name: 'Use where I am' }).click();
      await expect(page).toHaveURL(/lat=43\.56&lng=-90\.89/);
      await expect(page.getByRole('link', { name: 'Newblade Sawing' })).toBeVisible();
    });
  });
}

test('a sawyer keeps a calendar', async ({ page, request }) => {
  await newSawyer(page, 'Cal Calendar', 'cal@skidway.example');
  await page.goto('/sawyer/calendar');
  await page.getByRole('link', { name: /^(January|February|March|April|May|June|July|August|September|October|November|December)$/ }).last().click();
  const third = page.getByRole('checkbox', { name: /\b10 \w+ \d{4}, open/ }).or(page.getByRole('checkbox', { name: /\b10 \w+ \d{4}, not worked/ }));
  await third.focus();
  await page.keyboard.press('Space');
  await page.getByRole('button', { name: 'Save the ticked days as off' }).click();
  await expect(page.getByText('One day taken off.')).toBeVisible();
  await expect(page.getByRole('listitem').filter({ hasText: 'Day off' })).toBeVisible();

  // Moved by the form of its line, then by dragging it in the month.
  const line = page.getByRole('listitem').filter({ hasText: 'Day off' });
  const month = new URL(page.url()).searchParams.get('month') ?? '';
  await line.getByText('Move', { exact: false }).first().click();
  await line.getByLabel('To').fill(`${month}-12`);
  await line.getByRole('button', { name: 'Move it' }).click();
  await expect(page.getByRole('status')).toContainText(/Moved to \w+ 12 /);
  await page.locator(`[data-day="${month}-12"]`).dragTo(page.locator(`[data-day="${month}-17"]`));
  await expect(page.getByRole('status')).toContainText(/Moved to \w+ 17 /);
  await expect(page.getByRole('checkbox', { name: /\b17 \w+ \d{4}/ })).toBeChecked();

  await page.getByRole('button', { name: 'Make the address' }).click();
  const address = await page.getByLabel('Address to subscribe to').inputValue();
  expect(await (await request.get(address)).text()).toMatch(/BEGIN:VCALENDAR[\s\S]*SUMMARY:Day off/);
  for (const width of [1280, 320]) {
    await page.setViewportSize({ width, height: 800 });
    await expectSound(page);
  }
  await page.getByRole('button', { name: 'Make a new address' }).click();
  await expect(page.getByText('An address you gave out before has stopped answering.')).toBeVisible();
  expect((await request.get(address)).status()).toBe(404);

  await page.getByRole('link', { name: 'Bring a calendar' }).click();
  await expectSound(page);
  await page.getByLabel('Calendar file').setInputFiles({ name: 'mine.ics', mimeType: 'text/calendar', buffer: Buffer.from('not one') });
  await page.getByRole('button', { name: 'Take these days off' }).click();
  await expect(page.getByRole('alert')).toContainText('This is not a calendar file.');
});

test('a sawyer’s desk and home are sound when there is nothing in them and when there is', async ({ page }) => {
  await newSawyer(page, 'Des Desk', 'des@skidway.example');
  for (const path of ['/sawyer', '/sawyer/bids', '/sawyer/bids?show=lost&words=oak', '/sawyer/profile', '/sawyer/mill']) {
    for (const width of [1280, 320]) {
      await page.setViewportSize({ width, height: 800 });
      await page.goto(path);
      await expectSound(page);
    }
  }
});
