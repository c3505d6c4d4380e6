import { z } from 'zod';

/** A year or a month of a year. */
export const periodField = z.string().regex(/^20\d{2}(-(0[1-9]|1[0-2]))?$/, 'Give a year like 2026, or a month like 2026-08.');
