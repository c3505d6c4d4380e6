import { z } from 'zod';
import { numberIn } from '~/domain/paths.ts';
import { good, refused, type Result } from '~/domain/result.ts';
import { addDays, daysBetween } from '~/domain/time.ts';
import { choice, day, fieldOf, list, optional, text } from './fields.ts';

/** At most this many days are taken off at once. */
export const MOST_DAYS_OFF = 366;

const listedDays = list.transform((typed) => typed.filter((one) => day(one).ok).slice(0, MOST_DAYS_OFF));

/** The month's boxes as they were shown and as they are now: only what was changed is done, so that two devices do not undo each other. */
const mark = z.object({ deed: z.literal('mark'), shown: listedDays, off: listedDays }).transform(({ shown, off }) => ({
  deed: 'change' as const, add: off.filter((one) => !shown.includes(one)), remove: shown.filter((one) => !off.includes(one)),
}));

/** A stretch of days off, both ends included; without `until` a single day. */
const range = z.object({ deed: z.literal('range'), from: fieldOf(day), until: fieldOf(optional(day)) }).transform(({ from, until }, ctx) => {
  const last = until ?? from;
  const count = daysBetween(from, last) + 1;
  if (count < 1) ctx.addIssue({ code: 'custom', path: ['until'], message: 'The last day is before the first.' });
  if (count > MOST_DAYS_OFF) ctx.addIssue({ code: 'custom', path: ['until'], message: `At most ${MOST_DAYS_OFF} days at once.` });
  return { deed: 'change' as const, add: count >= 1 && count <= MOST_DAYS_OFF ? Array.from({ length: count }, (_, index) => addDays(from, index)) : [], remove: [] };
});

const listingOrOff = (typed: string): Result<'off' | number> => {
  const listing = numberIn(typed);
  return typed === 'off' ? good('off') : listing === null ? refused('', 'Say which day is to be moved.') : good(listing);
};

/** A day off, or the day offered with the bid on a listing (by its number), moved to another. */
const move = z.object({ deed: z.literal('move'), what: fieldOf(listingOrOff), from: fieldOf(day), to: fieldOf(day) });

/** What is to become of a day that another calendar calls busy. */
const busy = z.object({ deed: z.literal('busy'), day: fieldOf(day), answer: fieldOf(choice(['keep', 'open', 'close'], 'Say what is to become of the day.')) });

const only = <const Deed extends string>(deed: Deed) => z.object({ deed: z.literal(deed) });

/** What the calendar page can be asked to do. */
export const calendarForm = z.union([mark, range, move, only('renew-feed'), only('stop-feed'), only('stop-other'), busy, z.object({ deed: z.literal('forget-busy'), by: fieldOf(choice(['address', 'file'], 'Say of which calendar.')) })]);
export type CalendarForm = z.output<typeof calendarForm>;

/** How busy a day of the other calendar must be to count as a day off: hours of entries, whole-day entries always count. */
export const busyMeasures = { day: 24, half: 4, any: 0 } as const;

/** How an imported calendar is to be read, and where it is when it is not a file; the file itself is read beside the form. */
export const importForm = z.object({ address: fieldOf(text(2000)), which: fieldOf(choice(['day', 'half', 'any'], 'Say which entries count.')) });
