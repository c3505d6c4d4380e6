import { patternOf } from '~/domain/sawing/pattern-words.ts';
import { cutSheet } from '~/domain/sawing/cut-sheet.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { barkRatio } from '~/domain/timber/taper-and-bark.ts';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import { abilities, rolesOnBooking } from '../authorize.ts';
import { sawnPieces } from '~/domain/sawing/sawn-piece.ts';
import { boardPlans } from '../board-plans.ts';
import { notFound, signedOut } from '../errors.ts';
import { listedPieces, listedShapes } from '../listed-pieces.ts';
import { Booking } from '../models/booking.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import type { Viewer } from '../viewer.ts';

/**
 * The cut sheet of a booking, for its two sides and moderators: each log's plan on the mill that comes, as it is cut.
 * @param asked how boards are sawn; anything unknown leaves it to the planner
 * @throws Refusal `notFound` for everybody else
 */
export async function cutSheetPage(viewer: Viewer | null, number: number, asked: string | null) {
  if (!viewer) throw signedOut();
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number } }) : null;
  if (!booking || !abilities('booking', rolesOnBooking(viewer, booking), booking.status).see) throw notFound('booking');
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const { mill } = (await Bid.findByPk(booking.bidId, { rejectOnEmpty: true })) as unknown as { mill: BidMill };
  const logs = await listedShapes(listing.id);
  const pieces = sawnPieces(await listedPieces(listing.id));
  const pattern = patternOf(asked);
  const plan = await boardPlans(logs, pieces, mill, pattern);
  return {
    number, title: listing.title ?? '', mill, pieces, pattern, list: plan.list,
    logs: logs.map((log, index) => {
      const planned = plan.logs[index];
      const shape = { smallEndIn: log.smallEndIn, lengthFt: log.lengthFt, ...(log.largeEndIn === null ? {} : { largeEndIn: log.largeEndIn }) };
      const sheet = planned?.core ? cutSheet(shape, planned.core, planned.plan, barkRatio(speciesOf(log.species))) : null;
      return { log, planned, sheet };
    }),
  };
}

export type CutSheetPage = Awaited<ReturnType<typeof cutSheetPage>>;
