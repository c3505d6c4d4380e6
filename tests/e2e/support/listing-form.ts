import type { Page } from '@playwright/test';

/** A calendar day so many days from now, as date fields take it. */
export const dayFromNow = (days: number): string => new Date(Date.now() + days * 86_400_000).toISOString().slice(0, 10);

/** A field of a form by its name. */
export const field = (page: Page, name: string) => page.locator(`[name="${name}"]`);

/** Everything that a listing asks for besides its logs. */
export async function fillTheRest(page: Page): Promise<void> {
  const choices = { treeOwner: 'mine', howDown: 'uprooted', sealed: 'no', truck: 'to-the-logs', slope: 'level', lines: 'near', machine: 'tractor', water: 'yes', reDecks: 'owner', slabs: 'left', sawdust: 'left', metal: 'lawn-tree' };
  for (const [name, value] of Object.entries(choices)) await page.locator(`[name="${name}"][value="${value}"]`).check();
  await field(page, 'ownerConfirmed').check();
  await field(page, 'cameDownOn').fill(dayFromNow(-6));
  await field(page, 'zip').fill('54665');
}
