import { expect, type Page } from '@playwright/test';
import { field } from './listing-form.ts';

/** The stand-in's card page, filled in and sent. */
export async function payByCard(page: Page, cardNumber: string): Promise<void> {
  await expect(page.getByText('Stand-in card page')).toBeVisible();
  for (const [name, value] of Object.entries({ email: 'payer@e2e.example', cardNumber, cardExpiry: '12 / 34', cardCvc: '123', billingName: 'A Payer', billingPostalCode: '54665' })) await field(page, name).fill(value);
  await page.getByRole('button', { name: /^Pay \$/ }).click();
}
