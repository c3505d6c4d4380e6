import { times } from '~/domain/money.ts';
import type { Day } from '~/domain/time.ts';
import { chargedMiles } from '~/domain/trade/price.ts';
import { findGroups, weighGroup, type TripCandidate, type TripGroup } from '~/domain/trade/trip-groups.ts';
import { authorize } from '../authorize.ts';
import type { FrozenEstimate } from '../bid-work.ts';
import { rows } from '../db.ts';
import { Booking } from '../models/booking.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import { stopToPlan, cellOf } from '../trip-work.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import { jobsForSawyer, sawyerAtWork, type SawyerAtWork } from './jobs-for-sawyer.ts';
import { pointOf } from './listing-page.ts';

/** Groups are looked for among so many nearest listings that fit. */
const NEAREST_JOINED = 30;

/** The sawyer's bookings on a day that have not ended. */
export async function bookedOn(sawyerId: string, day: Day): Promise<Booking[]> {
  const ids = await rows<{ id: string }>('SELECT booking_id AS id FROM booked_day WHERE sawyer_id = $1 AND day = $2 AND active', [sawyerId, day]);
  return Booking.findAll({ where: { id: ids.map(({ id }) => id), status: ['proposed', 'agreed', 'held'] }, order: [['startsAt', 'ASC'], ['id', 'ASC']] });
}

/** A place that may be part of a trip, as the planning page shows it: a town and miles, never more. */
export interface JoinableStop {
  readonly number: number;
  readonly title: string;
  readonly town: string;
  readonly boardFeet: number;
  readonly sawBy: string | null;
  readonly standing: 'booked' | 'bid' | 'open';
  readonly booking: number | null;
  /** The cell of the grid, which several may share. */
  readonly cell: string;
  readonly candidate: TripCandidate;
}

export interface TripPlanning {
  readonly booked: readonly JoinableStop[];
  readonly stops: readonly JoinableStop[];
  readonly groups: readonly TripGroup[];
  /** The places chosen, weighed as one outing; null while fewer than two are. */
  readonly chosen: TripGroup | null;
  readonly missing: 'mill' | 'rates' | 'base' | null;
  /** Chosen cells with more than one place: their logs may be decked together. */
  readonly shareable: readonly { readonly cell: string; readonly titles: readonly string[] }[];
}

/** A stop from what its bid froze. */
async function fromBid(bid: Bid, booking: Booking | null): Promise<JoinableStop> {
  const listing = await Listing.findByPk(bid.listingId, { rejectOnEmpty: true });
  const { quote } = (bid.estimate as FrozenEstimate).estimate;
  return {
    number: listing.number, title: listing.title ?? '', town: listing.town ?? '', boardFeet: listing.boardFeet, sawBy: listing.sawBy, standing: booking ? 'booked' : 'bid', booking: booking?.number ?? null, cell: cellOf(listing),
    candidate: { ...stopToPlan({ bid, listing, booking, landing: listing.id }), id: String(listing.number), aloneCents: quote.expected.costCents - quote.expected.taxCents },
  };
}

/** Open listings near the sawyer's base that fit, nearest first, without those bid on. Leans on `listing_open_near`. */
async function nearby(sawyer: SawyerAtWork, without: ReadonlySet<number>, at: Date): Promise<readonly JoinableStop[]> {
  const { base, card } = sawyer;
  if (!base || !card) return [];
  const ids = await rows<{ id: string }>(
    `SELECT l.id FROM listing l JOIN sawyer_profile s ON s.account_id = $1
     WHERE l.status = 'open' AND l.hidden_at IS NULL AND l.closes_at > $2 AND l.owner_id <> $1 AND ST_DWithin(l.coarse, s.base, s.travel_miles * 1609.344 / 1.25, false)
       AND NOT EXISTS (SELECT 1 FROM account_block b WHERE (b.blocker_id, b.blocked_id) IN (($1, l.owner_id), (l.owner_id, $1)))
       AND EXISTS (SELECT 1 FROM mill m WHERE m.sawyer_id = $1 AND m.retired_at IS NULL AND l.largest_end_ob_in <= m.largest_log_in + 0.005 AND l.longest_log_ft <= m.longest_ft AND l.shortest_log_ft >= m.shortest_ft)
     ORDER BY l.coarse <-> s.base LIMIT ${NEAREST_JOINED}`,
    [sawyer.id, at],
  );
  const listings = (await Listing.findAll({ where: { id: ids.map(({ id }) => id) }, order: ['number'] })).filter(({ number }) => !without.has(number));
  const toWeigh = listings.flatMap((listing) => (listing.coarse ? [{ id: listing.id, coarse: pointOf(listing.coarse), helpers: (listing.access as { helpers?: number } | null)?.helpers ?? 0 }] : []));
  const jobs = await jobsForSawyer(sawyer, toWeigh);
  return listings.flatMap((listing): JoinableStop[] => {
    const job = jobs.get(listing.id);
    const mill = sawyer.mills.find(({ id }) => id === job?.mill.id);
    if (!job?.fit.fits || !job.worth || !mill || !listing.coarse) return [];
    const { roadMiles, estimateCents } = job.worth;
    return [{
      number: listing.number, title: listing.title ?? '', town: listing.town ?? '', boardFeet: listing.boardFeet, sawBy: listing.sawBy, standing: 'open', booking: null, cell: cellOf(listing),
      candidate: { id: String(listing.number), point: pointOf(listing.coarse), roadMiles, sawingHours: listing.boardFeet / mill.paceBfPerHour, boardFeet: listing.boardFeet, aloneTravelCents: times(chargedMiles(card, roadMiles), card.travel.perMileCents), landing: listing.id, aloneCents: estimateCents },
    }];
  });
}

/**
 * What a sawyer may join into one outing on a day: what is booked, what has a live bid, and open listings near that fit; good groups
 * among them, and the chosen places weighed.
 * @throws Refusal when the viewer does not saw
 */
export async function tripPlanning(viewer: Viewer | null, day: Day | null, chosen: readonly number[], together: readonly string[], at: Date): Promise<TripPlanning> {
  authorize(viewer, 'sawyer', 'planTrips', baseRoles(viewer));
  const sawyer = await sawyerAtWork(viewer.id);
  const missing = sawyer === null ? 'mill' : sawyer.card === null ? 'rates' : sawyer.base === null ? 'base' : null;
  if (!sawyer?.card || missing !== null || day === null) return { booked: [], stops: [], groups: [], chosen: null, missing, shareable: [] };
  const { card, feeBasisPoints } = sawyer;
  const booked: JoinableStop[] = [];
  for (const booking of await bookedOn(viewer.id, day)) booked.push(await fromBid(await Bid.findByPk(booking.bidId, { rejectOnEmpty: true }), booking));
  const bids: JoinableStop[] = [];
  for (const bid of await Bid.findAll({ where: { sawyerId: viewer.id, status: 'open' }, order: [['updatedAt', 'DESC']], limit: NEAREST_JOINED })) bids.push(await fromBid(bid, null));
  const open = await nearby(sawyer, new Set([...booked, ...bids].map(({ number }) => number)), at);
  const stops = [...bids, ...open].sort((a, b) => a.candidate.roadMiles - b.candidate.roadMiles || a.number - b.number);
  const inTime = stops.filter(({ sawBy }) => sawBy === null || sawBy >= day);
  const picked = [...booked, ...stops.filter(({ number }) => chosen.includes(number))];
  const landed = picked.map(({ cell, candidate }) => (together.includes(cell) ? { ...candidate, landing: cell } : candidate));
  const cells = [...new Set(picked.map(({ cell }) => cell))].map((cell) => ({ cell, titles: picked.filter((one) => one.cell === cell).map(({ title }) => title) }));
  return {
    booked, stops, missing,
    groups: findGroups(card, inTime.map(({ candidate }) => candidate), booked.map(({ candidate }) => candidate), feeBasisPoints),
    chosen: chosen.length > 0 && landed.length >= 2 && landed.length <= 10 ? weighGroup(card, landed, feeBasisPoints) : null,
    shareable: cells.filter(({ titles }) => titles.length > 1),
  };
}
