import { addDays, dayAt, dayEnd, dayStart, type Day } from '../time.ts';

/** A time that another calendar calls busy: whole days (`until` is the first day after), or from one instant to another. */
export type BusySpan = { readonly from: Day; readonly until: Day } | { readonly start: Date; readonly end: Date };

/**
 * The days that are too busy to saw on, in order.
 * @param zone the sawyer's own time zone
 * @param first the first day looked at, `last` the last
 * @param leastHours a day counts when it holds a whole-day entry, or entries of this many hours together; 0 counts any entry
 */
export function busyDays(spans: readonly BusySpan[], zone: string, first: Day, last: Day, leastHours: number): readonly Day[] {
  const hours = new Map<Day, number>();
  const add = (day: Day, more: number): void => void hours.set(day, (hours.get(day) ?? 0) + more);
  for (const span of spans) {
    if ('from' in span) {
      for (let day = span.from > first ? span.from : first; day < span.until && day <= last; day = addDays(day, 1)) add(day, 24);
      continue;
    }
    if (span.end <= span.start) continue;
    const begins = dayAt(span.start, zone);
    for (let day = begins > first ? begins : first; day <= last; day = addDays(day, 1)) {
      const from = Math.max(span.start.getTime(), dayStart(day, zone, '00:00').getTime());
      const to = Math.min(span.end.getTime(), dayEnd(day, zone).getTime());
      if (to <= from) break;
      add(day, (to - from) / 3_600_000);
    }
  }
  return [...hours].filter(([, busy]) => busy > 0 && busy >= leastHours).map(([day]) => day).sort();
}
