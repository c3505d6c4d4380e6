import { z } from 'zod';
import { parseNumber } from '~/domain/measure.ts';
import type { MonthAir } from '~/domain/timber/monthly-air.ts';
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

const monthNumbers = [1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12] as const;
type MonthField = `${'t' | 'h'}${(typeof monthNumbers)[number]}`;
const typedMonths = Object.fromEntries(monthNumbers.flatMap((month) => [`t${month}`, `h${month}`].map((name) => [name, z.string().trim().default('')]))) as Record<MonthField, z.ZodDefault<z.ZodString>>;

/** The air of a month: both figures or neither, because a made-up one would look like a measured one. */
function readMonths(typed: Record<MonthField, string>, problem: (path: MonthField, message: string) => void): MonthAir[] {
  return monthNumbers.flatMap((month) => {
    const [warm, damp] = [typed[`t${month}`], typed[`h${month}`]];
    if (warm === '' && damp === '') return [];
    if (warm === '' || damp === '') return (problem(warm === '' ? `t${month}` : `h${month}`, 'Give both figures of a month, or neither.'), []);
    const [temperatureF, humidityPct] = [parseNumber(warm), parseNumber(damp)];
    const holdsWarm = temperatureF !== null && temperatureF >= -20 && temperatureF <= 120;
    const holdsDamp = humidityPct !== null && humidityPct >= 1 && humidityPct <= 99;
    if (!holdsWarm) problem(`t${month}`, 'A temperature between −20 and 120 °F.');
    if (!holdsDamp) problem(`h${month}`, 'A relative humidity between 1 and 99 %.');
    return holdsWarm && holdsDamp ? [{ month, temperatureF, humidityPct }] : [];
  });
}

export const dryingPlanForm = z.object({
  ...typedMonths,
  airSource: z.string().trim().max(200, 'At most 200 characters.').default(''),
  targetPct: figure(4, 25, 'A moisture content between 4 and 25 %.'),
  stackWidthFt: figure(1, 12, 'A width between 1 and 12 ft.'),
  sawKerfIn: figure(0, 1, 'A saw’s cut between 0 and 1 in.'),
  pieces: z.string().max(4000, 'At most 4,000 characters.').default(''),
  remindOn: z.string().trim().transform((typed) => (typed === '' ? null : typed)).pipe(dayText.nullable()).default(null),
}).transform(({ airSource, targetPct, stackWidthFt, sawKerfIn, pieces, remindOn, ...typed }, context) => {
  const months = readMonths(typed, (path, message) => context.addIssue({ code: 'custom', path: [path], message }));
  return { months, airSource, targetPct, stackWidthFt, sawKerfIn, pieces, remindOn };
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

export const agreeToJobForm = z.object({ shows: z.string().max(100).default('') });

const asList = (value: unknown): unknown => (value === undefined ? [] : Array.isArray(value) ? value : [value]);
export const jobPageForm = z.object({
  photos: z.preprocess(asList, z.array(z.uuid()).max(100)),
  words: z.string().trim().max(2000, 'At most 2,000 characters.').default(''),
});
export type JobPageForm = z.infer<typeof jobPageForm>;
