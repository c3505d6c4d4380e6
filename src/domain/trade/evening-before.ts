import { addDays, dayStart, type Day } from '~/domain/time.ts';
import { planStack, usualSpacingIn } from '~/domain/timber/stack.ts';
import { speciesOf } from '~/domain/timber/species.ts';

/** The list is sent from this hour of the site's clock on the day before. */
const TOLD_AT = '17:00';

/** Whether the list for a milling day is due: from five in the afternoon of the day before until the day begins. */
export const isEveningBefore = (day: Day, zone: string, at: Date): boolean => dayStart(addDays(day, -1), zone, TOLD_AT) <= at && at < dayStart(day, zone);

/** Wanted or expected boards, for counting stickers. */
export interface ExpectedBoards {
  readonly species: string;
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly count: number;
}

const STACK_WIDTH_FT = 4;
const STICKER_IN = 0.75;

/** Stickers for these boards in one stack 4 ft wide, 3/4 in thick, at the usual spacing; dry ones, all of one thickness. */
export function stickersFor(boards: readonly ExpectedBoards[]): number {
  const [first] = boards;
  if (!first) return 0;
  const species = speciesOf(first.species);
  const thinnest = Math.min(...boards.map(({ thicknessIn }) => thicknessIn));
  return planStack({ boards, stackWidthFt: STACK_WIDTH_FT, stickerIn: STICKER_IN, spacingIn: usualSpacingIn(species.group, thinnest), densityLbPerFt3: species.greenDensityLbPerFt3 }).stickers;
}

/** Boards to expect where no cut list says more: 4/4 × 8 in × 12 ft for so many board feet. */
export const boardsOf = (species: string, boardFeet: number): ExpectedBoards => ({ species, thicknessIn: 1, widthIn: 8, lengthFt: 12, count: Math.max(1, Math.round(boardFeet / 8)) });

/** What each side has ready the evening before: usual practice, no single source. */
export const readyTheEveningBefore = (side: 'landowner' | 'sawyer', stickers: number): readonly string[] =>
  side === 'landowner'
    ? [
        'The logs lie off the dirt, side by side and within reach of the mill; the way in is open and wide enough',
        `About ${stickers} dry stickers, all 3/4 in thick and 4 ft long, with level bearers for the stack and something to cover it`,
        'Water at the landing, and a place in the shade',
        'Helpers are 18 or older, with eye and ear protection, gloves and sturdy boots; children and animals stay away',
        'You know where metal may be: say so before the log goes on the mill',
      ]
    : [
        'The milling day is on your phone: open it once while there is signal',
        'Blades enough for this job, fuel, and water for the blade',
        'Fire extinguisher and first aid; the emergency address is written down',
        'You have looked at the ground, the lines and the widest turn on the way in',
        'A tape and this landowner’s cut list: the sizes wanted first',
      ];
