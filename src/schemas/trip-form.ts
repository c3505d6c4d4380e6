import { z } from 'zod';
import { choice, day, fieldOf, list, text, whole } from './fields.ts';

/** A trip as it is offered: the day, the first arrival, the listings by number, and the cells decked together. */
export const tripForm = z
  .object({
    day: fieldOf(day),
    startTime: fieldOf((typed) => (/^([01]\d|2[0-3]):[0-5]\d$/.test(typed) ? { ok: true, value: typed } : { ok: false, problems: [{ path: '', message: 'Write the time like 08:00.' }] })),
    listings: list,
    together: list,
    message: fieldOf(text(2_000)),
  })
  .transform(({ listings, ...rest }) => ({ ...rest, listings: listings.filter((typed) => /^[1-9]\d{0,8}$/.test(typed)).map(Number) }));

/** A landowner's answer to a trip. */
export const tripAnswerForm = z.object({
  listing: fieldOf(whole(1, 999_999_999)),
  version: fieldOf(whole(1, 1_000_000)),
  answer: fieldOf(choice(['agree', 'leave'], 'Choose an answer.')),
});
