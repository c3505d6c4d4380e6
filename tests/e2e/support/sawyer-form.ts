import type { Page } from '@playwright/test';
import { expect } from './check.ts';
import { field } from './listing-form.ts';

/** A new sawyer's mill, rates and profile, from nothing: $0.50 / bf, set-up $75, $2 a mile beyond 25. Leaves the page where setting up ends. */
export async function setUpSawyer(page: Page, businessName: string): Promise<void> {
  await page.goto('/sawyer/mill');
  for (const [name, value] of Object.entries({ name: 'Wide band', kerfIn: '3/32', largestLogIn: '36', widestCutIn: '30', widestBoardIn: '28', longestFt: '20', shortestFt: '4', paceBfPerHour: '250' })) await field(page, name).fill(value);
  await page.locator('[name="kind"][value="band"]').check();
  await page.locator('[name="turnsLogsBy"][value="machine"]').check();
  await page.getByRole('button', { name: 'Save this mill' }).click();
  await expect(page).not.toHaveURL(/\/sawyer\/mill/);
  await page.goto('/sawyer/rates');
  await page.locator('[name="basis"][value="lumber-tally"]').check();
  for (const [name, value] of Object.entries({ priceWithout: '0.50', priceWith: '0.60', setUp: '75', freeMiles: '25', perMile: '2', minimum: '200', resharpened: '10', destroyed: '35', metalCap: '105' })) await field(page, name).fill(value);
  await page.getByRole('button', { name: 'Save the rates' }).click();
  await expect(page).not.toHaveURL(/\/sawyer\/rates/);
  await page.goto('/sawyer/profile');
  for (const [name, value] of Object.entries({ businessName, zip: '54665', travelMiles: '60', noticeDays: '0' })) await field(page, name).fill(value);
  for (const box of await page.locator('[name="workingDays"]').all()) await box.check();
  await page.getByRole('button', { name: 'Save the profile' }).click();
  await expect(page).not.toHaveURL(/\/sawyer\/profile/);
}
