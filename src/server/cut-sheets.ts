import { createHash } from 'node:crypto';
import { cutLines } from '~/domain/sawing/cut-lines.ts';
import { cutSheet } from '~/domain/sawing/cut-sheet.ts';
import { boardsBySize } from '~/domain/sawing/listing-plan.ts';
import { largeEnd } from '~/domain/sawing/log-shape.ts';
import { usedFor } from '~/domain/sawing/pattern-words.ts';
import type { Pattern } from '~/domain/sawing/saw-plan.ts';
import { sawnPieces } from '~/domain/sawing/sawn-piece.ts';
import type { Defect } from '~/domain/timber/defects.ts';
import { barkRatio } from '~/domain/timber/taper-and-bark.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import { leftOf } from '~/domain/trade/still-wanted.ts';
import type { CutSheetView, LogOfSheet } from '~/schemas/cut-sheet.ts';
import { boardPlans } from './board-plans.ts';
import { dayLogs } from './day-logs.ts';
import { listedPieces, listedShapes } from './listed-pieces.ts';
import { Bid, type Booking } from './models/index.ts';
import { jobLogs, tallyWork } from './tally-work.ts';

/** What a booking's cut sheet is worked out from: the listing, and the logs that were measured again or added on the day. */
async function askedOf(booking: Booking) {
  const { mill } = (await Bid.findByPk(booking.bidId, { rejectOnEmpty: true })) as unknown as { mill: BidMill };
  const rows = await jobLogs(booking);
  const byId = new Map(rows.map((log) => [log.id, log]));
  const logs = (await listedShapes(booking.listingId)).filter(({ id }) => byId.get(id)?.addedOnTheDay !== true);
  const again = (await dayLogs(booking, rows)).flatMap((log) => {
    const row = byId.get(log.id);
    if (!row || (!log.added && log.measured === null)) return [];
    return [{ id: log.id, position: row.position, species: log.species, ...(log.measured ?? log.listed), heartDefectIn: row.heartDefectIn, defects: row.defects as Defect[], note: row.note }];
  });
  return { mill, logs, again, pieces: sawnPieces(await listedPieces(booking.listingId)) };
}

/** The pieces that the tally still lacks. */
async function stillWantedOf(booking: Booking, pieces: Asked['pieces']): Promise<Asked['pieces']> {
  const boards = (await tallyWork(booking))?.boards ?? [];
  return pieces.map((piece) => ({ ...piece, count: leftOf(piece, boards) })).filter(({ count }) => count > 0);
}

/**
 * Logs that are not as listed, each planned by itself as it was measured, for the pieces that are still wanted: the plans of the other
 * logs stand, because some of them are sawn.
 */
async function replan(booking: Booking, { again, pieces, mill }: Asked, pattern: Pattern | 'best') {
  if (again.length === 0) return [];
  const wanted = await stillWantedOf(booking, pieces);
  const found = [];
  for (const log of again) found.push({ log, planned: (await boardPlans([log], wanted, mill, pattern)).logs[0], pieces: wanted });
  return found;
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
  const replanned = await replan(booking, asked, pattern);
  return {
    key: keyOf(asked), mill, pieces, list: plan.list,
    logs: [...logs.filter(({ id }) => !replanned.some(({ log }) => log.id === id)).map((log) => ({ log, planned: plan.logs.find(({ id }) => id === log.id), pieces })), ...replanned].sort((a, b) => a.log.position - b.log.position).map(({ log, planned, pieces: wanted }) => {
      const shape = { smallEndIn: log.smallEndIn, lengthFt: log.lengthFt, ...(log.largeEndIn === null ? {} : { largeEndIn: log.largeEndIn }) };
      const sheet = planned?.core ? cutSheet(shape, planned.core, planned.plan, barkRatio(speciesOf(log.species))) : null;
      return { log, planned, sheet, pieces: wanted };
    }),
  };
}

type SheetLog = Awaited<ReturnType<typeof cutSheetOf>>['logs'][number];

function useOf({ planned, pieces }: SheetLog): string {
  if (!planned || planned.plan.boards.length === 0) return planned?.plan.reason ?? 'No boards planned';
  return planned.use === 'jacket' ? 'Jacket boards, 4/4' : `For ${usedFor(planned, pieces).replace(/^for /, '')}`;
}

function logOfSheet(each: SheetLog): LogOfSheet {
  const { log, planned, sheet } = each;
  const core = planned?.core ?? null;
  const lines = core ? new Map(cutLines(core, planned?.plan.cuts ?? []).map((line) => [line.order, line])) : null;
  return {
    logId: log.id,
    plannedAs: { smallEndIn: log.smallEndIn, largeEndIn: log.largeEndIn, lengthFt: log.lengthFt },
    use: useOf(each),
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
  const { key, mill, logs } = await cutSheetOf(booking, 'best');
  return { booking: booking.number, key, millName: mill.name, kerfIn: mill.kerfIn, logs: logs.map(logOfSheet) };
}
