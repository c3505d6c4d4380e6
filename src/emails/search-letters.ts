import { formatDollars } from '~/domain/money.ts';
import { formatDay, formatDayWithYear } from '~/domain/time.ts';
import { hourWords, type JobForMill } from '~/domain/trade/job-worth.ts';
import type { MailMessage } from '~/server/services/mail.ts';
import { letter, type Part } from './letter.ts';

/** A listing as a letter about it tells of it: the town and the distance to its coarse point, never more. */
export interface ListingFound {
  readonly title: string;
  readonly town: string;
  readonly boardFeet: number;
  readonly largestEndOutsideBarkIn: number;
  readonly distanceMi: number | null;
  readonly sawBy: string | null;
  readonly closesOn: string;
  readonly job: JobForMill | null;
  readonly link: string;
}

const dollars = (cents: number): string => formatDollars(Math.round(cents / 100) * 100);

function factsOf({ town, boardFeet, largestEndOutsideBarkIn, distanceMi, sawBy, closesOn, job }: ListingFound): readonly (readonly [string, string])[] {
  const worth = job?.worth ?? null;
  return [
    ['Where', `near ${town}${distanceMi === null ? '' : `, ${Math.round(distanceMi)} mi`}`],
    ['Logs', `${boardFeet.toLocaleString('en-US')} bf International ¼, butt ${Math.round(largestEndOutsideBarkIn)} in`],
    ['Closes to bids', formatDay(closesOn)],
    ...(sawBy === null ? [] : [['Best sawn by', formatDayWithYear(sawBy)] as const]),
    ...(job === null ? [] : [['Your mill', job.fit.fits ? `fits ${job.mill.name}` : (job.fit.reasons[0] ?? 'does not fit')] as const]),
    ...(job?.fit.fits && worth ? [['Estimate', `${dollars(worth.estimateCents)}, ${hourWords(worth.workHours)} at work, ${worth.roadMiles * 2} mi there and back, ${dollars(worth.perHourCents)} an hour`] as const] : []),
  ];
}

/** To the sawyer: what a saved search has found, with the link that stops it. */
export function logsFound(to: { readonly name: string; readonly email: string }, search: { readonly name: string; readonly words: string }, found: readonly ListingFound[], more: number, links: { readonly list: string; readonly stop: string }): MailMessage {
  const [first] = found;
  const subject = found.length === 1 && first && more === 0 ? `${first.title}, near ${first.town}` : `${found.length + more} new listings: ${search.name}`;
  const parts: Part[] = [
    `New on Skidway for your search “${search.name}”: ${search.words}.`,
    ...found.flatMap((one): Part[] => [one.title, { facts: factsOf(one) }, { button: 'See these logs', href: one.link }]),
    ...(more > 0 ? [`${more} more are in the list.`] : []),
    { link: 'All logs of this search', href: links.list },
    { link: `Stop letters for “${search.name}”`, href: links.stop },
  ];
  return { ...letter(to.email, subject, to.name, parts), unsubscribe: links.stop };
}
