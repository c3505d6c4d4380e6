import { expect, test } from './support/check.ts';
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
