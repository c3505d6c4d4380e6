import { z } from 'zod';
import { parseNumber } from '~/domain/measure.ts';
import { parseDay } from '~/domain/time.ts';

/** A number as a person types it, between two limits. */
const figure = (low: number, high: number, message: string) =>
  z.string().transform((typed, context) => {
    const value = parseNumber(typed);
    if (value !== null && value >= low && value <= high) return value;
    context.addIssue({ code: 'custom', message });
    return z.NEVER;
  });
const dayText = z.string().refine((typed) => parseDay(typed).ok, 'Write the day as year, month and day, like 2026-12-10.');

export const dryingPlanForm = z.object({
  temperatureF: figure(-20, 120, 'A temperature between −20 and 120 °F.'),
  humidityPct: figure(1, 99, 'A relative humidity between 1 and 99 %.'),
  targetPct: figure(4, 25, 'A moisture content between 4 and 25 %.'),
  stackWidthFt: figure(1, 12, 'A width between 1 and 12 ft.'),
  sawKerfIn: figure(0, 1, 'A saw’s cut between 0 and 1 in.'),
  pieces: z.string().max(4000, 'At most 4,000 characters.').default(''),
  remindOn: z.string().trim().transform((typed) => (typed === '' ? null : typed)).pipe(dayText.nullable()).default(null),
});
export type DryingPlanForm = z.infer<typeof dryingPlanForm>;

export const moistureForm = z.object({
  readOn: dayText,
  moisturePct: figure(3, 200, 'A moisture content between 3 and 200 %.'),
  note: z.string().trim().max(200, 'At most 200 characters.').default(''),
});
export type MoistureForm = z.infer<typeof moistureForm>;

export const removeReadingForm = z.object({ reading: z.uuid() });

/** A notice of boards left over. `asks` is words, not a price that anybody is charged. */
export const boardsLeftForm = z.object({
  boards: z.string().max(4000, 'At most 4,000 characters.'),
  asks: z.string().trim().max(200, 'At most 200 characters.').default(''),
});
export type BoardsLeftForm = z.infer<typeof boardsLeftForm>;

export const nothingForm = z.object({});

const asList = (value: unknown): unknown => (value === undefined ? [] : Array.isArray(value) ? value : [value]);
export const jobPageForm = z.object({
  photos: z.preprocess(asList, z.array(z.uuid()).max(100)),
  words: z.string().trim().max(2000, 'At most 2,000 characters.').default(''),
});
export type JobPageForm = z.infer<typeof jobPageForm>;
