import type { BidTerms, RateCard } from '~/domain/trade/rate-card.ts';

/** A plain card: $0.50 / bf of lumber tally (hardwood), $75 set-up, $2 a mile beyond 25. Invented; tests change what they need. */
export const OAK_CARD: RateCard = {
  basis: { kind: 'lumber-tally', rule: 'hardwood', perBf: { withCents: 60, withoutCents: 50 } },
  slabs: null,
  surcharges: { quartersawnPerBf: 0, underFourQuarterPerBf: 0, overWide: null, overLong: null, dirtyPerLog: 0 },
  extras: { movingMill: null, waitingPerHour: 6_000, wasteHauled: null, wasteBundled: null, stickerEach: null, deliveryPerLoad: null },
  cullOpening: { kind: 'hour', cents: 8_000 },
  setUpPerLanding: 7_500,
  travel: { freeMiles: 25, perMileCents: 200, owedAgainAfterRain: false },
  minimum: { cents: 0, covers: 'whole-job' },
  metal: { resharpenedCents: 1_000, destroyedCents: 3_500, capCents: 10_500 },
  tax: null,
};

/** A bid on `OAK_CARD`, 31 road miles away, off-bearer provided by the landowner, slabs left. */
export const OAK_TERMS: BidTerms = { card: OAK_CARD, roadMiles: 31, metalCapCents: 10_500, offBearer: 'landowner-provides', waste: 'left', landings: 1 };

/** The same bid with a few things changed on its card. */
export const termsWith = (card: Partial<RateCard>, terms: Partial<BidTerms> = {}): BidTerms => ({ ...OAK_TERMS, ...terms, card: { ...OAK_CARD, ...card } });
