import type { Access, Landing, Waste } from '~/domain/listing/answers.ts';
import type { PieceRead } from '~/domain/listing/rows.ts';
import { may } from '~/domain/permissions.ts';
import { dayStart, formatTimeOfDay, type Day } from '~/domain/time.ts';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import { ROAD_MPH } from '~/domain/trade/job-worth.ts';
import { packingList, type PackedItem, type StopToPackFor } from '~/domain/trade/packing.ts';
import { roadMiles } from '~/domain/trade/road-miles.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import type { FrozenEstimate } from '../bid-work.ts';
import { rows } from '../db.ts';
import { startTimeOf } from '../invitations.ts';
import { Booking } from '../models/booking.ts';
import { Listing, Piece } from '../models/listing.ts';
import { Bid, SawyerProfile } from '../models/sawyer.ts';
import { partyOf } from '../parties.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import { exactPlace, type ExactPlace, pointOf } from './listing-page.ts';

/** A stop of the day. Contact, place and access notes are null until the money is held. */
export interface DayStop {
  readonly booking: number;
  readonly status: Booking['status'];
  readonly listing: number;
  readonly title: string;
  readonly town: string;
  readonly state: string;
  readonly from: string;
  /** When the work there is done, as far as it can be told. */
  readonly until: string;
  /** From the stop before or the base, between coarse points. */
  readonly legMiles: number | null;
  readonly logCount: number;
  readonly boardFeet: number;
  readonly metalRisk: string;
  readonly metalNote: string;
  readonly pieces: readonly PieceRead[];
  readonly held: { readonly landowner: string; readonly email: string; readonly place: ExactPlace; readonly access: Access; readonly landing: Landing; readonly waste: Waste } | null;
}

export interface DaySheet {
  readonly day: Day;
  readonly stops: readonly DayStop[];
  readonly packing: readonly PackedItem[];
  /** Base to the stops in order and back; null without a base. */
  readonly miles: number | null;
  readonly roadHours: number;
}

/** The bookings of the day in the order they are reached. Leans on the exclusion index of `booked_day`. */
async function bookingsOn(sawyerId: string, day: Day): Promise<readonly { booking: Booking; startsAt: Date }[]> {
  const ids = await rows<{ id: string }>('SELECT booking_id AS id FROM booked_day WHERE sawyer_id = $1 AND day = $2 AND active', [sawyerId, day]);
  const timed: { booking: Booking; startsAt: Date }[] = [];
  for (const booking of await Booking.findAll({ where: { id: ids.map(({ id }) => id) } })) timed.push({ booking, startsAt: dayStart(day, booking.timeZone, await startTimeOf(booking.id)) });
  return timed.sort((a, b) => a.startsAt.getTime() - b.startsAt.getTime() || (a.booking.number ?? 0) - (b.booking.number ?? 0));
}

const piecesOf = async (listingId: string): Promise<readonly PieceRead[]> =>
  (await Piece.findAll({ where: { listingId }, order: ['position'] })).map(({ label, thicknessIn, widthIn, lengthFt, count, sizing, forDwelling, kind }) => ({ label, thicknessIn, widthIn, lengthFt, count, sizing, forDwelling, kind }));

/** The sawyer's day: stops in order with times and miles, and what to pack. @throws Refusal when the viewer does not saw */
export async function daySheet(viewer: Viewer | null, day: Day): Promise<DaySheet> {
  authorize(viewer, 'sawyer', 'keepProfile', baseRoles(viewer));
  const base = (await SawyerProfile.findByPk(viewer.id))?.base ?? null;
  const stops: DayStop[] = [];
  const toPack: StopToPackFor[] = [];
  let at = base && pointOf(base);
  let miles = 0;
  for (const { booking, startsAt } of await bookingsOn(viewer.id, day)) {
    const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
    const bid = await Bid.findByPk(booking.bidId, { rejectOnEmpty: true });
    const { estimate, terms, options } = bid.estimate as FrozenEstimate;
    const here = listing.coarse && pointOf(listing.coarse);
    const legMiles = at && here ? roadMiles(at, here) : null;
    miles += legMiles ?? 0;
    at = here ?? at;
    const access = listing.access as unknown as Access | null;
    const seen = may('booking', 'seePlace', rolesOnBooking(viewer, booking), booking.status) && access !== null;
    const landowner = seen ? await partyOf(booking.landownerId) : null;
    stops.push({
      booking: booking.number ?? 0, status: booking.status, listing: listing.number, title: listing.title ?? '', town: listing.town ?? '', state: listing.state ?? '', legMiles,
      from: formatTimeOfDay(startsAt, booking.timeZone), until: formatTimeOfDay(new Date(startsAt.getTime() + estimate.hours.expected * 3_600_000), booking.timeZone),
      logCount: listing.logCount, boardFeet: Math.round(estimate.lumber.bf.expected), metalRisk: listing.metalRisk ?? 'unknown', metalNote: listing.metalNote, pieces: await piecesOf(listing.id),
      held: landowner && access ? { landowner: landowner.name, email: landowner.email, place: exactPlace(listing), access, landing: listing.landing as unknown as Landing, waste: listing.waste as unknown as Waste } : null,
    });
    toPack.push({
      metalRisk: listing.metalRisk ?? 'unknown', boardFeet: estimate.lumber.bf.expected, millKind: (bid.mill as BidMill).kind, water: access?.water === 'yes', machine: (access?.machine ?? 'none') !== 'none',
      offBearer: terms.offBearer, stickers: options.stickers ?? 0,
    });
  }
  const home = base && at ? roadMiles(at, pointOf(base)) : 0;
  return { day, stops, packing: packingList(toPack), miles: base ? miles + home : null, roadHours: (miles + home) / ROAD_MPH };
}
