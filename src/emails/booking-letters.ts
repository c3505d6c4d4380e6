import { formatCents } from '~/domain/money.ts';
import { formatDayWithYear, formatInstant, type Day } from '~/domain/time.ts';
import { letter } from './letter.ts';
import type { MailMessage } from '~/server/services/mail.ts';

interface To {
  readonly name: string;
  readonly email: string;
}

const dayList = (days: readonly Day[]): string => days.map(formatDayWithYear).join(', ');

/** The other side proposes days. */
export const daysProposed = (to: To, from: To, days: readonly Day[], startTime: string, note: string, link: string): MailMessage =>
  letter(to.email, `${from.name} proposes ${dayList(days)}`, to.name, [
    `${from.name} proposes ${days.length === 1 ? 'a milling day' : 'milling days'}. Confirm, or propose another.`,
    { facts: [['Days', dayList(days)], ['Start', startTime], ...(note ? [['Note', note] as const] : [])] },
    { button: 'See the booking', href: link },
  ]);

/** Both agreed; the landowner is told to pay the hold, the sawyer that it is awaited. */
export const daysAgreed = (to: To, other: To, startsAt: Date, zone: string, hold: { cents: number; payBy: Date; mine: boolean }, link: string): MailMessage =>
  letter(to.email, `Agreed: ${formatInstant(startsAt, zone)}`, to.name, [
    `You and ${other.name} agree on ${formatInstant(startsAt, zone)}.`,
    hold.mine
      ? `Pay the hold of ${formatCents(hold.cents)} by ${formatInstant(hold.payBy, zone)}, or the booking lapses and the day is given back. It is held until you sign the tally; what is not used returns to your card.`
      : `${other.name} has until ${formatInstant(hold.payBy, zone)} to pay the hold of ${formatCents(hold.cents)}. Do not set out before the booking says that the money is held.`,
    { button: hold.mine ? 'Pay the hold' : 'See the booking', href: link },
  ]);

/** A held or agreed booking has new days. */
export const daysMoved = (to: To, other: To, days: readonly Day[], startsAt: Date, zone: string, link: string): MailMessage =>
  letter(to.email, `Moved to ${formatInstant(startsAt, zone)}`, to.name, [
    `You and ${other.name} moved the work. The money stays as it is; nothing is paid again.`,
    { facts: [['Days', dayList(days)], ['Start', formatInstant(startsAt, zone)]] },
    { button: 'See the booking', href: link },
  ]);

/** A booking ends before sawing. */
export const bookingCancelled = (to: To, by: string, reason: string, money: string, link: string): MailMessage =>
  letter(to.email, 'The booking is cancelled', to.name, [
    `${by} cancelled the booking${reason ? `: ${reason}` : '.'}`,
    money,
    { button: 'See the booking', href: link },
  ]);

/** The calendar event in an invitation or an update. */
export const calendarNote = (to: To, summary: string, link: string, cancelled: boolean): MailMessage =>
  letter(to.email, cancelled ? `Removed from your calendar: ${summary}` : `For your calendar: ${summary}`, to.name, [
    cancelled ? 'The attached event takes these days out of your calendar.' : 'The attached event puts these days in your calendar. It is updated when the day changes.',
    { button: 'See the booking', href: link },
  ]);

/** A new message is waiting. */
export const messageWaiting = (to: To, from: To, about: string, body: string, link: string): MailMessage =>
  letter(to.email, `${from.name} wrote about ${about}`, to.name, [`${from.name} wrote:`, body.length > 500 ? `${body.slice(0, 500)} …` : body, { button: 'Answer', href: link }]);

/** A review was written. */
export const reviewWritten = (to: To, from: To, link: string): MailMessage =>
  letter(to.email, `${from.name} wrote a review`, to.name, [`${from.name} wrote a review of your job together.`, { button: 'Read it', href: link }]);

/** The list of the evening before, for one side. `code` is the landowner's own, for signing on the sawyer's phone. */
export const eveningBefore = (to: To, other: To, startsAt: Date, zone: string, ready: readonly string[], code: string | null, link: string): MailMessage =>
  letter(to.email, `Tomorrow: ${formatInstant(startsAt, zone)}`, to.name, [
    `${other.name} and you meet at the logs tomorrow. Have this ready tonight:`,
    ...ready.map((line) => `• ${line}.`),
    ...(code ? [`To sign the tally on ${other.name}’s phone you give this code, which only you have: ${code}. Keep it to yourself until you sign.`] : []),
    { button: 'Keep the day on this phone', href: link },
  ]);

/** The day the landowner chose to look at their stack. */
export const boardsReminder = (to: To, targetPct: number, link: string): MailMessage =>
  letter(to.email, 'Your boards: look at the stack today', to.name, [
    'You asked to be reminded today. Measure the moisture of the same boards as before, look for blue stain under the stickers, and restack or bring them in.',
    `You wanted ${targetPct} %. Boards for indoors need 6 to 8 %, which no stack outdoors reaches.`,
    { button: 'Open the readings', href: link },
  ]);
