import { z } from 'zod';

const words = (empty: string) => z.string().trim().min(1, empty).max(1000, 'Keep it under 1,000 characters.');

export const reportNoShowForm = z.object({ says: words('Say what happened: the other side reads it.') });

/** Who contests says why; who agrees need not. */
export const answerNoShowForm = z
  .object({ answer: z.enum(['agree', 'contest'], { error: 'Choose an answer.' }), says: z.string().trim().max(1000, 'Keep it under 1,000 characters.').default('') })
  .refine(({ answer, says }) => answer === 'agree' || says !== '', { path: ['says'], message: 'Say what happened: a moderator reads it.' });

export const decideNoShowForm = z.object({ decision: z.enum(['stands', 'dismissed'], { error: 'Decide.' }), because: words('Write the reason: both sides read it.') });
