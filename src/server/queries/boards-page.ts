import { formatInches } from '~/domain/measure.ts';
import type { MillAtWork } from '~/domain/sawing/expected.ts';
import { TYPICAL_BAND_MILL } from '~/domain/sawing/typical-mill.ts';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import { bidMill } from '../bid-work.ts';
import { patternOf } from '~/domain/sawing/pattern-words.ts';
import { sawnPieces } from '~/domain/sawing/sawn-piece.ts';
import { boardPlans } from '../board-plans.ts';
import { rows } from '../db.ts';
import { Mill } from '../models/sawyer.ts';
import type { Viewer } from '../viewer.ts';
import { listingPage } from './listing-page.ts';

/** A mill that the boards can be shown on. */
export interface MillChoice {
  readonly key: string;
  readonly label: string;
  readonly mill: MillAtWork;
  /** Of a bid's mill, the lumber that the bid expects, bf. */
  readonly bidBf?: number | undefined;
}

const typical: MillChoice = { key: 'typical', label: `A typical band mill, kerf ${formatInches(TYPICAL_BAND_MILL.kerfIn, 32)}`, mill: TYPICAL_BAND_MILL };

const labelOf = (who: string, mill: BidMill): string => `${who}${mill.name}, kerf ${formatInches(mill.kerfIn, 32)}`;

// Leans on bid_of_listing: a listing has tens of live bids at most.
const LIVE_BIDS = `
  SELECT b.id, b.mill, b.expected_bf_hundredths AS hundredths, coalesce(nullif(p.business_name, ''), a.name) AS sawyer
  FROM bid b JOIN account a ON a.id = b.sawyer_id LEFT JOIN sawyer_profile p ON p.account_id = b.sawyer_id
  WHERE b.listing_id = $1 AND b.status IN ('open', 'toConfirm', 'chosen') ORDER BY b.created_at`;

/** Mills this reader may choose: the owner those of the live bids, a sawyer their own, everyone a typical one. */
async function millsFor(viewer: Viewer | null, listing: { readonly id: string; readonly isOwner: boolean }): Promise<readonly MillChoice[]> {
  if (!viewer) return [typical];
  if (listing.isOwner) {
    const bids = await rows<{ id: string; mill: BidMill; hundredths: number; sawyer: string }>(LIVE_BIDS, [listing.id]);
    return [...bids.map(({ id, mill, hundredths, sawyer }) => ({ key: id, label: labelOf(`${sawyer}: `, mill), mill, bidBf: hundredths / 100 })), typical];
  }
  const own = await Mill.findAll({ where: { sawyerId: viewer.id, retiredAt: null }, order: [['createdAt', 'ASC']] });
  return [...own.map((mill) => ({ key: mill.id, label: labelOf('Your mill: ', bidMill(mill)), mill: bidMill(mill) })), typical];
}

/**
 * The boards that a listing's logs give on a mill, for whoever may read the listing.
 * @param key which of the mills; anything else shows the first that may be chosen
 * @param asked how boards are sawn; anything unknown leaves it to the planner
 * @param visitor who is counted when nobody is signed in
 * @throws Refusal `notFound` as the listing's page does, `tooMany` when the reader waits for several already
 */
export async function boardsPage(viewer: Viewer | null, number: number, key: string | null, asked: string | null, visitor: string) {
  const listing = await listingPage(viewer, number);
  const mills = await millsFor(viewer, listing);
  const chosen = mills.find((mill) => mill.key === key) ?? mills[0] ?? typical;
  const pieces = sawnPieces(listing.pieces);
  const pattern = patternOf(asked);
  return { listing, mills, chosen, pieces, pattern, plan: await boardPlans(listing.logs, pieces, chosen.mill, pattern, viewer?.id ?? visitor) };
}

export type BoardsPage = Awaited<ReturnType<typeof boardsPage>>;
