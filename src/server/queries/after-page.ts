import { abilities, type Action } from '~/domain/permissions.ts';
import { dryingMonths, type DryingMonth, type MonthAir } from '~/domain/timber/monthly-air.ts';
import { dayAt } from '~/domain/time.ts';
import { airDryingDays } from '~/domain/timber/drying.ts';
import { againstList, type PieceWhenDry } from '~/domain/timber/against-list.ts';
import { boardLine, gathered } from '~/domain/timber/board-lines.ts';
import { cutProject, dryBoards, type DryBoards, type ProjectCut } from '~/domain/timber/dry-boards.ts';
import { readProjectPieces } from '~/domain/timber/project-pieces.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { planStack, usualSpacingIn, type Stack } from '~/domain/timber/stack.ts';
import { rolesOnBooking } from '../authorize.ts';
import { boardsLeftOn, type BoardsLeftNotice } from '../boards-left.ts';
import { notFound } from '../errors.ts';
import { listedPieces } from '../listed-pieces.ts';
import { Booking, DryingPlan, Listing, MoistureReading } from '../models/index.ts';
import { tallyWork } from '../tally-work.ts';
import type { Viewer } from '../viewer.ts';

const STICKER_IN = 0.75;
/** Before anything is typed: 20 %, which is air-dried, and no air at all. */
const DEFAULTS = { months: [], airSource: '', temperatureF: null, humidityPct: null, targetPct: 20, stackWidthFt: 4, sawKerfIn: 0.125, pieces: '', remindOn: null } as const;

/** One stack: boards of one species. */
export interface SpeciesStack {
  readonly speciesName: string;
  readonly spacingIn: number;
  readonly stack: Stack;
  readonly weightPerCourseLb: number;
  /** Days to air-dry 4/4 to 20 %; null when no table says. */
  readonly airDrying: { readonly from: number; readonly to: number } | null;
}

export interface AfterPage {
  readonly number: number;
  readonly title: string;
  readonly timeZone: string;
  readonly plan: { readonly airSource: string; readonly targetPct: number; readonly stackWidthFt: number; readonly sawKerfIn: number; readonly pieces: string; readonly remindOn: string | null };
  /** The months that were typed, each with where boards end in its air. */
  readonly months: readonly DryingMonth[];
  /** The air of the month that it is, where it was typed; otherwise of what was typed. Null while nothing was. */
  readonly now: DryingMonth | null;
  readonly isThisMonth: boolean;
  readonly stacks: readonly SpeciesStack[];
  readonly boards: readonly (DryBoards & { readonly speciesName: string })[];
  /** The cut list beside what was sawn for it, when dry. */
  readonly list: readonly PieceWhenDry[];
  /** The month in which the boards were stacked, which is the one they were sawn in. */
  readonly stackedIn: number;
  readonly cuts: readonly ProjectCut[];
  readonly readings: readonly { readonly id: string; readonly readOn: string; readonly moisturePct: number; readonly note: string }[];
  /** The notice of boards left over that stands. */
  readonly boardsLeft: BoardsLeftNotice | null;
  /** Every board of the tally, as the form of a notice has it. */
  readonly allBoards: string;
  readonly listingNumber: number;
  readonly can: Record<Action<'booking'>, boolean>;
}

/**
 * What follows the job: the stack of these very boards, their drying, their sizes when dry, the project cut from them.
 * @throws Refusal `notFound` for others, and before anything is tallied
 */
export async function afterPage(viewer: Viewer, number: number, at: Date): Promise<AfterPage> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number } }) : null;
  if (!booking) throw notFound('booking');
  const can = abilities('booking', rolesOnBooking(viewer, booking), booking.status);
  const work = can.see ? await tallyWork(booking) : null;
  if (!work || work.boards.length === 0) throw notFound('page: there are no boards yet');
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const kept = await DryingPlan.findByPk(booking.id);
  const plan = kept ?? DEFAULTS;
  const commonest = listing.species[0] ?? 'white-oak';
  const speciesOfLog = (logId: string | null): string => work.onTheDay.find(({ id }) => id === logId)?.species ?? commonest;
  const boards = dryBoards(work.boards, speciesOfLog, plan.targetPct);
  const thisMonth = Number(dayAt(at, booking.timeZone).slice(5, 7));
  const single = plan.temperatureF !== null && plan.humidityPct !== null ? [{ month: thisMonth, temperatureF: plan.temperatureF, humidityPct: plan.humidityPct }] : [];
  const months = dryingMonths(plan.months.length > 0 ? (plan.months as MonthAir[]) : single);
  const pieces = readProjectPieces(plan.pieces);
  const readings = await MoistureReading.findAll({ where: { bookingId: booking.id }, order: [['readOn', 'ASC'], ['enteredAt', 'ASC']] });
  return {
    number, title: listing.title ?? '', timeZone: booking.timeZone,
    plan: { airSource: plan.airSource, targetPct: plan.targetPct, stackWidthFt: plan.stackWidthFt, sawKerfIn: plan.sawKerfIn, pieces: plan.pieces, remindOn: plan.remindOn },
    months,
    now: months.find(({ month }) => month === thisMonth) ?? months[0] ?? null,
    isThisMonth: months.some(({ month }) => month === thisMonth),
    stacks: [...new Set(boards.map(({ species }) => species))].map((code) => stackOf(code, boards.filter(({ species }) => species === code), plan.stackWidthFt)),
    boards: boards.map((board) => ({ ...board, speciesName: speciesOf(board.species).name })),
    list: againstList(await listedPieces(booking.listingId), work.boards, (piece) => boards.find(({ greenThicknessIn, greenWidthIn }) => greenThicknessIn === piece.thicknessIn && greenWidthIn === piece.widthIn)?.species ?? commonest, plan.targetPct),
    stackedIn: Number(dayAt(work.tally.offeredAt ?? booking.startsAt ?? at, booking.timeZone).slice(5, 7)),
    cuts: pieces.ok && pieces.value.length > 0 ? cutProject(boards, pieces.value, plan.sawKerfIn) : [],
    readings: readings.map(({ id, readOn, moisturePct, note }) => ({ id, readOn, moisturePct, note })),
    boardsLeft: await boardsLeftOn(booking.listingId),
    allBoards: gathered(work.boards.filter(({ kind }) => kind === 'board').map(({ logId, thicknessIn, widthIn, lengthFt, count }) => ({ species: speciesOfLog(logId), thicknessIn, widthIn, lengthFt, count }))).map(boardLine).join('\n'),
    listingNumber: listing.number,
    can,
  };
}

function stackOf(code: string, boards: readonly DryBoards[], stackWidthFt: number): SpeciesStack {
  const species = speciesOf(code);
  const thinnest = Math.min(...boards.map(({ greenThicknessIn }) => greenThicknessIn));
  const spacingIn = usualSpacingIn(species.group, thinnest);
  const sizes = boards.map(({ greenThicknessIn, greenWidthIn, lengthFt, count }) => ({ thicknessIn: greenThicknessIn, widthIn: greenWidthIn, lengthFt, count }));
  const stack = planStack({ boards: sizes, stackWidthFt, stickerIn: STICKER_IN, spacingIn, densityLbPerFt3: species.greenDensityLbPerFt3 });
  return { speciesName: species.name, spacingIn, stack, weightPerCourseLb: stack.layers === 0 ? 0 : stack.weightLb / stack.layers, airDrying: airDryingDays(species, thinnest) };
}
