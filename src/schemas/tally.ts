import { z } from 'zod';
import { countUpTo, positive } from './timber-fields.ts';

/** `POST /api/tally` */
export const tallyRequest = z.strictObject({
  rule: z.enum(['hardwood', 'softwood'], { error: 'The rule is hardwood or softwood.' }),
  pieces: z
    .array(
      z.strictObject({
        thicknessIn: positive(48, 'The thickness, in inches,'),
        widthIn: positive(120, 'The width, in inches,'),
        lengthFt: positive(60, 'The length, in feet,'),
        count: countUpTo(100_000, 'The count'),
      }),
      { error: 'Give a list of boards.' },
    )
    .min(1, { error: 'Give at least one board.' })
    .max(2000, { error: 'At most 2,000 rows at a time.' }),
});

export const tallyAnswer = z.object({
  pieces: z.array(z.object({ surfaceMeasureSqFt: z.number().optional(), boardFeet: z.number() })),
  totalBoardFeet: z.number(),
});
