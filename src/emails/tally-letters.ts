import { formatCents } from '~/domain/money.ts';
import { formatInstant } from '~/domain/time.ts';
import type { MailMessage } from '~/server/services/mail.ts';
import { letter } from './letter.ts';

interface To {
  readonly name: string;
  readonly email: string;
}

/** The tally waits for the landowner's signature; also the two reminders. */
export const tallyToSign = (to: To, sawyer: string, cents: number, signBy: Date, zone: string, link: string, reminder: boolean): MailMessage =>
  letter(to.email, `${reminder ? 'Still waiting: ' : ''}${sawyer}’s tally to sign`, to.name, [
    `${sawyer} has finished the tally. Read it by log and by size, then sign it or query the lines that look wrong.`,
    { facts: [['It comes to', formatCents(cents)], ['Answer by', formatInstant(signBy, zone)]] },
    `After that it counts as signed, up to what is held. What is not used returns to your card.`,
    { button: 'Read the tally', href: link },
  ]);

/** Tells the sawyer that an unanswered tally will count as signed. */
export const tallyWaits = (to: To, landowner: string, signBy: Date, zone: string, link: string): MailMessage =>
  letter(to.email, `Waiting for ${landowner} to sign`, to.name, [`${landowner} has been reminded. The tally counts as signed at ${formatInstant(signBy, zone)}, up to what is held.`, { button: 'See the tally', href: link }]);

/** Lines are queried. */
export const tallyQueried = (to: To, landowner: string, says: string, lines: number, link: string): MailMessage =>
  letter(to.email, `${landowner} queries the tally`, to.name, [`${landowner} queries ${lines === 1 ? 'one line' : `${lines} lines`}: ${says}`, 'Answer each line, and correct what is wrong. If you cannot agree, a moderator decides line by line.', { button: 'Answer', href: link }]);

/** The sawyer answered a query. */
export const queryAnswered = (to: To, sawyer: string, answer: string, link: string): MailMessage =>
  letter(to.email, `${sawyer} answered your query`, to.name, [`${sawyer} wrote: ${answer}`, 'Read the tally as it stands now, then sign it.', { button: 'Read the tally', href: link }]);

/** The tally is signed, by whoever signs for it. */
export const tallySigned = (to: To, how: string, lines: readonly (readonly [string, string])[], link: string): MailMessage =>
  letter(to.email, 'The tally is signed', to.name, [how, { facts: lines }, { button: 'See the receipt', href: link }]);

/** Two metal hits: sawing stops until the landowner allows more. */
export const metalStops = (to: To, sawyer: string, hits: number, capLeft: number, link: string): MailMessage =>
  letter(to.email, `${hits} metal hits: ${sawyer} has stopped`, to.name, [
    `${sawyer} has hit metal ${hits} times and has stopped sawing until you allow more.`,
    `At most ${formatCents(capLeft)} more can be charged for metal; that is the rest of the cap you agreed on.`,
    { button: 'Decide', href: link },
  ]);

const nearWords = { 'at-80': '80 % of what is allowed', 'at-95': '95 % of what is allowed', stop: 'all that is allowed' } as const;

/** The work nears, or has reached, what is held or allowed. */
export const holdNears = (to: To, warning: keyof typeof nearWords, facts: readonly (readonly [string, string])[], link: string, isLandowner: boolean): MailMessage =>
  letter(to.email, `The work has reached ${nearWords[warning]}`, to.name, [
    { facts },
    isLandowner
      ? 'Before it goes over, allow a higher limit or let the sawing stop. What you allow is certain for the sawyer only once you have added it to the hold.'
      : 'Before it goes over, the landowner allows a higher limit, or sawing stops. Only what is held is certain.',
    { button: isLandowner ? 'Decide' : 'Open the tally', href: link },
  ]);

/** Logs are more than the landowner knows of: they are asked before these are sawn. */
export const logsToAgree = (to: To, sawyer: string, logs: readonly (readonly [label: string, why: string])[], facts: readonly (readonly [string, string])[], link: string): MailMessage =>
  letter(to.email, logs.length === 1 ? `${sawyer} asks about a log before it is sawn` : `${sawyer} asks about ${logs.length} logs before they are sawn`, to.name, [
    `${sawyer} has measured at the landing:`,
    { facts: logs },
    ...(facts.length > 0 ? [{ facts }] : []),
    'Until you agree, such a log is charged as listed, and boards of a log that is not on the listing count nothing.',
    { button: 'Decide', href: link },
  ]);

/** Something was allowed in the landowner's name on the sawyer's phone: the landowner hears of it at once. */
export const allowedOnPhone = (to: To, sawyer: string, what: string, name: string, link: string): MailMessage =>
  letter(to.email, `Allowed on ${sawyer}’s phone: ${what}`, to.name, [
    `“${name}” signed on ${sawyer}’s phone: ${what}.`,
    'If that was not you, write to the sawyer now, and query the tally when it comes.',
    { button: 'See the tally', href: link },
  ]);
