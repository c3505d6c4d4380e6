import type { Page } from '@playwright/test';
import { PASSWORD, readMail } from '../../support/browser.ts';
import { expect, mailbox } from './check.ts';

/** A person of a journey. The address is new for each run of a check, so that none depends on another. */
export interface Person {
  readonly name: string;
  readonly email: string;
  readonly as: 'landowner' | 'sawyer';
}

/** Fills in and sends the sign-up form that the page shows. */
export async function fillSignUp(page: Page, { name, email, as }: Person): Promise<void> {
  await page.getByLabel(as === 'sawyer' ? 'I own a mill' : 'I have logs to be sawn').check();
  await page.getByLabel('Your name').fill(name);
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(PASSWORD);
  await page.getByLabel('I am 18 or older').check();
  await page.getByRole('button', { name: 'Open an account' }).click();
}

/** Confirms the address by the letter's link in a window of its own, which is where a person then goes on. */
export async function confirmAddress(page: Page, email: string): Promise<Page> {
  const letter = await readMail(mailbox(), email, 'Confirm');
  const window = await page.context().newPage();
  await window.goto(letter.links.find((one) => one.includes('/confirm-email/')) ?? '');
  await window.getByRole('button', { name: 'Confirm this address' }).click();
  await window.waitForURL((url) => !url.pathname.startsWith('/confirm-email'));
  return window;
}

/** Opens an account from nothing and confirms its address. The page is signed in afterwards. */
export async function openAccount(page: Page, person: Person): Promise<void> {
  await page.goto('/sign-up');
  await fillSignUp(page, person);
  await expect(page).not.toHaveURL(/sign-up/);
  await (await confirmAddress(page, person.email)).close();
}

/** Signs in by the form. */
export async function signIn(page: Page, email: string, password: string = PASSWORD, next = '/account'): Promise<void> {
  await page.goto(`/sign-in?next=${encodeURIComponent(next)}`);
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.locator('main').getByRole('button', { name: 'Sign in' }).click();
  await expect(page).not.toHaveURL(/sign-in/);
}
