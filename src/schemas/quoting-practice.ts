import { z } from 'zod';

/** `GET /api/quoting-practice?zip=` */
export const quotingPracticeQuery = z.strictObject({ zip: z.string({ error: 'Give a ZIP code.' }).regex(/^\d{5}$/, { error: 'A ZIP code has five digits.' }) });

export const quotingPracticeAnswer = z.object({
  radiusMi: z.number(),
  sawyers: z.number(),
  /** The commonest first. `rule` is a log rule for log scale, a tally rule for lumber tally, null by the hour. */
  practices: z.array(z.object({ basis: z.enum(['lumber-tally', 'log-scale', 'hourly']), rule: z.string().nullable(), sawyers: z.number() })),
});

export type QuotingPractice = z.infer<typeof quotingPracticeAnswer>;
