import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import AxeBuilder from '@axe-core/playwright';
import { chromium, expect, test, type BrowserContext, type Page } from '@playwright/test';
import type { TallyView } from '../../src/schemas/tally-view.ts';
import { plainJpeg } from '../support/sample-pictures.ts';
import { expectAccessible, origin } from './support/check.ts';
import { expireSessions, makeJobs, ownWeb, type Job, type OwnWeb } from './support/job.ts';

/** A phone that can be switched off: its browser's files outlive the browser. */
interface Phone {
  readonly folder: string;
  readonly origin: string;
  context: BrowserContext;
  page: Page;
}

let web: OwnWeb;
let jobs: Job[] = [];
const folders: string[] = [];

async function switchOn(folder: string, offline: boolean, at = web.origin): Promise<Phone> {
  const { launchOptions } = test.info().project.use;
  const context = await chromium.launchPersistentContext(folder, { ...launchOptions, baseURL: at, locale: 'en-US', timezoneId: 'America/Chicago', viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true });
  await context.setOffline(offline);
  return { folder, origin: at, context, page: context.pages()[0] ?? (await context.newPage()) };
}

async function newPhone(at = web.origin): Promise<Phone> {
  const folder = mkdtempSync(join(tmpdir(), 'skidway-phone-'));
  folders.push(folder);
  return switchOn(folder, false, at);
}

async function signIn(page: Page, email: string, password: string): Promise<void> {
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.locator('main').getByRole('button', { name: 'Sign in' }).click();
}

/** Signs in and opens the day once with signal: from then on the phone has everything. */
async function prepare(phone: Phone, job: Job): Promise<void> {
  await phone.page.goto('/sign-in?next=/day');
  await signIn(phone.page, job.sawyer, job.password);
  await expect(phone.page.getByTestId('kept')).toContainText('Saved on this phone', { timeout: 30_000 });
  await phone.page.evaluate(async () => void (await navigator.serviceWorker.ready));
  await expect.poll(() => phone.page.evaluate(() => navigator.serviceWorker.controller !== null)).toBe(true);
}

/** Goes through the check-list and begins; on a phone whose signal is gone. */
async function begin(page: Page, job: Job): Promise<void> {
  await page.goto(`/day#${job.number}`);
  await page.getByRole('button', { name: 'Start sawing' }).click();
  await expect(page.getByText('Go through every point')).toBeVisible();
  for (const point of await page.getByRole('checkbox').all()) await point.check();
  await page.getByRole('button', { name: 'Start sawing' }).click();
  await expect(page.getByText('Sawn so far', { exact: true })).toBeVisible();
}

async function enterBoards(page: Page, width: string, count: number): Promise<void> {
  await page.getByRole('group', { name: 'Width, in' }).getByRole('button', { name: width, exact: true }).click();
  // As fast as a hand could ever tap: each tap is an entry of its own.
  await page.getByRole('button', { name: /^Add board/ }).evaluate(async (add: HTMLButtonElement, taps) => {
    for (let board = 0; board < taps; board += 1) {
      add.click();
      await new Promise((done) => setTimeout(done, 10));
    }
  }, count);
}

const tallyOf = async (page: Page, job: Job): Promise<TallyView> => (await page.request.get(`${web.origin}/api/bookings/${job.number}/tally`)).json();

/** For gloves and sun, with every part opened: 56 px to touch, 7:1 to read, upright, across, and with text at 200 %. */
async function expectForField(page: Page): Promise<void> {
  await page.locator('details:not([open]) > summary').evaluateAll((all) => { for (const one of all) (one as HTMLElement).click(); });
  const small = await page.locator('[data-outdoors] :is(button, input:not([type=checkbox], [type=file]), label:has([type=checkbox], [type=file]), select, summary)').evaluateAll((all) => all.map((one) => ({ name: one.textContent?.trim().slice(0, 30), box: one.getBoundingClientRect() })).filter(({ box }) => box.height > 0 && (box.height < 56 || box.width < 56)).map(({ name, box }) => `${name}: ${box.width} × ${box.height}`));
  expect(small).toEqual([]);
  await expectAccessible(page);
  const contrast = new AxeBuilder({ page }).include('[data-outdoors]').withRules(['color-contrast-enhanced']);
  expect((await contrast.analyze()).violations.flatMap(({ nodes }) => nodes.map(({ html }) => html))).toEqual([]);
  // 200 % text on a phone 390 px wide is the layout of 195 px: nothing may leave the screen sideways.
  for (const viewport of [{ width: 390, height: 844 }, { width: 320, height: 700 }, { width: 195, height: 422 }, { width: 844, height: 390 }]) {
    await page.setViewportSize(viewport);
    const over = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
    expect(over, `${viewport.width} px wide`).toBeLessThanOrEqual(0);
  }
  await page.setViewportSize({ width: 390, height: 844 });
  // Letters alone at twice their size, as a phone's own setting makes them.
  const atTwice = await page.evaluate(() => {
    const sheet = [...document.styleSheets].find(({ href }) => href?.startsWith(location.origin));
    const rule = sheet?.insertRule('html { font-size: 200% !important }', sheet.cssRules.length) ?? -1;
    const over = document.documentElement.scrollWidth - document.documentElement.clientWidth;
    sheet?.deleteRule(rule);
    return over;
  });
  expect(atTwice, 'letters at 200 %').toBeLessThanOrEqual(0);
}

/** The bookings are made at one go; each check takes the next. */
function takeJob(): Job {
  const job = jobs.shift();
  if (!job) throw new Error('More bookings are used than were made.');
  return job;
}

test.beforeAll(async () => {
  web = await ownWeb();
  jobs = makeJobs(4);
});
test.afterAll(async () => {
  await web.stop();
  for (const folder of folders) rmSync(folder, { recursive: true, force: true, maxRetries: 5 });
});

test('200 boards entered without signal on two phones arrive once each', async () => {
  // Three browsers are opened, a server is stopped and started; on a busy machine that takes its time.
  test.setTimeout(480_000);
  const job = takeJob();
  const [one, two] = [await newPhone(), await newPhone()];
  await prepare(one, job);
  await prepare(two, job);
  await one.context.setOffline(true);
  await two.context.setOffline(true);

  // Both phones begin and count by themselves; the second phone's clock is years wrong.
  await begin(one.page, job);
  await two.page.clock.setSystemTime(new Date('2031-03-01T12:00:00Z'));
  await begin(two.page, job);
  await enterBoards(one.page, '8', 100);
  await enterBoards(two.page, '6', 100);
  // 100 boards 4/4 × 8 × 12: 8 bf each.
  await expect(one.page.getByTestId('sawn-so-far')).toHaveText('800 bf');
  // The start is an entry too.
  await expect(one.page.getByTestId('saved')).toHaveText('No signal · 101 saved here');

  // Reloaded, then the battery dies: the browser is closed and opened again, still without signal. A service worker that starts anew
  // may get past the cut for a moment, so the server is away too.
  await web.stop();
  await one.page.reload();
  await expect(one.page.getByTestId('sawn-so-far')).toHaveText('800 bf');
  await one.context.close();
  Object.assign(one, await switchOn(one.folder, true));
  await one.page.goto('/');
  await expect(one.page.getByText('That page needs signal')).toBeVisible();
  await expect(one.page.getByTestId('kept')).toContainText('101 entries are saved here');
  await one.page.goto(`/bookings/${job.number}/tally`);
  await expect(one.page).toHaveURL(new RegExp(`/day#${job.number}$`));
  await expect(one.page.getByTestId('sawn-so-far')).toHaveText('800 bf');

  // Signal returns when the sign-in has run out: nothing is lost, and signing in again sends it.
  await web.start();
  expireSessions(job.sawyer);
  await one.context.setOffline(false);
  await expect(one.page.getByTestId('saved')).toHaveText('Signed out · 101 saved here');
  await one.page.getByRole('link', { name: 'Sign in again' }).first().click();
  await signIn(one.page, job.sawyer, job.password);
  await one.page.getByRole('link', { name: /White oak/ }).click();
  await expect(one.page.getByTestId('saved')).toHaveText(/^All sent at/);
  expect((await tallyOf(one.page, job)).boards).toHaveLength(100);

  // The second phone has signal while the server is down, and sends by itself once it is up again.
  await two.page.goto('/sign-in?next=/day').catch(() => undefined);
  await web.stop();
  await two.context.setOffline(false);
  await two.page.goto(`/day#${job.number}`);
  await expect(two.page.getByTestId('saved')).toHaveText('No signal · 101 saved here');
  await web.start();
  await expect(two.page.getByTestId('saved')).toHaveText(/Signed out · 101 saved here/, { timeout: 20_000 });
  const sent: string[] = [];
  two.page.on('request', (request) => {
    if (request.method() === 'PUT') sent.push(request.postData() ?? '');
  });
  await two.page.getByRole('link', { name: 'Sign in again' }).first().click();
  await signIn(two.page, job.sawyer, job.password);
  await two.page.getByRole('link', { name: /White oak/ }).click();
  await expect(two.page.getByTestId('saved')).toHaveText(/^All sent at/);
  // 100 more of 4/4 × 6 × 12: 6 bf each.
  await expect(two.page.getByTestId('sawn-so-far')).toHaveText('1,400 bf');

  // Everything that was sent is sent once more, as when an answer is lost on the way.
  for (const body of sent) {
    const again = await two.page.request.put(`${web.origin}/api/bookings/${job.number}/tally`, { headers: { 'content-type': 'application/json', origin: web.origin }, data: body });
    expect(again.status()).toBe(200);
  }
  const tally = await tallyOf(two.page, job);
  expect(tally.boards.reduce((sum, { count }) => sum + count, 0)).toBe(200);
  expect(new Set(tally.boards.map(({ id }) => id)).size).toBe(200);
  expect(tally.boards.filter(({ widthIn }) => widthIn === 6)).toHaveLength(100);
  for (const { context } of [one, two]) await context.close();
});

/** Draws something like a name with one finger. */
async function drawSignature(page: Page): Promise<void> {
  const field = page.getByTestId('signature');
  await field.scrollIntoViewIfNeeded();
  const box = await field.boundingBox();
  if (!box) throw new Error('There is no field to sign in.');
  await page.mouse.move(box.x + 30, box.y + box.height / 2);
  await page.mouse.down();
  for (let step = 1; step <= 12; step += 1) await page.mouse.move(box.x + 30 + step * 20, box.y + box.height / 2 + (step % 2 === 0 ? 25 : -25));
  await page.mouse.up();
}

test('the landowner signs on the sawyer’s phone without signal, and it settles when signal returns', async ({ browser }) => {
  const job = takeJob();
  // The product's own address: storage takes photographs from pages of that one alone.
  const phone = await newPhone(origin());
  await prepare(phone, job);
  const ada = await (await browser.newContext({ baseURL: origin() })).newPage();
  await ada.goto(`/sign-in?next=/bookings/${job.number}`);
  await signIn(ada, job.landowner, job.password);
  const code = /\b\d{6}\b/.exec(await ada.getByText('give this code').innerText())?.[0] ?? '';

  await phone.context.setOffline(true);
  await begin(phone.page, job);
  await enterBoards(phone.page, '8', 20);
  // A nail, and the boards: both photographs are kept on the phone.
  await phone.page.getByText(/^Metal hits/).click();
  await phone.page.getByRole('button', { name: 'Blade re-sharpened' }).click();
  await phone.page.getByLabel('Photograph the metal').setInputFiles({ name: 'nail.jpg', mimeType: 'image/jpeg', buffer: await plainJpeg(900, 600) });
  await expect(phone.page.getByText('Blade re-sharpened, 1 photographed', { exact: true })).toBeVisible();
  await phone.page.getByLabel('Photograph the boards').setInputFiles({ name: 'boards.jpg', mimeType: 'image/jpeg', buffer: await plainJpeg(600, 900) });
  await expect(phone.page.getByText('Boards: saved here', { exact: true })).toBeVisible();
  await phone.page.getByRole('button', { name: 'Offer the tally to Ada' }).click();
  // 160 bf × $0.50 = $80.00, set-up $75, travel $24, one blade re-sharpened $10.
  await expect(phone.page.getByRole('row', { name: /The work comes to/ })).toContainText('$189.00');
  await phone.page.getByRole('button', { name: 'Sign the tally' }).click();
  await expect(phone.page.getByText('Write your name.')).toBeVisible();
  await phone.page.getByLabel('Landowner’s name').fill('Ada Example');
  await phone.page.getByLabel('Landowner’s signing code').fill(code);
  await drawSignature(phone.page);
  await phone.page.getByRole('button', { name: 'Sign the tally' }).click();
  await expect(phone.page.getByText('The signature is kept on this phone')).toBeVisible();
  await phone.page.reload();
  await expect(phone.page.getByText('The signature is kept on this phone')).toBeVisible();

  await phone.context.setOffline(false);
  await expect(phone.page.getByTestId('saved')).toHaveText(/^All sent at/, { timeout: 30_000 });
  await expect(phone.page.getByText('It has been sent')).toBeVisible();
  await expect.poll(async () => (await ada.goto(`/bookings/${job.number}/sign`), ada.getByText('Signed by Ada Example').count()), { timeout: 30_000 }).toBeGreaterThan(0);
  const sheet = await ada.request.get(`/bookings/${job.number}/tally.pdf`);
  expect([sheet.status(), sheet.headers()['content-type']]).toEqual([200, 'application/pdf']);
  await expect.poll(async () => (await ada.goto(`/bookings/${job.number}`), ada.getByRole('img', { name: /^(Boards|Metal hit, blade re-sharpened)/ }).count()), { timeout: 30_000 }).toBe(2);
  // She adds one of her own, from the page of the day's photographs.
  await ada.goto(`/bookings/${job.number}/photographs`);
  await ada.getByLabel('Add photographs').setInputFiles({ name: 'stack.jpg', mimeType: 'image/jpeg', buffer: await plainJpeg(700, 500) });
  await expect(ada.getByRole('button', { name: /^Take out/ })).toHaveCount(1);
  await phone.context.close();
});

test('the cut sheet is on the sawyer’s phone, and the landowner’s own phone keeps the tally and their signature without signal', async () => {
  const job = takeJob();
  const [sawyer, landowner] = [await newPhone(), await newPhone()];
  await prepare(sawyer, job);
  await prepare(landowner, { ...job, sawyer: job.landowner });
  await sawyer.page.goto(`/day#${job.number}`);
  await expect(sawyer.page.getByTestId('on-this-phone')).toContainText('the cut sheet with its drawings');
  await sawyer.context.setOffline(true);
  await begin(sawyer.page, job);
  // The drawing, the toe board and the first cut; then the log as it lies for the next.
  await sawyer.page.getByText(/^Cut sheet · \d+ boards, \d+ cuts/).click();
  await expect(sawyer.page.getByText('Toe board under the small end')).toBeVisible();
  await expect(sawyer.page.getByTestId('this-cut')).toContainText(/Cut 1 of \d+/);
  await sawyer.page.getByRole('button', { name: 'Cut done · next' }).click();
  await expect(sawyer.page.getByRole('img', { name: /as it lies for cut 2/ })).toBeVisible();
  await sawyer.page.reload();
  await sawyer.page.getByText(/^Cut sheet/).click();
  await expect(sawyer.page.getByTestId('this-cut')).toContainText(/Cut 2 of \d+/);
  await enterBoards(sawyer.page, '8', 20);
  await sawyer.page.getByRole('button', { name: 'Offer the tally to Ada' }).click();
  await sawyer.context.setOffline(false);
  await expect(sawyer.page.getByTestId('saved')).toHaveText(/^All sent at/, { timeout: 30_000 });

  // The landowner reads it once with signal, and signs it without, their phone switched off in between.
  await landowner.page.goto(`/day#${job.number}`);
  // 160 bf × $0.50 = $80.00, set-up $75, travel $24.
  await expect(landowner.page.getByRole('row', { name: /The work comes to/ })).toContainText('$179.00');
  await landowner.context.setOffline(true);
  await landowner.page.reload();
  await expect(landowner.page.getByRole('row', { name: /The work comes to/ })).toContainText('$179.00');
  await expectForField(landowner.page);
  await landowner.page.getByLabel('Your name').fill('Ada Example');
  await drawSignature(landowner.page);
  await landowner.page.getByRole('button', { name: 'Sign the tally' }).click();
  await expect(landowner.page.getByText('The signature is kept on this phone')).toBeVisible();
  await landowner.context.close();
  Object.assign(landowner, await switchOn(landowner.folder, false));
  await landowner.page.goto(`/day#${job.number}`);
  await expect(landowner.page.getByText('It has been sent')).toBeVisible({ timeout: 30_000 });
  expect((await tallyOf(sawyer.page, job)).status).toMatch(/^(signed|settled)$/);
  for (const { context } of [sawyer, landowner]) await context.close();
});

test('is installable by the browser’s own criteria, and the estimator opens without signal', async () => {
  const phone = await newPhone();
  // The page opens so slowly that the worker, which another page asked for, takes over in the meantime.
  await phone.page.route('**/estimator', async (route) => {
    await expect.poll(async () => phone.context.serviceWorkers().length, { timeout: 60_000 }).toBe(1);
    await phone.context.serviceWorkers()[0]?.evaluate(async () => {
      const { registration } = globalThis as unknown as { registration: ServiceWorkerRegistration };
      while (registration.active?.state !== 'activated') await new Promise((done) => setTimeout(done, 50));
    });
    await route.continue();
  });
  await phone.page.goto('/sign-in');
  await phone.page.goto('/estimator');
  await phone.page.unroute('**/estimator');
  await expect.poll(() => phone.page.evaluate(() => navigator.serviceWorker.controller !== null)).toBe(true);
  const devtools = await phone.context.newCDPSession(phone.page);
  const { installabilityErrors } = await devtools.send('Page.getInstallabilityErrors');
  expect(installabilityErrors).toEqual([]);
  const cached = await phone.page.evaluate(async () => {
    const names = await caches.keys();
    const requests = await Promise.all(names.map(async (name) => (await caches.open(name)).keys()));
    return requests.flat().map(({ url }) => new URL(url).pathname);
  });
  expect(cached.filter((path) => !/^\/(_astro\/|day$|estimator$|icon-192\.png|favicon\.svg|manifest\.webmanifest)/.test(path)), 'only shells are kept').toEqual([]);
  await phone.context.setOffline(true);
  await phone.page.goto('/estimator?logs=white-oak_18');
  await expect(phone.page.locator('[data-ready="true"]')).toBeVisible();
  await phone.page.getByRole('combobox', { name: 'Species' }).fill('white oak');
  await phone.page.keyboard.press('Enter');
  await phone.page.getByLabel('Small end, inside bark').fill('18');
  await phone.page.getByLabel('Length, with trim').fill('12');
  await expect(phone.page.getByTestId('internationalQuarter')).toHaveText('170');
  await phone.context.close();
});

test('the pad is for gloves and sun, and signing out asks about entries that were not sent', async () => {
  const job = takeJob();
  const phone = await newPhone();
  await prepare(phone, job);
  await phone.context.setOffline(true);
  await begin(phone.page, job);
  await enterBoards(phone.page, '8', 3);
  await expectForField(phone.page);

  // Signing out takes the days off the phone, and keeps what was not sent for the next time.
  await phone.page.route('**/api/bookings/*/tally', (route) => route.abort());
  await phone.context.setOffline(false);
  await phone.page.goto('/bookings');
  await phone.page.getByText('Menu').click();
  const asked = phone.page.waitForEvent('dialog');
  const click = phone.page.getByRole('button', { name: 'Sign out' }).click();
  const dialog = await asked;
  expect(dialog.message()).toContain('not sent yet');
  await dialog.accept();
  await click;
  await expect(phone.page).toHaveURL(`${web.origin}/`);
  await phone.page.unroute('**/api/bookings/*/tally');
  await phone.page.goto('/day');
  await expect(phone.page.getByRole('main').getByRole('link', { name: 'Sign in' })).toBeVisible();
  await expect(phone.page.getByText('White oak')).toHaveCount(0);
  await phone.page.getByRole('main').getByRole('link', { name: 'Sign in' }).click();
  await signIn(phone.page, job.sawyer, job.password);
  await expect(phone.page.getByTestId('kept')).toContainText('Saved on this phone');
  await expect(phone.page.getByText('not sent yet')).toHaveCount(0);
  expect((await tallyOf(phone.page, job)).boards).toHaveLength(3);
  await phone.context.close();
});
