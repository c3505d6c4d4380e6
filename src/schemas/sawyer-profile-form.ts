import { z } from 'zod';
import { refused, good } from '~/domain/result.ts';
import { SERVICES } from '~/domain/trade/services.ts';
import { fieldOf, list, text, whole } from './fields.ts';

const zip = (typed: string) => (/^\d{5}$/.test(typed) ? good(typed) : refused('', 'Write the five digits of your ZIP code.'));
/** 1 Monday … 7 Sunday. */
const weekdays = list.transform((typed, ctx) => {
  const days = [...new Set(typed.map(Number))];
  if (days.length > 0 && days.every((day) => Number.isInteger(day) && day >= 1 && day <= 7)) return days.sort();
  ctx.addIssue({ code: 'custom', message: 'Tick at least one day of the week you saw on.' });
  return z.NEVER;
});

/** What landowners read about a sawyer, and where the base lies (by ZIP: only a point on the coarse grid is kept). */
export const sawyerProfileForm = z.object({
  businessName: fieldOf(text(120, 'Give the name you work under. Your own name will do.')),
  about: fieldOf(text(2_000)),
  zip: fieldOf(zip),
  travelMiles: fieldOf(whole(1, 500, 'miles')),
  services: list.transform((typed) => SERVICES.map(({ code }) => code).filter((code) => typed.includes(code))),
  languages: fieldOf(text(200)).transform((typed) => typed.split(',').map((one) => one.trim()).filter((one) => one !== '')),
  workingDays: weekdays,
  noticeDays: fieldOf(whole(0, 60, 'days')),
});

export type SawyerProfileForm = z.output<typeof sawyerProfileForm>;
