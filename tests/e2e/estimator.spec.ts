import { readFileSync } from 'node:fs';
import type { Page } from '@playwright/test';
import { expect, expectAccessible, test } from './support/check.ts';

async function open(page: Page, query = ''): Promise<void> {
  await page.goto(`/estimator${query}`);
  await page.locator('[data-ready="true"]').waitFor();
}

async function measure(page: Page, species: string, smallEnd: string, length: string): Promise<void> {
  await page.getByRole('combobox', { name: 'Species' }).fill(species);
  await page.keyboard.press('Enter');
  await page.getByLabel('Small end, inside bark').fill(smallEnd);
  await page.getByLabel('Length, with trim').fill(length);
}

const addLog = (page: Page): Promise<void> => page.getByRole('button', { name: 'Add this log' }).click();

test('a newcomer measures three logs, finds the weight, and lists them', async ({ page }) => {
  await open(page);
  await measure(page, 'quercus alba', '18', '12');
  await expect(page.getByTestId('internationalQuarter')).toHaveText('170');
  await expect(page.getByTestId('doyle')).toHaveText('147');
  await addLog(page);
  await expect(page.getByLabel('Small end, inside bark')).toBeFocused();
  await measure(page, 'white oak', '16', '12');
  await addLog(page);
  await measure(page, 'white oak', '14', '12');
  await addLog(page);

  const total = page.getByRole('row', { name: /3 logs together/ });
  await expect(total).toContainText('400');
  await expect(total).toContainText('330');
  await expect(total).toContainText(/lb/);

  await page.reload();
  await expect(page.getByRole('row', { name: /3 logs together/ })).toContainText('400');
  await expect(page.getByRole('link', { name: 'List these logs' })).toHaveAttribute('href', /^\/listings\/new\?logs=white-oak_18/);
});

test('a log that is not finished says what is missing, beside its field', async ({ page }) => {
  await open(page);
  await addLog(page);
  await expect(page.getByText('Choose the species.')).toBeVisible();
  await expect(page.getByRole('combobox', { name: 'Species' })).toBeFocused();
  await measure(page, 'black walnut', 'eighteen', '12');
  await expect(page.getByText('Write a measure, for instance')).toBeVisible();
});

test('rot drawn on the log end comes off the scale', async ({ page }) => {
  await open(page);
  await measure(page, 'white oak', '20', '16');
  await expect(page.getByTestId('doyle')).toHaveText('256');
  await page.getByRole('button', { name: 'Draw rot on the log end' }).click();
  const end = page.getByRole('img', { name: /Small end to scale/ });
  const box = await end.boundingBox();
  if (!box) throw new Error('The log end is not drawn.');
  await page.mouse.move(box.x + box.width * 0.4, box.y + box.height * 0.4);
  await page.mouse.down();
  await page.mouse.move(box.x + box.width * 0.6, box.y + box.height * 0.6, { steps: 5 });
  await page.mouse.up();
  await expect(page.getByLabel('Kind')).toHaveValue('interiorRot');
  await expect(page.getByTestId('doyle')).not.toHaveText('256');
  await page.getByRole('button', { name: 'Remove defect 1' }).click();

  // From the top of the end to its right-hand side: a quarter.
  await page.getByRole('button', { name: 'Draw a scar or seam' }).click();
  await end.scrollIntoViewIfNeeded();
  const now = await end.boundingBox();
  if (!now) throw new Error('The log end is not drawn.');
  await page.mouse.move(now.x + now.width * 0.5, now.y + now.height * 0.2);
  await page.mouse.down();
  await page.mouse.move(now.x + now.width * 0.8, now.y + now.height * 0.5, { steps: 5 });
  await page.mouse.up();
  await expect(page.getByLabel('Kind')).toHaveValue('wedge');
  await expect(page.getByLabel('Angle of the slice')).toHaveValue('90');
  await expect(page.getByTestId('doyle')).toHaveText('192');
});

test('a pasted table adds what can be read and names what cannot', async ({ page }) => {
  await open(page);
  await page.getByText('Paste or open a table of logs').click();
  await page.getByLabel('Paste a table').fill('Species,Small end,Length\nwhite oak,18 3/8,12 ft 4 in\nred oak,14,12');
  await page.getByRole('button', { name: 'Add these logs' }).click();
  await expect(page.getByRole('alert')).toContainText('Line 3, Species');
  await expect(page.getByRole('row', { name: /1 log together/ })).toBeVisible();
});

test('the list is saved as a table', async ({ page }) => {
  await open(page, '?logs=white-oak_18__12~red-pine_14__16_2');
  const download = page.waitForEvent('download');
  await page.getByRole('button', { name: 'Save as CSV' }).click();
  const csv = readFileSync(await (await download).path(), 'utf8');
  expect(csv.split('\r\n')).toHaveLength(3);
  expect(csv).toContain('White oak,Quercus alba,18,,12,1');
});

test('a standing tree comes with its cautions', async ({ page }) => {
  await open(page);
  await page.getByRole('button', { name: 'A standing tree' }).click();
  await page.getByLabel('Diameter at breast height').fill('14');
  await page.getByLabel('Usable 16-ft logs', { exact: true }).fill('2.5');
  await expect(page.getByRole('row', { name: /Doyle/ })).toContainText('84');
  await page.getByLabel('You to the tree').fill('100');
  await page.getByLabel('Stick that covers').fill('18');
  await expect(page.getByText('144 ft')).toBeVisible();
  await expect(page.getByText('Hire a licensed or trained professional')).toBeVisible();
});

test('works by keyboard, at 320 px, and finds no fault with its accessibility', async ({ page }) => {
  await page.setViewportSize({ width: 320, height: 700 });
  await open(page, '?logs=white-oak_18__12!wedge-4-90~red-pine_14__34_2');
  expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(320);
  await measure(page, 'white oak', '20', '16');
  await expectAccessible(page);
});
