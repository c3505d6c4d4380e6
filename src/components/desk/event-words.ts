import { paths } from '~/domain/paths.ts';

/** The part of a line of the audit log that its words are made of. */
interface Line {
  readonly action: string;
  readonly thing: string;
  readonly from: string | null;
  readonly to: string | null;
  readonly data: Readonly<Record<string, unknown>>;
  readonly thingId: string | null;
  readonly listing: number | null;
  readonly booking: number | null;
  readonly accountName: string | null;
}

const spaced = (name: string): string => name.replace(/([a-z])([A-Z])/g, '$1 $2').toLowerCase();

const deeds: Readonly<Record<string, string>> = {
  seePlace: 'saw the exact place', hide: 'hid', show: 'showed again', suspend: 'suspended', restore: 'restored', handle: 'closed a report', report: 'reported', sign: 'signed the tally',
  query: 'queried the tally', offerTally: 'offered the tally', endSecondFactor: 'ended the second step', seeCertificate: 'opened the certificate', noteCertificate: 'noted a certificate as seen', refuseCertificate: 'refused a certificate',
  handInCertificate: 'handed in a certificate', leaveToModerator: 'left to a moderator', acceptTerms: 'accepted the terms', signIn: 'signed in', signUp: 'signed up', signOut: 'signed out', openBooking: 'opened the booking', placeBid: 'bid',
  closeToBids: 'closed to bids', block: 'blocked', unblock: 'unblocked', export: 'took their data along', takeOut: 'took out', retryProviderCall: 'tried a payment task again', review: 'reviewed',
};

/** A deed as the log says it: `suspended`, or the deed's own name in words. */
export const deedWords = (action: string): string => deeds[action] ?? spaced(action);

const thingNames: Readonly<Record<string, string>> = { heldPayment: 'held payment', photo: 'photograph' };
export const thingWords = (thing: string): string => thingNames[thing] ?? spaced(thing);
/** `A review`, `An account`: at the head of a sentence. */
export const aThing = (thing: string): string => `${/^[aeiou]/.test(thing) ? 'An' : 'A'} ${thingWords(thing)}`;

/** What the line is about: its words, and where the desk shows it. */
export function aboutOf(line: Line): { readonly words: string; readonly href: string | null } {
  if (line.booking !== null) return { words: `${thingWords(line.thing)} ${line.thing === 'booking' ? '' : 'of booking '}${line.booking}`, href: paths.deskBooking(line.booking) };
  if (line.listing !== null) return { words: `${thingWords(line.thing)} ${line.thing === 'listing' ? '' : 'on listing '}${line.listing}`, href: paths.deskListing(line.listing) };
  if (line.thing === 'account' && line.thingId) return { words: line.accountName ?? 'an account', href: paths.deskAccount(line.thingId) };
  if (line.thing === 'report' && line.thingId) return { words: 'a report', href: paths.deskReport(line.thingId) };
  return { words: thingWords(line.thing), href: null };
}

/** `open → chosen`, or nothing when no state changed. */
export const moveWords = ({ from, to }: Pick<Line, 'from' | 'to'>): string => (from !== null && to !== null && from !== to ? `${spaced(from)} → ${spaced(to)}` : '');

const shortest = (value: unknown): string => {
  const text = typeof value === 'string' ? value : JSON.stringify(value);
  return text.length > 200 ? `${text.slice(0, 200)} …` : text;
};

/** What the deed left beside itself, as names and values. */
export const dataLines = (data: Readonly<Record<string, unknown>>): readonly { readonly name: string; readonly value: string }[] =>
  Object.entries(data).filter(([name, value]) => name !== 'by' && value !== null && value !== '').map(([name, value]) => ({ name: spaced(name), value: shortest(value) }));
