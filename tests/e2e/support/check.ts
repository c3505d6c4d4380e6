import AxeBuilder from '@axe-core/playwright';
import { test as base, expect, type Browser, type Page } from '@playwright/test';
import { forgetTries } from './limits.ts';

/** Where the product answers. */
export const origin = (): string => process.env['E2E_ORIGIN'] ?? '';
/** The mailbox page's origin. */
export const mailbox = (): string => process.env['E2E_MAIL'] ?? '';

/** Watches a page: an error in its console, an exception, or a request to anywhere but us and the stand-ins fails the check. */
export function watch(page: Page): string[] {
  const faults: string[] = [];
  page.on('console', (message) => {
    if (message.type() === 'error' && !/the server responded with a status of (4\d\d)/.test(message.text())) faults.push(`console: ${message.text()}`);
  });
  page.on('pageerror', (error) => faults.push(`exception: ${error.message}`));
  page.on('request', (request) => {
    const { hostname, protocol } = new URL(request.url());
    if (protocol.startsWith('http') && hostname !== 'localhost' && hostname !== '127.0.0.1') faults.push(`request to ${request.url()}`);
  });
  return faults;
}

/** A check whose page is watched from beginning to end. */
export const test = base.extend<{ faults: string[] }>({
  baseURL: async ({}, use) => use(origin()),
  faults: [
    async ({ page }, use) => {
      await forgetTries();
      const faults = watch(page);
      await use(faults);
      expect(faults).toEqual([]);
    },
    { auto: true },
  ],
});
export { expect };

/**
 * No breach of WCAG 2.2 A or AA that axe can find on the page as it stands. No page of ours has a frame, so axe gathers its findings in
 * the page itself; otherwise it opens a second page for each run, which takes longer than the run.
 */
export async function expectAccessible(page: Page): Promise<void> {
  const { violations } = await new AxeBuilder({ page }).setLegacyMode(true).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']).analyze();
  expect(violations.map((one) => `${one.id}: ${one.nodes.map((node) => node.target.join(' ')).slice(0, 3).join(' | ')}`)).toEqual([]);
}

/** A second person: a browser context of their own, watched too. */
export async function another(browser: Browser, options: { phone?: boolean } = {}): Promise<{ page: Page; faults: string[] }> {
  const context = await browser.newContext({ baseURL: origin(), locale: 'en-US', timezoneId: 'America/Chicago', viewport: options.phone ? { width: 390, height: 844 } : { width: 1280, height: 900 }, ...(options.phone ? { hasTouch: true, isMobile: true } : {}) });
  const page = await context.newPage();
  return { page, faults: watch(page) };
}

/** Waits until every island that is loaded at once answers to input. */
export const awake = (page: Page): Promise<void> => expect(page.locator('astro-island[ssr][client="load"]')).toHaveCount(0);
