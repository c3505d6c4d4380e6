import { expect, expectAccessible, test } from './support/check.ts';
import { field } from './support/listing-form.ts';

test('the pin is moved on the map, by pointer and by keys', async ({ page }) => {
  await page.goto('/listings/new');
  await field(page, 'zip').fill('54665');
  await page.getByRole('button', { name: 'Set it on a map' }).click();
  const pin = page.getByRole('button', { name: /^The pin/ });
  await expect(page.getByText('Drag the pin')).toBeVisible();
  await pin.focus();
  await page.keyboard.press('Shift+ArrowUp');
  await expect(field(page, 'lat')).toHaveValue(/^43\.5\d+$/);
  const before = Number(await field(page, 'lat').inputValue());
  await page.keyboard.press('ArrowUp');
  await expect.poll(async () => Number(await field(page, 'lat').inputValue())).toBeGreaterThan(before);
  const box = await page.locator('.logs-map').boundingBox();
  if (!box) throw new Error('no map');
  await page.mouse.click(box.x + box.width * 0.25, box.y + box.height * 0.75);
  await expect.poll(async () => Number(await field(page, 'lat').inputValue())).toBeLessThan(before);
});

test('the map is in step with the list, by mouse and by keyboard', async ({ page }) => {
  const tiles: number[] = [];
  page.on('response', (answer) => void (answer.url().includes('/api/tiles/') && tiles.push(answer.status())));
  await page.goto('/logs?zip=54665&radiusMi=40');
  // A pile that lies by itself: the journeys publish theirs in one place.
  const row = page.locator('[data-listing]').filter({ hasText: 'Red pine, 5 logs' });
  const mark = page.getByRole('button', { name: /^Red pine, 5 logs, [\d.]+ miles away/ });
  await expect(mark).toBeVisible();
  await expect(mark).not.toHaveAttribute('data-lit');
  await row.hover();
  await expect(mark).toHaveAttribute('data-lit');
  await mark.focus();
  await page.keyboard.press('ArrowRight');
  await expect(mark).not.toBeFocused();
  await expect(mark).not.toHaveAttribute('data-lit');
  await page.keyboard.press('ArrowLeft');
  await expect(row).toHaveAttribute('data-lit');
  await page.keyboard.press('Enter');
  await expect(row.getByRole('link').first()).toBeFocused();
  await expectAccessible(page);
  expect([...new Set(tiles)]).toEqual([200]);
});
