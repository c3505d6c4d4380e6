import type { RateCard as Card } from '~/domain/trade/rate-card.ts';
import type { BidForm } from '~/schemas/bid-form.ts';
import { Listing, Log } from '~/server/models/listing.ts';
import { Mill, RateCard, SawyerProfile } from '~/server/models/sawyer.ts';
import { OAK_CARD } from './rate-cards.ts';

/** When the market of the checks plays: days offered lie after it. */
export const MARKET_AT = new Date('2026-07-20T15:00:00Z');

/** White oak, three logs of 12 ft (18, 16 and 14 in: 400 bf by International ¼), open until August, straight in the database. */
export async function makeOpenListing(ownerId: string, change: Partial<{ closesAt: Date; revision: number }> = {}): Promise<Listing> {
  const here = { type: 'Point' as const, coordinates: [-90.64, 43.65] as const };
  const listing = await Listing.create({
    ownerId, status: 'open', revision: change.revision ?? 1, title: 'White oak, 3 logs', treeOwner: 'mine', treeOwnerConfirmedAt: MARKET_AT, howDown: 'uprooted', cameDownOn: '2026-07-14',
    endsSealed: true, zip: '54665', town: 'Viroqua', state: 'WI', timeZone: 'America/Chicago', place: here, coarse: here, metalRisk: 'unknown', closesAt: change.closesAt ?? new Date('2026-08-10T05:00:00Z'),
    species: ['white-oak'], logCount: 3, boardFeet: 400, largestEndObIn: 21, createdAt: MARKET_AT, updatedAt: MARKET_AT, publishedAt: MARKET_AT,
  });
  for (const [index, smallEndIn] of [18, 16, 14].entries()) await Log.create({ listingId: listing.id, position: index + 1, species: 'white-oak', smallEndIn, lengthFt: 12 });
  return listing.reload();
}

/** Gives a sawyer a profile some miles north, a band mill and a rate card. @returns the mill's id */
export async function setUpSawyer(sawyerId: string, card: Card = OAK_CARD): Promise<string> {
  await SawyerProfile.create({ accountId: sawyerId, businessName: '', zip: '54656', town: 'Sparta', state: 'WI', timeZone: 'America/Chicago', base: { type: 'Point', coordinates: [-90.81, 43.94] }, updatedAt: MARKET_AT });
  await RateCard.create({ sawyerId, revision: 1, card, createdAt: MARKET_AT });
  const mill = await Mill.create({
    sawyerId, name: 'Wide band', kind: 'band', kerfIn: 3 / 32, largestLogIn: 30, widestCutIn: 26, widestBoardIn: 24, longestFt: 18, shortestFt: 4, paceBfPerHour: 200, turnsLogsBy: 'machine', createdAt: MARKET_AT,
  });
  return mill.id;
}

/** A bid as its form is understood: 31 road miles, the cap of the card, one day offered. */
export const bidOf = (millId: string, change: Partial<BidForm> = {}): BidForm => ({
  millId, listingRevision: 1, offBearer: 'landowner-provides', waste: 'left', roadMiles: 31, metalCap: 10_500, stickers: null, deliveryLoads: null,
  ownBf: null, ownReason: '', days: ['2026-08-04'], message: 'I can bring the mill in the first week of August.', ...change,
});
