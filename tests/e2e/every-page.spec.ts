import { another, expect, expectAccessible, test } from './support/check.ts';
import { pageFiles, seeEveryPage } from './support/every-page.ts';
import { signIn } from './support/people.ts';

/** Pages that no link of the demo leads to, with the journey that sees them. The moderator's desk is seen in `desk.spec.ts`. */
const elsewhere: Readonly<Record<string, string>> = {
  '404.astro': 'below',
  'refused.astro': 'below, as what a page answers to somebody else',
  '500.astro': 'access.test.ts; a browser counts its answer as a fault',
  'sign-in/second-factor.astro': 'desk.spec.ts',
  'confirm-email/[token].astro': 'job.spec.ts',
  'reset-password/[token].astro': 'job.spec.ts',
  'bookings/[number]/paid.astro': 'money.spec.ts',
  'bookings/[number]/review.astro': 'job.spec.ts',
  'bookings/[number]/decide.astro': 'desk.spec.ts',
  'searches/stop/[token].astro': 'trips.spec.ts',
  'sawyer/trips/new.astro': 'trips.spec.ts',
};

test('every page fits 320 px and has no fault that axe finds', async ({ browser }) => {
  test.setTimeout(480_000);
  const seen = new Set<string>();
  for (const [email, from] of [[null, '/'], ['ada@skidway.example', '/listings'], ['bram@skidway.example', '/sawyer'], ['vera@skidway.example', '/listings']] as const) {
    const { page, faults } = await another(browser);
    if (email) await signIn(page, email, 'boards-in-hand', '/bookings');
    // Reporting that nobody came is linked on the day alone.
    const booking = email && (await page.locator('main a[href^="/bookings/"]').first().getAttribute('href'));
    await seeEveryPage(page, seen, from, booking ? [`${booking}/no-show`] : []);
    expect(faults).toEqual([]);
    await page.context().close();
  }
  expect(pageFiles.filter((file) => !seen.has(file) && !file.startsWith('desk/') && !(file in elsewhere))).toEqual([]);
});

test('the public pages have no fault in the dark either', async ({ page }) => {
  await page.emulateMedia({ colorScheme: 'dark' });
  for (const path of ['/', '/logs?zip=54665&radiusMi=40', '/sawyers?zip=54665', '/safety', '/estimator', '/sign-up', '/no/such/page', '/listings/1']) {
    await page.goto(path);
    await expectAccessible(page);
  }
});
