import { z } from 'zod';

/** `GET /api/quoting-practice?zip=` */
export const quotingPracticeQuery = z.strictObject({ zip: z.string({ error: 'Give a ZIP code.' }).regex(/^\d{5}(-\d{4})?$/, { error: 'A ZIP code has five digits.' }) });

/** What the sawyers round a ZIP code charge by, in counts. Too few sawyers, and nothing is counted. */
export const quotingPracticeAnswer = z.object({
  zip: z.string(),
  radiusMi: z.number(),
  /** Fewer sawyers than this are not counted, so that nobody is pointed at. */
  fewest: z.number(),
  /** Null when there are fewer than `fewest`. */
  practice: z
    .object({
      sawyers: z.number(),
      /** The commonest first. `rule` is a log rule for log scale, a tally rule for lumber tally, null by the hour, and where sawyers of one kind have a rule each. */
      bases: z.array(z.object({ basis: z.enum(['lumber-tally', 'log-scale', 'hourly']), rule: z.string().nullable(), sawyers: z.number() })),
      /** Sawyers whose basis nobody else here has. */
      others: z.number(),
    })
    .nullable(),
});

export type QuotingPractice = z.infer<typeof quotingPracticeAnswer>;
