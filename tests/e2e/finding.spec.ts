import { expect, test } from './support/check.ts';

test('a log is scaled as one types', async ({ page }) => {
  // Typed before the script has come: it is not put back.
  await page.route('**/_astro/*.js', async (route) => {
    await new Promise((done) => setTimeout(done, 500));
    await route.continue();
  });
  await page.goto('/', { waitUntil: 'commit' });
  await page.getByRole('textbox', { name: 'Small end' }).fill('18');
  // 18 in × 12 ft: International ¼ prints 170, Doyle 147.
  await expect(page.getByText('170 bf')).toBeVisible();
  await expect(page.getByText('147 bf')).toBeVisible();
  await page.getByRole('textbox', { name: 'Small end' }).fill('90');
  await expect(page.getByText('The small end is between 4 and 60 in.')).toBeVisible();
});

test.describe('without JavaScript', () => {
  test.use({ javaScriptEnabled: false });

  test('the estimator and the filters of the list still answer', async ({ page }) => {
    await page.goto('/');
    await page.getByRole('textbox', { name: 'Small end' }).fill('18');
    await page.getByRole('button', { name: 'Work it out' }).click();
    await expect(page.getByText('170 bf')).toBeVisible();

    await page.goto('/logs');
    await page.getByLabel('From ZIP').fill('54665');
    await page.getByLabel('Within', { exact: true }).selectOption('40');
    await page.getByLabel('Species').selectOption('white-oak');
    await page.getByRole('button', { name: 'Show logs' }).click();
    await expect(page).toHaveURL(/zip=54665&radiusMi=40&species=white-oak/);
    await expect(page.getByText(/within 40 miles · nearest first/)).toBeVisible();
  });

  test('the menu opens on a phone', async ({ page }) => {
    await page.setViewportSize({ width: 390, height: 844 });
    await page.goto('/');
    await page.getByText('Menu', { exact: true }).click();
    await page.getByRole('navigation', { name: 'Menu' }).getByRole('link', { name: 'Logs near you' }).click();
    await expect(page.getByRole('heading', { level: 1, name: 'Logs near you' })).toBeVisible();
  });
});
