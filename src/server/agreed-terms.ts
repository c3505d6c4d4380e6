import { createHash } from 'node:crypto';
import { type AgreedTerms, canonicalJson } from '~/domain/trade/agreement.ts';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import type { FrozenEstimate } from './bid-work.ts';
import { env } from './env.ts';
import type { Listing } from './models/listing.ts';
import type { Bid } from './models/sawyer.ts';

/** What a work agreement freezes when this bid is chosen: shown before the choice, kept by it. */
export function agreedTerms(bid: Bid, listing: Listing, landowner: string, sawyer: string): AgreedTerms {
  const { terms, estimate } = bid.estimate as FrozenEstimate;
  return {
    listing: { number: listing.number, title: listing.title ?? '', revision: listing.revision, logCount: listing.logCount },
    landowner, sawyer, mill: (bid.mill as BidMill).name, terms,
    figures: { lowCents: bid.lowCents, expectedCents: bid.expectedCents, highCents: bid.highCents, holdCents: bid.holdCents, expectedBf: estimate.lumber.bf.expected, expectedBy: bid.expectedBy },
    feeBasisPoints: env().FEE_BASIS_POINTS, daysOffered: bid.daysOffered, message: bid.message,
  };
}

/** Names the terms: any change gives another name. The work agreement keeps it, and a choice names the terms that were read by it. */
export const termsSha256 = (agreed: AgreedTerms): string => createHash('sha256').update(canonicalJson(agreed)).digest('hex');
