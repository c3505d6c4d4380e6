import { Op } from 'sequelize';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import { split, type Split } from '~/domain/trade/settlement.ts';
import type { BidForm } from '~/schemas/bid-form.ts';
import { rolesOnBid, rolesOnListing } from '../authorize.ts';
import { abilities, may } from '~/domain/permissions.ts';
import { bidMill, type FrozenEstimate, listedLogs, milesTo, workOut } from '../bid-work.ts';
import { env } from '../env.ts';
import { forbidden, notFound, signedOut } from '../errors.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import type { Viewer } from '../viewer.ts';
import { setUpOf } from './sawyer-setup.ts';

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
  return {
    listing,
    logs: await listedLogs(listing.id),
    setUp,
    miles: await milesTo(viewer.id, listing),
    bid,
    closed: listing.status !== 'open' || (listing.closesAt !== null && listing.closesAt <= at),
    feeBasisPoints: env().FEE_BASIS_POINTS,
    can: bid === null ? null : abilities('bid', rolesOnBid(viewer, bid, listing), bid.status),
  };
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
  const worked = await workOut(form, listing, bidMill(mill), setUp.card, at);
  return { mill: bidMill(mill), worked, receives: receivesAtExpected(worked, feeBasisPoints) };
}

/** What a sawyer would receive when the tally comes to the expected cost. */
export const receivesAtExpected = ({ estimate: { quote } }: FrozenEstimate, feeBasisPoints: number): Split =>
  split(quote.expected.costCents, quote.expected.taxCents, { heldCents: quote.holdCents, feeBasisPoints });
