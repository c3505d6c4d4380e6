import { addDays, type Day } from './time.ts';

/** A calendar month, `2026-12`. Compares as text. */
export type Month = string;

/** The month a day lies in. */
export const monthOf = (day: Day): Month => day.slice(0, 7);

/** Reads `2026-12`; null for anything else. */
export const parseMonth = (text: string): Month | null => (/^20\d{2}-(0[1-9]|1[0-2])$/.test(text) ? text : null);

/** The month so many months later (earlier when negative). */
export function addMonths(month: Month, count: number): Month {
  const whole = Number(month.slice(0, 4)) * 12 + Number(month.slice(5)) - 1 + count;
  return `${String(Math.floor(whole / 12)).padStart(4, '0')}-${String((whole % 12) + 1).padStart(2, '0')}`;
}

/** Every day of a month in order. */
export function daysOfMonth(month: Month): readonly Day[] {
  const days: Day[] = [];
  for (let day = `${month}-01`; monthOf(day) === month; day = addDays(day, 1)) days.push(day);
  return days;
}

/** 1 Monday … 7 Sunday. */
export function weekdayOf(day: Day): number {
  const weekday = new Date(`${day}T00:00:00Z`).getUTCDay();
  return weekday === 0 ? 7 : weekday;
}

/** `December 2026`. */
export const formatMonth = (month: Month): string => new Intl.DateTimeFormat('en-US', { month: 'long', year: 'numeric', timeZone: 'UTC' }).format(new Date(`${month}-01T00:00:00Z`));

/** Days that follow one another joined into runs, each with its first and last day. */
export function runsOf(days: readonly Day[]): readonly { readonly from: Day; readonly to: Day }[] {
  const runs: { from: Day; to: Day }[] = [];
  for (const day of [...days].sort()) {
    const last = runs.at(-1);
    if (last && addDays(last.to, 1) === day) last.to = day;
    else runs.push({ from: day, to: day });
  }
  return runs;
}
