import type { MailMessage } from '~/server/services/mail.ts';
import { letter } from './letter.ts';

interface To {
  readonly name: string;
  readonly email: string;
}

/** The listing is on show. */
export const listingPublished = (to: To, title: string, closes: string, link: string): MailMessage =>
  letter(to.email, `On show: ${title}`, to.name, [
    'Sawyers near you can see your listing and bid on it. They see the town and a point about a mile wide, never the exact place.',
    { facts: [['Listing', title], ['Closes to bids', closes]] },
    'Seal the log ends if you have not, keep the logs off the dirt, and look at the bids as they come.',
    { button: 'See your listing', href: link },
  ]);

/** A sawyer's open bid has to be confirmed, because what it was worked out on has changed. */
export const bidToConfirm = (to: To, title: string, changed: readonly string[], link: string): MailMessage =>
  letter(to.email, `Changed: ${title}`, to.name, [
    `The landowner changed a listing you bid on: ${changed.join(', ')}. Your bid is on hold until you have looked at it again.`,
    'Confirm it as it stands, change it, or withdraw it. Until then it cannot be chosen.',
    { button: 'Look at your bid', href: link },
  ]);

/** Something changed that does not touch what the bid was worked out on. */
export const listingChanged = (to: To, title: string, changed: readonly string[], link: string): MailMessage =>
  letter(to.email, `Changed: ${title}`, to.name, [
    `The landowner changed a listing you bid on: ${changed.join(', ')}. Your bid stands as it is; change it if you need to.`,
    { button: 'See the listing', href: link },
  ]);

/** The landowner took the listing back. */
export const listingWithdrawn = (to: To, title: string, reason: string, link: string): MailMessage =>
  letter(to.email, `Withdrawn: ${title}`, to.name, [
    `The landowner has withdrawn a listing you bid on, so your bid has lapsed. ${reason === '' ? 'No reason was given.' : `They say: “${reason}”`}`,
    { button: 'Find other logs near you', href: link },
  ]);

/** The closing date has passed; the landowner has a week to choose. */
export const listingClosed = (to: To, title: string, bids: number, chooseBy: string, link: string): MailMessage =>
  letter(to.email, `Closed to bids: ${title}`, to.name, [
    bids === 0
      ? `The closing date has passed and nobody has bid. The listing lapses on ${chooseBy}. You can list the logs again with a later date, more photographs, or a landing that is easier to reach.`
      : `The closing date has passed. You have ${bids === 1 ? 'one bid' : `${bids} bids`} to look at. Choose by ${chooseBy}; after that the listing lapses.`,
    { button: bids === 0 ? 'See your listing' : 'Compare the bids', href: link },
  ]);

/** Nobody was chosen in time: to the landowner. */
export const listingLapsed = (to: To, title: string, link: string): MailMessage =>
  letter(to.email, `Lapsed: ${title}`, to.name, ['No bid was chosen within a week of the closing date, so the listing has lapsed. You can list the logs again at any time.', { button: 'See your listing', href: link }]);

/** Nobody was chosen in time: to a sawyer who had bid. */
export const bidLapsed = (to: To, title: string, link: string): MailMessage =>
  letter(to.email, `No choice made: ${title}`, to.name, ['The landowner chose no bid within a week of the closing date, so the listing and your bid have lapsed.', { button: 'Find other logs near you', href: link }]);
