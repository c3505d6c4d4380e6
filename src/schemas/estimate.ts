import { z } from 'zod';
import { defect, figuresByRule, figuresCubic, largeEndIn, largeEndNotBelow, logLengthFt, smallEndIn, speciesCode } from './timber-fields.ts';

/** A log of a request: diameters inside bark in inches, the full length in feet. */
export const logFields = {
  species: speciesCode,
  smallEndIn,
  largeEndIn: largeEndIn.optional(),
  lengthFt: logLengthFt,
  defects: z.array(defect).max(20, { error: 'At most 20 defects on a log.' }).optional(),
};

/** `POST /api/estimate` */
export const estimateRequest = z.strictObject({
  logs: z
    .array(z.strictObject(logFields).superRefine(largeEndNotBelow), { error: 'Give a list of logs.' })
    .min(1, { error: 'Give at least one log.' })
    .max(1000, { error: 'At most 1,000 logs at a time.' }),
  halfInchRounding: z.enum(['up', 'down'], { error: 'Half inches go up or down.' }).optional(),
  longestScalingLengthFt: z.literal([16, 20, 32, 40], { error: 'The longest scaling length is 16, 20, 32 or 40 ft.' }).optional(),
});

const totals = { boardFeet: figuresByRule, netBoardFeet: figuresByRule, cubicFeet: figuresCubic, greenWeightLb: z.number() };

export const estimateAnswer = z.object({
  logs: z.array(z.object({ scalingDiameterIn: z.number(), scalingLengthFt: z.number(), ...totals })),
  totals: z.object(totals),
});
