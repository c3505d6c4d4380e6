import { letter } from './letter.ts';
import type { MailMessage } from '~/server/services/mail.ts';

interface To {
  readonly name: string;
  readonly email: string;
}

/** After signing up, or when asked for again. */
export const confirmAddress = (to: To, link: string): MailMessage =>
  letter(to.email, 'Confirm your e-mail address', to.name, [
    'One step is left: open this page and press the button. Until then you can look round, but not list logs, bid or write.',
    { button: 'Confirm this address', href: link },
    'The link works once, for three days. If you did not sign up at Skidway, do nothing: without the confirmation the account can do nothing either.',
  ]);

/** To the new address of an account that asks to move there. */
export const confirmNewAddress = (to: To, link: string): MailMessage =>
  letter(to.email, 'Confirm your new e-mail address', to.name, [
    'You asked to use this address for your Skidway account. It changes when you open this page and press the button.',
    { button: 'Use this address', href: link },
    'The link works once, for 24 hours. If you did not ask for this, do nothing.',
  ]);

/** To the old address when a change was asked for, and again when it was made. */
export const addressChanging = (to: To, done: boolean): MailMessage =>
  letter(to.email, done ? 'Your e-mail address was changed' : 'A new e-mail address was asked for', to.name, [
    done ? 'Letters from Skidway now go to the new address, and you sign in with it.' : 'Someone who knows your password asked to move your Skidway account to another address. Nothing changes until the new address is confirmed.',
    'If that was not you, change your password now and end the other sessions under Account.',
  ]);

/** To an address that asks for a new password and has an account. */
export const newPasswordLink = (to: To, link: string): MailMessage =>
  letter(to.email, 'Choose a new password', to.name, [
    'Open this page to choose a new password. Every session of your account is ended when you do.',
    { button: 'Choose a new password', href: link },
    'The link works once, for one hour. If you did not ask for it, do nothing: your password stays as it is.',
  ]);

/** After any change of the password. */
export const passwordChanged = (to: To): MailMessage =>
  letter(to.email, 'Your password was changed', to.name, ['The password of your Skidway account was changed just now, and other sessions were ended.', 'If that was not you, ask for a new password on the sign-in page at once.']);

/** After the second factor was turned on or off. */
export const secondFactorChanged = (to: To, on: boolean): MailMessage =>
  letter(to.email, on ? 'Signing in now asks for a code' : 'Signing in no longer asks for a code', to.name, [
    on ? 'From now on signing in asks for a code of your authenticator app as well as your password. Other sessions were ended.' : 'The second step of signing in was turned off.',
    'If that was not you, change your password now.',
  ]);

/** After the account was closed: the last letter. */
export const accountClosed = (to: To): MailMessage =>
  letter(to.email, 'Your account is closed', to.name, ['Your Skidway account is closed. Your name, address, profile, photographs and messages are gone from it. Records of money stay, as the law asks, without your name on them.']);

/** To someone whose account a moderator suspended. */
export const accountSuspended = (to: To, reason: string): MailMessage =>
  letter(to.email, 'Your account is suspended', to.name, [
    `A moderator suspended your account: ${reason}`,
    'You can still sign in and read. Open listings and bids were taken back, and bookings that had not begun were cancelled; money held for those goes back whole. Jobs on which sawing has begun are settled with a moderator.',
    'Answer this letter if you think that this is wrong.',
  ]);

/** To someone whose suspension ended. */
export const accountRestored = (to: To): MailMessage =>
  letter(to.email, 'Your account works again', to.name, ['The suspension of your account has ended. Listings and bids that were taken back stay so: make them anew if you like.']);

/** To the owner of a listing that a moderator hid, or showed again. */
export const listingHidden = (to: To, title: string, reason: string | null, link: string): MailMessage =>
  letter(to.email, reason === null ? `Shown again: ${title}` : `Hidden: ${title}`, to.name, [
    reason === null ? 'A moderator shows your listing again.' : `A moderator hid your listing from others: ${reason}`,
    { button: 'See the listing', href: link },
  ]);

/** To the owner of a listing whose bidder left or was suspended. */
export const bidTakenBack = (to: To, title: string, link: string): MailMessage =>
  letter(to.email, `A bid was taken back: ${title}`, to.name, ['One of the bids on your listing was taken back, because its sawyer no longer works here. The others stand.', { button: 'See the bids', href: link }]);
