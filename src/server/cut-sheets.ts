import { createHash } from 'node:crypto';
import { cutLines } from '~/domain/sawing/cut-lines.ts';
import { cutSheet } from '~/domain/sawing/cut-sheet.ts';
import { boardsBySize } from '~/domain/sawing/listing-plan.ts';
import { largeEnd } from '~/domain/sawing/log-shape.ts';
import { usedFor } from '~/domain/sawing/pattern-words.ts';
import type { Pattern } from '~/domain/sawing/saw-plan.ts';
import { sawnPieces } from '~/domain/sawing/sawn-piece.ts';
import { barkRatio } from '~/domain/timber/taper-and-bark.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import type { CutSheetView, LogOfSheet } from '~/schemas/cut-sheet.ts';
import { boardPlans } from './board-plans.ts';
import { listedPieces, listedShapes } from './listed-pieces.ts';
import { Bid, type Booking } from './models/index.ts';

/** What a booking's cut sheet is worked out from. */
async function askedOf(booking: Booking) {
  const { mill } = (await Bid.findByPk(booking.bidId, { rejectOnEmpty: true })) as unknown as { mill: BidMill };
  return { mill, logs: await listedShapes(booking.listingId), pieces: sawnPieces(await listedPieces(booking.listingId)) };
}

/** Changes with the layout of what a phone keeps. */
const LAYOUT = 1;
type Asked = Awaited<ReturnType<typeof askedOf>>;
const keyOf = (asked: Asked): string => createHash('sha256').update(JSON.stringify([LAYOUT, asked])).digest('base64url').slice(0, 22);

/** Tells one sheet of a booking from another without planning it: a phone asks again only when it changes. */
export const cutSheetKey = async (booking: Booking): Promise<string> => keyOf(await askedOf(booking));

/**
 * Each log's plan on the mill that comes, as it is cut.
 * @throws Refusal `unavailable` when too many plans are being worked out
 */
export async function cutSheetOf(booking: Booking, pattern: Pattern | 'best') {
  const asked = await askedOf(booking);
  const { mill, logs, pieces } = asked;
  const plan = await boardPlans(logs, pieces, mill, pattern);
  return {
    key: keyOf(asked), mill, pieces, list: plan.list,
    logs: logs.map((log, index) => {
      const planned = plan.logs[index];
      const shape = { smallEndIn: log.smallEndIn, lengthFt: log.lengthFt, ...(log.largeEndIn === null ? {} : { largeEndIn: log.largeEndIn }) };
      const sheet = planned?.core ? cutSheet(shape, planned.core, planned.plan, barkRatio(speciesOf(log.species))) : null;
      return { log, planned, sheet };
    }),
  };
}

type SheetLog = Awaited<ReturnType<typeof cutSheetOf>>['logs'][number];

function useOf({ planned }: SheetLog, pieces: Asked['pieces']): string {
  if (!planned || planned.plan.boards.length === 0) return planned?.plan.reason ?? 'No boards planned';
  return planned.use === 'jacket' ? 'Jacket boards, 4/4' : `For ${usedFor(planned, pieces).replace(/^for /, '')}`;
}

function logOfSheet(each: SheetLog, pieces: Asked['pieces']): LogOfSheet {
  const { log, planned, sheet } = each;
  const core = planned?.core ?? null;
  const lines = core ? new Map(cutLines(core, planned?.plan.cuts ?? []).map((line) => [line.order, line])) : null;
  return {
    logId: log.id,
    plannedAs: { smallEndIn: log.smallEndIn, largeEndIn: log.largeEndIn, lengthFt: log.lengthFt },
    use: useOf(each, pieces),
    core: core ? { smallEndIn: core.smallEndIn, largeEndIn: largeEnd(core), heartDefectIn: core.heartDefectIn ?? null } : null,
    boards: (planned?.plan.boards ?? []).map(({ xIn, yIn, thicknessIn, widthIn, turned, startFt }) => ({ xIn, yIn, thicknessIn, widthIn, turned, startFt })),
    sizes: boardsBySize(planned?.plan.boards ?? []).map(({ thicknessIn, widthIn, lengthFt, count }) => ({ thicknessIn, widthIn, lengthFt, count })),
    raiseSmallEndIn: sheet?.raiseSmallEndIn ?? 0,
    pithHeightIn: sheet?.pithHeightIn ?? 0,
    cuts: (sheet?.cuts ?? []).map((cut) => ({ ...cut, line: lines?.get(cut.order) ?? null })),
  };
}

/** The sheet as a phone keeps it, each log sawn as it gives most. @throws Refusal `unavailable` when too many plans are being worked out */
export async function cutSheetView(booking: Booking): Promise<CutSheetView> {
  const { key, mill, pieces, logs } = await cutSheetOf(booking, 'best');
  return { booking: booking.number, key, millName: mill.name, kerfIn: mill.kerfIn, logs: logs.map((each) => logOfSheet(each, pieces)) };
}
