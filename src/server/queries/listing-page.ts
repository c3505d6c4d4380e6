import type { Point } from '~/domain/geo.ts';
import type { Access, Landing, Waste } from '~/domain/listing/answers.ts';
import type { LogRead, PieceRead } from '~/domain/listing/rows.ts';
import { may } from '~/domain/permissions.ts';
import type { BidState } from '~/domain/states/bid.ts';
import type { Defect } from '~/domain/timber/defects.ts';
import { dayAt } from '~/domain/time.ts';
import { abilities, rolesOnBooking, rolesOnListing } from '../authorize.ts';
import { notFound } from '../errors.ts';
import { Booking } from '../models/booking.ts';
import { Listing, Log, Piece } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import type { GeoPoint } from '../models/table.ts';
import type { Viewer } from '../viewer.ts';

export interface ExactPlace {
  readonly point: Point;
  /** Whether somebody set the pin; otherwise it is the middle of the ZIP area. */
  readonly pinned: boolean;
  readonly directions: string;
}

export interface ListingPage {
  readonly id: string;
  readonly number: number;
  readonly status: Exclude<Listing['status'], 'draft'>;
  readonly title: string;
  readonly revision: number;
  /** Why a moderator took it off show; null when it is on show. Only the owner and moderators ever read it. */
  readonly hiddenBecause: string | null;
  readonly town: string;
  readonly state: string;
  readonly timeZone: string;
  /** On the coarse grid: the same for every reader. */
  readonly coarse: Point;
  readonly howDown: string;
  readonly cameDownOn: string;
  readonly endsSealed: boolean;
  readonly access: Access;
  readonly landing: Landing;
  readonly waste: Waste;
  readonly metalRisk: string;
  readonly metalNote: string;
  readonly note: string;
  readonly closesAt: Date;
  /** The last day for bids, in the site's own calendar. */
  readonly closesOn: string;
  readonly lapsesAt: Date | null;
  readonly sawBy: string | null;
  readonly sawByReason: string | null;
  readonly species: readonly string[];
  readonly boardFeet: number;
  readonly logs: readonly (LogRead & { readonly position: number })[];
  readonly pieces: readonly PieceRead[];
  /** Bids that can still be chosen, or have been. */
  readonly bids: number;
  /** The viewer's own newest bid on it. */
  readonly ownBid: BidState | null;
  /** The viewer's booking of it. */
  readonly booking: number | null;
  /** For the owner, and for the chosen sawyer once the money is held. A moderator asks for it by itself, and that is recorded. */
  readonly place: ExactPlace | null;
  readonly isOwner: boolean;
  readonly isModerator: boolean;
  readonly can: ReturnType<typeof abilities<'listing'>>;
}

export const pointOf = (geo: GeoPoint): Point => ({ lat: geo.coordinates[1], lng: geo.coordinates[0] });

/** The exact place as its few readers see it. */
export function exactPlace(listing: Listing): ExactPlace {
  const { lat, directions } = listing.typed as { lat?: unknown; directions?: unknown };
  if (!listing.place) throw new Error(`listing ${listing.number} has no place`);
  return { point: pointOf(listing.place), pinned: typeof lat === 'string' && lat.trim() !== '', directions: typeof directions === 'string' ? directions : '' };
}

/** Whether this viewer is the chosen sawyer of a booking whose money is held. */
const seesByBooking = (viewer: Viewer | null, booking: Booking | null): boolean =>
  booking !== null && may('booking', 'seePlace', rolesOnBooking(viewer ? { ...viewer, isModerator: false } : null, booking), booking.status);

async function rowsOf(listing: Listing): Promise<Pick<ListingPage, 'logs' | 'pieces'>> {
  const logs = await Log.findAll({ where: { listingId: listing.id, removedAt: null }, order: ['position'] });
  const pieces = await Piece.findAll({ where: { listingId: listing.id }, order: ['position'] });
  return {
    logs: logs.map(({ id, position, species, smallEndIn, largeEndIn, lengthFt, heartDefectIn, defects, note }) => ({ id, position, species, smallEndIn, largeEndIn, lengthFt, heartDefectIn, defects: defects as Defect[], note })),
    pieces: pieces.map(({ label, thicknessIn, widthIn, lengthFt, count, sizing, forDwelling, kind }) => ({ label, thicknessIn, widthIn, lengthFt, count, sizing, forDwelling, kind })),
  };
}

/**
 * The page of a listing, as this reader may see it.
 * @throws Refusal `notFound` for a draft, and for a hidden listing to anybody but its owner and moderators
 */
export async function listingPage(viewer: Viewer | null, number: number): Promise<ListingPage> {
  const listing = await Listing.findOne({ where: { number } });
  const isOwner = viewer !== null && listing?.ownerId === viewer.id;
  const isModerator = viewer?.isModerator ?? false;
  if (!listing || listing.status === 'draft' || (listing.hiddenAt && !isOwner && !isModerator)) throw notFound('listing');
  const { coarse, closesAt, timeZone } = listing;
  if (!coarse || !closesAt || !timeZone) throw new Error(`listing ${number} is not whole`);
  const ownBid = viewer ? await Bid.findOne({ where: { listingId: listing.id, sawyerId: viewer.id }, order: [['createdAt', 'DESC']], attributes: ['status'] }) : null;
  const booking = viewer ? await Booking.findOne({ where: { listingId: listing.id, ...(isOwner ? { landownerId: viewer.id } : { sawyerId: viewer.id }) }, order: [['createdAt', 'DESC']] }) : null;
  return {
    id: listing.id, number, status: listing.status, title: listing.title ?? '', revision: listing.revision,
    hiddenBecause: listing.hiddenAt ? (listing.hiddenReason ?? '') : null,
    town: listing.town ?? '', state: listing.state ?? '', timeZone, coarse: pointOf(coarse),
    howDown: listing.howDown ?? '', cameDownOn: listing.cameDownOn ?? '', endsSealed: listing.endsSealed ?? false,
    access: listing.access as unknown as Access, landing: listing.landing as unknown as Landing, waste: listing.waste as unknown as Waste,
    metalRisk: listing.metalRisk ?? '', metalNote: listing.metalNote, note: listing.note,
    // The stored instant is the midnight after the last day.
    closesAt, closesOn: dayAt(new Date(closesAt.getTime() - 1), timeZone), lapsesAt: listing.lapsesAt, sawBy: listing.sawBy, sawByReason: listing.sawByReason,
    species: listing.species, boardFeet: listing.boardFeet,
    ...(await rowsOf(listing)),
    bids: await Bid.count({ where: { listingId: listing.id, status: ['open', 'toConfirm', 'chosen'] } }),
    ownBid: ownBid?.status ?? null,
    booking: booking?.number ?? null,
    place: isOwner || seesByBooking(viewer, booking) ? exactPlace(listing) : null,
    isOwner, isModerator,
    can: abilities('listing', rolesOnListing(viewer, listing), listing.status),
  };
}
