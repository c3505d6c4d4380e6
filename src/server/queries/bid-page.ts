import { Op } from 'sequelize';
import type { Part } from '~/domain/listing/changes.ts';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import { type Fit, fitLogs } from '~/domain/trade/mill-fit.ts';
import { split, type Split } from '~/domain/trade/settlement.ts';
import type { BidForm } from '~/schemas/bid-form.ts';
import { rolesOnBid, rolesOnListing } from '../authorize.ts';
import { abilities, may } from '~/domain/permissions.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { bidMill, estimateOn, type FrozenEstimate, listedLogs, lumberOn, milesTo, workOut } from '../bid-work.ts';
import { rows } from '../db.ts';
import { env } from '../env.ts';
import { forbidden, notFound, signedOut } from '../errors.ts';
import { Booking } from '../models/booking.ts';
import { Listing } from '../models/listing.ts';
import { Bid, type Mill } from '../models/sawyer.ts';
import type { Viewer } from '../viewer.ts';
import { sawyerDays } from './open-days.ts';
import { setUpOf } from './sawyer-setup.ts';

/** What a revision did to a bid: the parts of the listing that changed since, and the bid's own terms on the logs as they stand now. */
export interface Revised {
  readonly changed: readonly Part[];
  readonly worked: FrozenEstimate;
}

/** A mill that may be brought, with how these logs fit it. */
export interface MillToBring {
  readonly mill: BidMill;
  readonly fit: Fit;
}

/** Everything the bid form shows: the listing's logs, what the sawyer may bring, and a live bid to change. */
export async function bidPage(viewer: Viewer | null, listingNumber: number, at: Date) {
  if (!viewer) throw signedOut();
  const listing = Number.isSafeInteger(listingNumber) ? await Listing.findOne({ where: { number: listingNumber, hiddenAt: null, status: { [Op.ne]: 'draft' } } }) : null;
  if (!listing) throw notFound('listing');
  if (listing.ownerId === viewer.id) throw forbidden('Nobody bids on their own listing.');
  const roles = rolesOnListing(viewer, listing);
  if (!may('listing', 'bid', roles, 'open')) {
    throw forbidden(viewer.isSawyer ? 'Confirm your e-mail address before you bid: the link is in the message we sent you.' : 'Only sawyers bid. You can add sawing to your account on its page.');
  }
  const bid = await Bid.findOne({ where: { listingId: listing.id, sawyerId: viewer.id, status: ['open', 'toConfirm', 'chosen'] } });
  const setUp = await setUpOf(viewer.id);
  const logs = await listedLogs(listing.id);
  return {
    listing,
    logs,
    setUp,
    mills: setUp.mills.map((mill) => toBring(mill, logs)),
    miles: await milesTo(viewer.id, listing),
    days: await sawyerDays(viewer.id, listing.timeZone ?? 'UTC', at, bid?.daysOffered ?? []),
    bid,
    revised: bid?.status === 'toConfirm' ? await revisedSince(bid, listing) : null,
    booking: bid?.status === 'chosen' ? ((await Booking.findOne({ where: { bidId: bid.id }, attributes: ['number'] }))?.number ?? null) : null,
    closed: listing.status !== 'open' || (listing.closesAt !== null && listing.closesAt <= at),
    feeBasisPoints: env().FEE_BASIS_POINTS,
    can: bid === null ? null : abilities('bid', rolesOnBid(viewer, bid, listing), bid.status),
  };
}

function toBring(mill: Mill, logs: Awaited<ReturnType<typeof listedLogs>>): MillToBring {
  const frozen = bidMill(mill);
  return { mill: frozen, fit: fitLogs(frozen, logs.map((log) => ({ ...log, barkPct: speciesOf(log.species).barkPct }))) };
}

/** Leans on event_of_thing. An expected figure of the sawyer's own belonged to the old logs, as in confirming. */
async function revisedSince(bid: Bid, listing: Listing): Promise<Revised> {
  const found = await rows<{ part: Part }>(
    `SELECT DISTINCT jsonb_array_elements_text(data->'changed') AS part FROM event
     WHERE thing = 'listing' AND thing_id = $1 AND action = 'revise' AND (data->>'revision')::int > $2`,
    [listing.id, bid.listingRevision],
  );
  const { terms, options } = bid.estimate as FrozenEstimate;
  const mill = bid.mill as BidMill;
  return { changed: found.map(({ part }) => part), worked: await estimateOn(listing, mill, terms, options, null, await lumberOn(listing, mill)) };
}

export type BidPage = Awaited<ReturnType<typeof bidPage>>;

/** A bid as it would be if it were placed now, and what the sawyer would receive at the expected cost. */
export interface BidPreview {
  readonly mill: BidMill;
  readonly worked: FrozenEstimate;
  readonly receives: Split;
}

/** Works the form out without keeping anything. @throws Refusal `invalid` as placing it would */
export async function previewBid({ listing, setUp, feeBasisPoints }: BidPage, form: BidForm, at: Date): Promise<BidPreview | null> {
  const mill = setUp.mills.find(({ id }) => id === form.millId);
  if (!mill || !setUp.card) return null;
  const worked = await workOut(form, listing, bidMill(mill), setUp.card, at, await lumberOn(listing, bidMill(mill)));
  return { mill: bidMill(mill), worked, receives: receivesAtExpected(worked, feeBasisPoints) };
}

/** What a sawyer would receive when the tally comes to the expected cost. */
export const receivesAtExpected = ({ estimate: { quote } }: FrozenEstimate, feeBasisPoints: number): Split =>
  split(quote.expected.costCents, quote.expected.taxCents, { heldCents: quote.holdCents, feeBasisPoints });
