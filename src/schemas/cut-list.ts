import { z } from 'zod';
import { boardLengthFt, boardWidthIn, pattern, pieceCount, sawLogFields, sawMill, sawPlanFields, thicknessIn, waneAllowanceIn } from './sawing-fields.ts';
import { largeEndNotBelow } from './timber-fields.ts';

const id = z.string({ error: 'Give an id.' }).min(1, { error: 'Give an id.' }).max(100, { error: 'An id has at most 100 characters.' });

const apart = (what: string) => (rows: readonly { readonly id: string }[], context: z.RefinementCtx): void => {
  const seen = new Set<string>();
  rows.forEach((row, index) => {
    if (seen.has(row.id)) context.addIssue({ code: 'custom', path: [index, 'id'], message: `Another ${what} has this id.` });
    seen.add(row.id);
  });
};

/** `POST /api/cut-list`; sizes are green. */
export const cutListRequest = z.strictObject({
  logs: z
    .array(z.strictObject({ id, ...sawLogFields }).superRefine(largeEndNotBelow), { error: 'Give a list of logs.' })
    .min(1, { error: 'Give at least one log.' })
    .max(200, { error: 'At most 200 logs at a time.' })
    .superRefine(apart('log')),
  mill: sawMill,
  pattern: pattern.optional(),
  waneAllowanceIn: waneAllowanceIn.optional(),
  pieces: z
    .array(z.strictObject({ id, thicknessIn, widthIn: boardWidthIn, lengthFt: boardLengthFt, count: pieceCount }), { error: 'Give a list of pieces.' })
    .min(1, { error: 'Give at least one piece.' })
    .max(50, { error: 'At most 50 pieces in a cut list.' })
    .superRefine(apart('piece')),
});

export const cutListAnswer = z.object({
  covered: z.array(z.object({ id: z.string(), made: z.number(), short: z.number() })),
  plans: z.array(z.object({ logId: z.string(), ...sawPlanFields })),
  surplusBoardFeet: z.number(),
  boardFeetShort: z.number(),
  boundBoardFeetShort: z.number(),
  gapBoardFeet: z.number(),
  provenBest: z.boolean(),
});
