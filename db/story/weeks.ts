import { importCalendar } from '../../src/server/commands/busy-days.ts';
import { changeDaysOff } from '../../src/server/commands/days-off.ts';
import { saveSearch } from '../../src/server/commands/save-search.ts';
import { pointOfZip } from '../../src/server/queries/place-of-zip.ts';
import type { SearchFilters } from '../../src/domain/finding/saved-search.ts';
import type { Day } from '../../src/domain/time.ts';
import { who } from './people.ts';
import type { Timeline } from './timeline.ts';

/** A calendar's file with a whole-day entry on each of these days. */
const calendarFile = (days: readonly Day[]): string =>
  ['BEGIN:VCALENDAR', 'VERSION:2.0', 'PRODID:-//Invented//Demo//EN', ...days.flatMap((day) => ['BEGIN:VEVENT', `UID:${day}@demo.example`, `DTSTAMP:${day.replaceAll('-', '')}T000000Z`, `DTSTART;VALUE=DATE:${day.replaceAll('-', '')}`, 'SUMMARY:Busy', 'END:VEVENT']), 'END:VCALENDAR', ''].join('\r\n');

const anything: SearchFilters = { from: null, species: null, minBoardFeet: null, maxLargestEndIn: null, closing: false, fits: true, minPerHourCents: null };
function from(zip: string, radiusMi: number): SearchFilters['from'] {
  const point = pointOfZip(zip);
  if (!point) throw new Error(`Nobody knows where ZIP ${zip} is.`);
  return { point, zip, radiusMi };
}

/** How two sawyers keep their weeks: days off, busy days of another calendar (all past the days that are offered), and what they want to be told of. */
export function tellWeeks(timeline: Timeline): void {
  const { day } = timeline.calendar;
  timeline.add(-28, '20:40', async (at) => {
    const bram = await who('bram');
    await changeDaysOff(bram, { add: [day(18), day(19)], remove: [] }, at);
    await importCalendar(bram, { text: calendarFile([day(17), day(20), day(27)]), name: 'family.ics', leastHours: 4 }, at);
  });
  timeline.add(-1, '21:05', async (at) => {
    await saveSearch(await who('bram'), { ...anything, from: from('54667', 40), species: 'white-oak' }, { name: 'White oak within an hour', tells: 'daily' }, at);
    await saveSearch(await who('moss'), { ...anything, from: from('54660', 75), minBoardFeet: 600 }, { name: 'A day’s work or more', tells: 'at-once' }, at);
  });
}
