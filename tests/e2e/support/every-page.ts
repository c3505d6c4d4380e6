import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { expect, type Page } from '@playwright/test';
import { root } from '../../../src/launch/setup.mjs';
import { expectAccessible, origin } from './check.ts';

const folder = join(root, 'src/pages');
const toPattern = (file: string): RegExp => new RegExp(`^/${file.replace(/(^|\/)index\.astro$|\.astro$/, '').replace(/\[[^\]]+\]/g, '[^/]+')}/?$`);

/** Every page as its file under `src/pages`, those with a fixed address first. */
const pages = readdirSync(folder, { recursive: true, encoding: 'utf8' })
  .filter((file) => file.endsWith('.astro'))
  .sort((a, b) => a.split('[').length - b.split('[').length || a.localeCompare(b))
  .map((file) => ({ file, pattern: toPattern(file) }));

export const pageFiles: readonly string[] = pages.map(({ file }) => file);

/** Pages whose looks differ most with what they are about and who looks: each person sees so many. */
const SEVERAL: Readonly<Record<string, number>> = { 'bookings/[number]/index.astro': 5, 'listings/[number]/index.astro': 3, 'logs.astro': 1, 'bookings/[number]/tally.astro': 1 };

/**
 * Follows every link of ours from a page, as whoever is signed in, and sees one page of each kind that nobody saw before. Each has to be free of what axe finds, and to
 * fit a window of 320 px.
 * @param seen the files of the pages seen so far; those seen now are added
 * @param also addresses that no link leads to at the time
 */
export async function seeEveryPage(page: Page, seen: Set<string>, from: string, also: readonly string[] = []): Promise<void> {
  await page.setViewportSize({ width: 320, height: 720 });
  const waiting = [from, ...also];
  const known = new Set(waiting);
  const before = new Set(seen);
  const times = new Map<string, number>();
  for (let path = waiting.shift(); path !== undefined; path = waiting.shift()) {
    const { pathname } = new URL(path, origin());
    const file = pages.find(({ pattern }) => pattern.test(pathname))?.file;
    if (file === undefined || (path !== from && (times.get(file) ?? 0) >= (SEVERAL[file] ?? (before.has(file) ? 0 : 1)))) continue;
    const answer = await page.goto(path);
    expect(answer?.status(), `${path} is linked and has to answer`).toBe(200);
    const shown = pages.find(({ pattern }) => pattern.test(new URL(page.url()).pathname))?.file ?? file;
    times.set(shown, (times.get(shown) ?? 0) + 1);
    seen.add(shown);
    await expectAccessible(page);
    expect(await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth), `${path} is wider than 320 px`).toBeLessThanOrEqual(0);
    for (const href of await page.locator('a[href]').evaluateAll((links) => links.map((link) => (link as HTMLAnchorElement).href))) {
      const next = new URL(href);
      const address = next.pathname + next.search;
      if (next.origin !== origin() || known.has(address)) continue;
      known.add(address);
      waiting.push(address);
    }
  }
}
