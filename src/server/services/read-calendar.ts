import ICAL from 'ical.js';
import type { BusySpan } from '../../domain/trade/busy-days.ts';
import { addDays, dayStart, isTimeZone, type Day } from '../../domain/time.ts';
import { invalid, Refusal } from '../errors.ts';

/** Entries of ours in a calendar that subscribes to us are not taken back in. */
const OUR_UID = /@skidway$/;
/** How many steps of repeating entries are worked out in one file before it is refused. */
const MOST_STEPS = 50_000;

const notCalendar = (): Refusal => invalid([{ path: 'file', message: 'This is not a calendar file. Choose one that ends in .ics.' }]);
const two = (value: number): string => String(value).padStart(2, '0');
const dayOf = (time: ICAL.Time): Day => `${String(time.year).padStart(4, '0')}-${two(time.month)}-${two(time.day)}`;

/** Whether an entry takes up time at all. */
function isBusy(entry: ICAL.Component): boolean {
  const said = (name: string): string => String(entry.getFirstPropertyValue(name) ?? '').toUpperCase();
  return said('transp') !== 'TRANSPARENT' && said('status') !== 'CANCELLED' && said('x-microsoft-cdo-busystatus') !== 'FREE' && !OUR_UID.test(String(entry.getFirstPropertyValue('uid') ?? ''));
}

/** The instant of an entry's time. One whose zone is not in the file is read by the zone's name, or else on the sawyer's own clock. */
function instantOf(time: ICAL.Time, entry: ICAL.Component, zone: string): Date {
  if (time.zone !== null && time.zone !== ICAL.Timezone.localTimezone) return new Date(time.toUnixTime() * 1000);
  const named = entry.getFirstProperty('dtstart')?.getFirstParameter('tzid');
  return dayStart(dayOf(time), named !== undefined && isTimeZone(named) ? named : zone, `${two(time.hour)}:${two(time.minute)}`);
}

function spanOf(start: ICAL.Time, end: ICAL.Time, entry: ICAL.Component, zone: string): BusySpan {
  if (!start.isDate) return { start: instantOf(start, entry, zone), end: instantOf(end, entry, zone) };
  const from = dayOf(start);
  return { from, until: dayOf(end) > from ? dayOf(end) : addDays(from, 1) };
}

function* calendarsIn(text: string): Generator<ICAL.Component> {
  const parsed: unknown[] = ICAL.parse(text);
  for (const one of Array.isArray(parsed[0]) ? parsed : [parsed]) yield new ICAL.Component(one as unknown[]);
}

/**
 * The busy times in an iCalendar file, repeating ones worked out, from the day `first` to the day `last`.
 * @param zone the sawyer's own time zone, for entries that name none
 * @throws Refusal `invalid` when the file is no calendar or repeats without measure
 */
export function busySpans(text: string, zone: string, first: Day, last: Day): readonly BusySpan[] {
  const spans: BusySpan[] = [];
  let steps = 0;
  // Long entries that began before `first` still reach into it.
  const near = addDays(first, -40);
  try {
    for (const calendar of calendarsIn(text)) {
      if (calendar.name !== 'vcalendar') throw notCalendar();
      for (const entry of calendar.getAllSubcomponents('vevent')) {
        if (!isBusy(entry)) continue;
        const event = new ICAL.Event(entry);
        if (event.isRecurrenceException() || !event.startDate) continue;
        if (!event.isRecurring()) {
          if (dayOf(event.startDate) <= last) spans.push(spanOf(event.startDate, event.endDate, entry, zone));
          continue;
        }
        const times = event.iterator();
        for (let next = times.next(); next && dayOf(next) <= last; next = times.next()) {
          if ((steps += 1) > MOST_STEPS) throw invalid([{ path: 'file', message: 'This calendar repeats too much to be read. Export only the coming months.' }]);
          if (dayOf(next) < near) continue;
          const { startDate, endDate, item } = event.getOccurrenceDetails(next);
          if (isBusy(item.component)) spans.push(spanOf(startDate, endDate, item.component, zone));
        }
      }
    }
  } catch (error) {
    throw error instanceof Refusal ? error : notCalendar();
  }
  return spans;
}
