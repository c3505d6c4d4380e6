import { formatCents, type Cents } from '~/domain/money.ts';
import { formatInstant } from '~/domain/time.ts';
import type { MailMessage } from '~/server/services/mail.ts';
import { letter } from './letter.ts';

interface To {
  readonly name: string;
  readonly email: string;
}

/** The money is held: to the landowner as a receipt, to the sawyer as the word to come. */
export const moneyHeld = (to: To, other: To, held: { readonly cents: Cents; readonly startsAt: Date; readonly zone: string; readonly mine: boolean }, link: string): MailMessage =>
  letter(to.email, `Held: ${formatCents(held.cents)} for ${formatInstant(held.startsAt, held.zone)}`, to.name, [
    held.mine
      ? `Your ${formatCents(held.cents)} is held until you sign the tally. What is not used returns to your card.`
      : `${other.name} paid the hold of ${formatCents(held.cents)}. It is held until the tally is signed. The place and the access notes are on the booking.`,
    { button: 'See the booking', href: link },
  ]);

/** More money was added to a hold. */
export const holdGrew = (to: To, addedCents: Cents, heldCents: Cents, link: string): MailMessage =>
  letter(to.email, `${formatCents(addedCents)} added to the hold`, to.name, [`${formatCents(addedCents)} was added. Held in all: ${formatCents(heldCents)}.`, { button: 'See the booking', href: link }]);

/** Money came for something no longer owed and goes back whole. */
export const moneyReturned = (to: To, cents: Cents, why: string, link: string): MailMessage =>
  letter(to.email, `${formatCents(cents)} goes back to your card`, to.name, [`${why} The whole ${formatCents(cents)} goes back to your card; your bank takes some days.`, { button: 'See the booking', href: link }]);

/** The hold was not paid in time. */
export const bookingLapsed = (to: To, mine: boolean, link: string): MailMessage =>
  letter(to.email, 'The booking lapsed: the hold was not paid', to.name, [
    mine ? 'The hold was not paid in time. The day is free again and your listing is open for bids.' : 'The hold was not paid in time. Your day is free again.',
    { button: 'See the booking', href: link },
  ]);

/** Pay waits for a payout account. */
export const payoutNeeded = (to: To, bookingNumber: number, link: string): MailMessage =>
  letter(to.email, 'Your pay waits for a payout account', to.name, [
    `The tally of booking ${bookingNumber} is signed and your pay is ready. Set up the account that it is paid to; it is released as soon as the payment provider has what it asks for.`,
    { button: 'Set up payouts', href: link },
  ]);

/** Pay still waits for a payout account. */
export const payoutReminder = (to: To, cents: Cents, jobs: number, link: string): MailMessage =>
  letter(to.email, `${formatCents(cents)} waits for your payout account`, to.name, [
    `Your pay for ${jobs === 1 ? 'a signed tally' : `${jobs} signed tallies`}, ${formatCents(cents)} in all, waits until the payment provider has what it needs to pay you out.`,
    { button: 'Set up payouts', href: link },
  ]);

/** A moderator asks another to approve an adjustment. */
export const adjustmentAsked = (to: To, byName: string, cents: Cents, reason: string, link: string): MailMessage =>
  letter(to.email, `To approve: ${formatCents(cents)}`, to.name, [`${byName} asks a second moderator to approve an adjustment.`, { facts: [['Amount', formatCents(cents)], ['Reason', reason]] }, { button: 'See it on the desk', href: link }]);

/** A moderator ended the waiting for a top-up. */
export const settledAsHeld = (to: To, reason: string, cents: Cents, link: string): MailMessage =>
  letter(to.email, 'Settled with what was held', to.name, [`A moderator settled the booking with the ${formatCents(cents)} that was held: ${reason}`, { button: 'See the receipt', href: link }]);

/** Paid out: the receipt of each side. */
export const paidOut = (to: To, figures: readonly (readonly [label: string, value: string])[], mine: 'landowner' | 'sawyer', link: string): MailMessage =>
  letter(to.email, mine === 'sawyer' ? 'Your pay is released' : 'Receipt: settled', to.name, [
    mine === 'sawyer' ? 'Your pay is released today; your bank takes some days.' : 'The booking is settled. What was not used is on its way to your card; your bank takes some days.',
    { facts: figures },
    { button: 'See the receipt', href: link },
  ]);

/** A card payment is disputed, or the dispute has ended. `ended`: the booking is over. */
export function disputeNews(to: To, bookingNumber: number, news: 'open' | 'won' | 'lost', cents: Cents, about: { readonly mine: 'landowner' | 'sawyer'; readonly ended: boolean }, link: string): MailMessage {
  const lost = `The bank gave ${formatCents(cents)} back to ${about.mine === 'landowner' ? 'your card' : 'the card'}.`;
  const follows = about.ended ? ' The booking is over.' : about.mine === 'sawyer' ? ' What had been released to you from this payment is owed back, and is taken out of your balance at the payment provider where it can be.' : '';
  return letter(to.email, `Card payment of booking ${bookingNumber} ${news === 'open' ? 'is disputed' : `: dispute ${news}`}`, to.name, [
    {
      open: `The card payment of ${formatCents(cents)} is disputed at the bank. Nothing more is paid out from it until the bank has decided.`,
      won: `The bank decided for the payment: ${formatCents(cents)} stands.`,
      lost: `${lost}${follows}`,
    }[news],
    { button: 'See the booking', href: link },
  ]);
}
