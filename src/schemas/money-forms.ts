import { z } from 'zod';
import { parseCents } from '~/domain/money.ts';

/** What the landowner allows on their own pages: an amount for an increase, a log for a log. */
export const allowForm = z.object({
  what: z.enum(['metal', 'increase', 'larger-log', 'added-log'], { error: 'This cannot be allowed here.' }),
  logId: z.uuid().optional().transform((id) => id ?? null),
  limit: z.string().optional().transform((text, context) => {
    if (text === undefined) return null;
    const cents = parseCents(text);
    if (cents === null || cents < 100) context.addIssue({ code: 'custom', message: 'Type an amount in dollars, like 720 or 720.50.' });
    return cents;
  }),
});

/** How much the landowner adds to the hold on the day. */
export const increaseForm = z.object({
  amount: z.string().trim().max(20).transform((text, context) => {
    const cents = parseCents(text);
    if (cents !== null && cents > 0) return cents;
    context.addIssue({ code: 'custom', message: 'Type an amount in dollars, like 120 or 120.50.' });
    return z.NEVER;
  }),
});

/** A cancellation, with what the person was shown that it costs, so that a dearer one is not done unawares. */
export const cancelBookingForm = z.object({
  reason: z.string().trim().min(1, 'Say why: the other side reads it.').max(1000, 'Keep it under 1,000 characters.'),
  expects: z.coerce.number().int().min(0).max(100_000_000).default(0),
});
