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
  lumberCredential: fieldOf(text(160)),
  workingDays: weekdays,
  noticeDays: fieldOf(whole(0, 60, 'days')),
});

export type SawyerProfileForm = z.output<typeof sawyerProfileForm>;

/** What a kept profile says, as the form's fields ask for it. */
interface Kept {
  readonly businessName: string;
  readonly about: string;
  readonly zip: string | null;
  readonly travelMiles: number;
  readonly services: readonly string[];
  readonly languages: readonly string[];
  readonly lumberCredential: string;
  readonly workingDays: readonly number[];
  readonly noticeDays: number;
}

/** A profile as the form's fields, to fill it in again; without one, what most sawyers would say. */
export const sawyerProfileTyped = (kept: Kept | null): Record<string, string | readonly string[]> => ({
  businessName: kept?.businessName ?? '',
  about: kept?.about ?? '',
  zip: kept?.zip ?? '',
  travelMiles: String(kept?.travelMiles ?? 50),
  services: kept?.services ?? [],
  languages: kept?.languages.join(', ') ?? '',
  lumberCredential: kept?.lumberCredential ?? '',
  workingDays: (kept?.workingDays ?? [1, 2, 3, 4, 5, 6]).map(String),
  noticeDays: String(kept?.noticeDays ?? 2),
});
