import { formatCents } from '~/domain/money.ts';
import type { MailMessage } from '~/server/services/mail.ts';
import { letter } from './letter.ts';

interface Reader { readonly email: string; readonly name: string }
interface OfListing { readonly number: number; readonly title: string | null }
interface Figures { readonly expectedCents: number; readonly lowCents: number; readonly highCents: number; readonly holdCents: number }

const named = ({ title, number }: OfListing): string => title ?? `listing ${number}`;
const figures = (bid: Figures): readonly (readonly [string, string])[] => [
  ['Estimate', formatCents(bid.expectedCents)],
  ['Range', `${formatCents(bid.lowCents)} – ${formatCents(bid.highCents)}`],
  ['Held until you sign the tally', formatCents(bid.holdCents)],
];

/** To the landowner: a new bid. */
export const bidReceived = (owner: Reader, sawyer: string, listing: OfListing, bid: Figures, link: string): MailMessage =>
  letter(owner.email, `A bid on ${named(listing)}`, owner.name, [`${sawyer} bids on your logs.`, { facts: figures(bid) }, { button: 'Compare the bids', href: link }]);

/** To the landowner: a bid was changed, or confirmed on the listing as it is now. */
export const bidChanged = (owner: Reader, sawyer: string, listing: OfListing, bid: Figures, link: string): MailMessage =>
  letter(owner.email, `A bid on ${named(listing)} has new figures`, owner.name, [`${sawyer} changed or confirmed the bid on your logs.`, { facts: figures(bid) }, { button: 'Compare the bids', href: link }]);

/** To the landowner: a bid was taken back. */
export const bidWithdrawn = (owner: Reader, sawyer: string, listing: OfListing, link: string): MailMessage =>
  letter(owner.email, `A bid on ${named(listing)} was withdrawn`, owner.name, [`${sawyer} has withdrawn the bid on your logs.`, { button: 'See the other bids', href: link }]);

/** To the sawyer: chosen. */
export const bidChosen = (sawyer: Reader, owner: string, listing: OfListing, link: string): MailMessage =>
  letter(sawyer.email, `Your bid on ${named(listing)} was chosen`, sawyer.name, [`${owner} chose your bid. Next, agree on a day; the exact place is shown once the money is held.`, { button: 'Agree on a day', href: link }]);

/** To the landowner: what happens next. */
export const choiceConfirmed = (owner: Reader, sawyer: string, listing: OfListing, link: string): MailMessage =>
  letter(owner.email, `You chose ${sawyer} for ${named(listing)}`, owner.name, ['The other sawyers have been told. The terms are kept in a work agreement that you can both read and print. Next, agree on a day.', { button: 'Agree on a day', href: link }]);

/** To the others: not chosen. */
export const bidDeclined = (sawyer: Reader, listing: OfListing, link: string): MailMessage =>
  letter(sawyer.email, `Another bid was chosen for ${named(listing)}`, sawyer.name, ['The landowner chose another bid this time. If the listing opens again you may offer again.', { button: 'Your bids', href: link }]);
