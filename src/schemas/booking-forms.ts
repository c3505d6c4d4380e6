import { z } from 'zod';

const asList = (value: unknown): unknown => (value === undefined ? [] : Array.isArray(value) ? value : [value]);

/** Days ticked on the calendar, and one more typed. */
export const proposeDaysForm = z.object({
  days: z.preprocess(asList, z.array(z.string().max(10)).max(60)),
  typedDay: z.string().max(10).default(''),
  startTime: z.string().max(5).default('08:00'),
  note: z.string().max(1000, 'Keep the note under 1,000 characters.').default(''),
});

export const confirmDaysForm = z.object({ proposal: z.uuid() });

export const cancelForm = z.object({ reason: z.string().trim().min(1, 'Say why: the other side reads it.').max(1000, 'Keep it under 1,000 characters.') });

export const messageForm = z.object({ body: z.string().max(8000) });

export const reviewForm = z.object({
  stars: z.coerce.number({ error: 'Choose from one to five stars.' }).int().min(1, 'Choose from one to five stars.').max(5, 'Choose from one to five stars.'),
  body: z.string().trim().max(3000, 'Keep it under 3,000 characters.').default(''),
});
