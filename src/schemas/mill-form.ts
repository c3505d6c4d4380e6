import { z } from 'zod';
import { choice, feet, fieldOf, inches, text, whole } from './fields.ts';

/** A sawyer's mill, as the form posts it: fractions and units as people write them. */
export const millForm = z
  .object({
    name: fieldOf(text(80, 'Give the mill a name you will know it by.')),
    kind: fieldOf(choice(['band', 'swing-blade', 'chainsaw', 'circular'], 'Choose the kind of mill.')),
    kerfIn: fieldOf(inches(0.03, 1)),
    largestLogIn: fieldOf(inches(6, 120)),
    widestCutIn: fieldOf(inches(4, 120)),
    widestBoardIn: fieldOf(inches(4, 120)),
    longestFt: fieldOf(feet(2, 80)),
    shortestFt: fieldOf(feet(1, 40)),
    paceBfPerHour: fieldOf(whole(10, 5_000, 'bf an hour')),
    turnsLogsBy: fieldOf(choice(['machine', 'hand'], 'Say how logs are turned.')),
  })
  .superRefine((mill, ctx) => {
    if (mill.shortestFt > mill.longestFt) ctx.addIssue({ code: 'custom', path: ['shortestFt'], message: 'The shortest log is longer than the longest.' });
    if (mill.widestCutIn > mill.largestLogIn) ctx.addIssue({ code: 'custom', path: ['widestCutIn'], message: 'The widest cut is wider than the largest log.' });
    if (mill.widestBoardIn > mill.widestCutIn) ctx.addIssue({ code: 'custom', path: ['widestBoardIn'], message: 'The widest board is wider than the widest cut.' });
  });

export type MillForm = z.output<typeof millForm>;
