import { z } from 'zod';
import { between, countUpTo, largeEndIn, largeEndNotBelow, logLengthFt, positive, smallEndIn } from './timber-fields.ts';

/** Fields of the sawing requests: their limits and their words. */

export const sawLogFields = {
  smallEndIn,
  largeEndIn: largeEndIn.optional(),
  lengthFt: logLengthFt,
  heartDefectIn: between(0, 120, 'The heart to be boxed out, in inches across,').optional(),
};

/** A log to plan: diameters inside bark. */
export const sawLog = z.strictObject(sawLogFields, { error: 'Give the log.' }).superRefine(largeEndNotBelow);

export const sawMill = z.strictObject(
  {
    kerfIn: positive(2, 'The kerf, in inches,'),
    widestCutIn: positive(240, 'The widest cut, in inches,').optional(),
    widestBoardIn: positive(240, 'The widest board, in inches,').optional(),
    longestFt: positive(100, 'The longest log, in feet,').optional(),
  },
  { error: 'Give the mill.' },
);

export const pattern = z.enum(['live', 'cant', 'quartersawn', 'best'], { error: 'The pattern is live, cant, quartersawn or best.' });
export const waneAllowanceIn = between(0, 12, 'The wane allowed, in inches,');
export const thicknessIn = between(0.25, 48, 'The thickness, in inches,');
export const boardWidthIn = between(0.25, 120, 'The width, in inches,');
export const boardLengthFt = between(0.5, 40, 'The length of a board, in feet,');
export const pieceCount = countUpTo(100_000, 'The count of a piece');

export const sawBoard = z.object({
  xIn: z.number(),
  yIn: z.number(),
  thicknessIn: z.number(),
  widthIn: z.number(),
  lengthFt: z.number(),
  startFt: z.number(),
  turned: z.boolean(),
  boardFeet: z.number(),
});

export const sawPlanFields = {
  pattern: z.enum(['live', 'cant', 'quartersawn']),
  boards: z.array(sawBoard),
  boardFeet: z.number(),
  value: z.number(),
  upperBoundValue: z.number(),
  cuts: z.array(z.object({ order: z.number(), turnDeg: z.number(), heightIn: z.number(), kind: z.enum(['slab', 'board', 'face', 'quarter']) })),
  reason: z.string().optional(),
};
