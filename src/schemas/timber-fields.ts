import { z } from 'zod';
import { speciesCodes } from '~/domain/timber/species.ts';

/** Fields that several requests about logs and boards share: their limits and their words. */

const [firstCode = '', ...otherCodes] = speciesCodes;

/** A species code of the list. */
export const speciesCode = z.enum([firstCode, ...otherCodes], { error: 'This is not a species code. Use one from the list of species, for instance white-oak.' });

/** A number in a unit between two limits. */
export const between = (low: number, high: number, what: string): z.ZodNumber =>
  z
    .number({ error: `${what} is a number.` })
    .min(low, { error: `${what} is at least ${low}.` })
    .max(high, { error: `${what} is at most ${high}.` });

/** A number above zero, up to a limit. */
export const positive = (high: number, what: string): z.ZodNumber =>
  z
    .number({ error: `${what} is a number.` })
    .gt(0, { error: `${what} is more than 0.` })
    .max(high, { error: `${what} is at most ${high}.` });

/** A whole number from 1 to a limit. */
export const countUpTo = (most: number, what: string): z.ZodNumber => between(1, most, what).int({ error: `${what} is a whole number.` });

export const smallEndIn = between(4, 60, 'The small end, in inches,');
export const largeEndIn = between(4, 120, 'The large end, in inches,');
export const logLengthFt = between(4, 40, 'The length, in feet,');

/** Refuses a large end below the small end, at the large end's own path. */
export const largeEndNotBelow = (log: { readonly smallEndIn: number; readonly largeEndIn?: number | undefined }, context: z.RefinementCtx): void => {
  if (log.largeEndIn !== undefined && log.largeEndIn < log.smallEndIn) {
    context.addIssue({ code: 'custom', path: ['largeEndIn'], message: 'The large end is smaller than the small end. Swap them, or measure again.' });
  }
};

const defectLengthFt = positive(40, 'The length of the defect, in feet,');
const across = positive(120, 'The size of the defect, in inches,');

/** A defect and its measures; see `domain/timber/defects.ts` for what each takes off. */
export const defect = z.discriminatedUnion(
  'kind',
  [
    z.strictObject({ kind: z.literal('section'), lengthFt: defectLengthFt }),
    z.strictObject({ kind: z.literal('wedge'), lengthFt: defectLengthFt, angleDeg: positive(360, 'The angle, in degrees,') }),
    z.strictObject({ kind: z.literal('sweep'), departureIn: between(0, 120, 'The departure, in inches,') }),
    z.strictObject({ kind: z.literal('crook'), deflectionIn: between(0, 120, 'The deflection, in inches,'), lengthFt: defectLengthFt }),
    z.strictObject({ kind: z.literal('interiorRot'), widthIn: across, heightIn: across, lengthFt: defectLengthFt }),
    z.strictObject({ kind: z.literal('squared'), widthIn: across, heightIn: across, lengthFt: defectLengthFt }),
  ],
  { error: 'The kind of defect is section, wedge, sweep, crook, interiorRot or squared.' },
);

/** One figure for each log rule, board feet. */
export const figuresByRule = z.object({ doyle: z.number(), scribnerDecimalC: z.number(), internationalQuarter: z.number() });

/** Cubic feet by three formulas. */
export const figuresCubic = z.object({ smalian: z.number(), huber: z.number(), newton: z.number() });
