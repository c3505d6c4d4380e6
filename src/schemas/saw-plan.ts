import { z } from 'zod';
import { boardLengthFt, boardWidthIn, pattern, pieceCount, sawLog, sawMill, sawPlanFields, thicknessIn, waneAllowanceIn } from './sawing-fields.ts';
import { between } from './timber-fields.ts';

/** `POST /api/saw-plan`; sizes are green. */
export const sawPlanRequest = z.strictObject({
  log: sawLog,
  mill: sawMill,
  pattern,
  pieces: z
    .array(
      z.strictObject({
        thicknessIn,
        widthIn: boardWidthIn.optional(),
        lengthFt: boardLengthFt.optional(),
        value: between(0, 100_000, 'The value of a board foot').optional(),
        count: pieceCount.optional(),
      }),
      { error: 'Give a list of sizes.' },
    )
    .min(1, { error: 'Give at least one size.' })
    .max(20, { error: 'At most 20 sizes for a log.' }),
  waneAllowanceIn: waneAllowanceIn.optional(),
});

export const sawPlanAnswer = z.object(sawPlanFields);
