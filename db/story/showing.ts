import { addMoistureReading, keepDryingPlan } from '../../src/server/commands/keep-drying.ts';
import { agreeToJobPage, keepJobPage } from '../../src/server/commands/job-page.ts';
import { offerBoardsLeft } from '../../src/server/commands/boards-left.ts';
import { jobPageSettings } from '../../src/server/queries/job-page.ts';
import { addDays, dayAt } from '../../src/domain/time.ts';
import { bookingOf } from './bookings.ts';
import { who } from './people.ts';

/** Invented, like everything here: what somebody might read off a station near the demo's hills. */
const AIR = [[5, 58, 66], [6, 67, 70], [7, 71, 73], [8, 69, 76], [9, 61, 76], [10, 49, 72]] as const;

/** What follows two settled jobs: boards on stickers with their readings, some offered, and one job shown around by both. Told once the photographs are ready. */
export async function tellShowing(now: Date): Promise<void> {
  const ada = await who('ada');
  const maple = (await bookingOf('ada-maple')).number;
  await keepDryingPlan(ada, maple, {
    months: AIR.map(([month, temperatureF, humidityPct]) => ({ month, temperatureF, humidityPct })), airSource: 'The station at the county airport (invented for the demo)',
    targetPct: 20, stackWidthFt: 4, sawKerfIn: 0.125, pieces: 'Bench seat, 2, 1 1/2, 10, 60', remindOn: null,
  }, now);
  const today = dayAt(now, 'America/Chicago');
  for (const [daysAgo, moisturePct] of [[20, 66], [13, 52], [6, 43]] as const) await addMoistureReading(ada, maple, { readOn: addDays(today, -daysAgo), moisturePct, note: 'Second course, middle board' }, now);
  const { photos } = await jobPageSettings(ada, maple);
  await keepJobPage(ada, maple, { photos: photos.map(({ id }) => id), words: 'The maple by the school road went over in the July storm. Half of it is going to be a bench for the children.' }, now);
  const { shows } = await jobPageSettings(ada, maple);
  for (const side of [ada, await who('cleo')]) await agreeToJobPage(side, maple, { agrees: true, shows }, now);
  await offerBoardsLeft(await who('tilda'), (await bookingOf('tilda-oak')).number, { boards: 'Northern red oak, 4/4, 8, 10, 6\nNorthern red oak, 4/4, 6, 8, 9', asks: 'two dollars a board foot, or a load of firewood' }, now);
}
