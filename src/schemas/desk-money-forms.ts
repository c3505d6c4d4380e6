import { z } from 'zod';
import { parseCents } from '~/domain/money.ts';

const reason = z.string().trim().min(1, 'Write the reason.').max(1000, 'Keep it under 1,000 characters.');

/** The kinds of adjustment a form offers for a booking. */
export const adjustForm = z.object({
  kind: z.enum(['forgive', 'fee-to-landowner', 'fee-to-sawyer', 'hold-to-landowner'], { error: 'Choose what is to be set right.' }),
  booking: z.string().trim().regex(/^[1-9]\d{0,8}$/, 'Write the booking’s number.').transform(Number),
  amount: z.string().trim().max(20).transform((text, context) => {
    if (text === '') return null;
    const cents = parseCents(text);
    if (cents !== null && cents > 0) return cents;
    context.addIssue({ code: 'custom', message: 'Type an amount in dollars, like 120 or 120.50.' });
    return z.NEVER;
  }).default(null),
  reason,
}).refine(({ kind, amount }) => kind === 'forgive' || amount !== null, { path: ['amount'], message: 'Type an amount in dollars, like 120 or 120.50.' });

export const enterDifferenceForm = z.object({
  object: z.string().trim().min(1).max(100),
  against: z.enum(['platform fee', 'provider fee', 'dispute loss'], { error: 'Choose where it belongs.' }),
  reason,
});

export const settleAsHeldForm = z.object({ booking: z.coerce.number().int().min(1).max(999_999_999), reason });
