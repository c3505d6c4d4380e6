import { Op } from 'sequelize';
import { formatCents, MOST_HOLD_CENTS } from '~/domain/money.ts';
import { roadMiles } from '~/domain/trade/road-miles.ts';
import { type BidEstimate, type BidMill, estimateBid, type ExpectedLumber, type ListedLog, lumberByPlan, withOwnFigure } from '~/domain/trade/bid-estimate.ts';
import { FIRST_YIELD } from '~/domain/sawing/expected.ts';
import { greenSize } from '~/domain/sawing/green-size.ts';
import type { BidTerms, RateCard as Card } from '~/domain/trade/rate-card.ts';
import type { QuoteOptions } from '~/domain/trade/quote.ts';
import type { Defect } from '~/domain/timber/defects.ts';
import { checkMillingDay, formatDay, type Day } from '~/domain/time.ts';
import type { BidForm } from '~/schemas/bid-form.ts';
import { rows } from './db.ts';
import { AccountBlock } from './models/account.ts';
import { type Listing, Log, Piece } from './models/listing.ts';
import { Mill, RateCard, SawyerProfile } from './models/sawyer.ts';
import { planLumber } from './services/planning.ts';
import { conflict, forbidden, invalid, notFound } from './errors.ts';

/** What a bid keeps in `bid.estimate`: everything it was worked out from and to, frozen. */
export interface FrozenEstimate {
  readonly terms: BidTerms;
  readonly options: QuoteOptions;
  readonly estimate: BidEstimate;
}

/** The logs of a listing as bids are worked on, in the order they lie. */
export async function listedLogs(listingId: string): Promise<readonly ListedLog[]> {
  const logs = await Log.findAll({ where: { listingId, removedAt: null, addedOnTheDay: false }, order: [['position', 'ASC']] });
  return logs.map((log) => ({
    id: log.id, species: log.species, smallEndIn: log.smallEndIn, lengthFt: log.lengthFt,
    ...(log.largeEndIn === null ? {} : { largeEndIn: log.largeEndIn }),
    defects: log.defects as Defect[],
  }));
}

/** A mill's row as a bid freezes it: at the pace and yield that its own jobs have shown, unless the sawyer has switched that off. */
export const bidMill = (mill: Mill): BidMill => ({
  id: mill.id, name: mill.name, kind: mill.kind, kerfIn: mill.kerfIn, largestLogIn: mill.largestLogIn, widestCutIn: mill.widestCutIn,
  widestBoardIn: mill.widestBoardIn, longestFt: mill.longestFt, shortestFt: mill.shortestFt,
  paceBfPerHour: mill.learns ? (mill.learnedPace ?? mill.paceBfPerHour) : mill.paceBfPerHour, realisedYield: mill.learns ? mill.realisedYield : FIRST_YIELD,
});

/** The sawyer's current rate card, or null when none was ever kept. */
export async function currentCard(sawyerId: string): Promise<Card | null> {
  const row = await RateCard.findOne({ where: { sawyerId }, order: [['revision', 'DESC']] });
  return row === null ? null : (row.card as Card);
}

/** Road miles one way from the sawyer's base to the listing, from their coarse points; null until the sawyer has a base. */
export async function milesTo(sawyerId: string, listing: Listing): Promise<number | null> {
  const base = (await SawyerProfile.findByPk(sawyerId))?.base;
  if (!base || !listing.coarse) return null;
  const [a, b] = [base.coordinates, listing.coarse.coordinates];
  return roadMiles({ lat: a[1], lng: a[0] }, { lat: b[1], lng: b[0] });
}

/**
 * The lumber that a mill is expected to saw from a listing as it stands: its sawing plans on these logs, for the sizes wanted. It
 * takes the planner some time, so commands ask for it before their transaction and check the revision inside it.
 */
export async function lumberOn(listing: Listing, mill: BidMill): Promise<Foreseen> {
  const logs = await listedLogs(listing.id);
  const pieces = await Piece.findAll({ where: { listingId: listing.id }, order: [['position', 'ASC']] });
  const wanted = pieces.map((piece) => ({ ...greenSize(piece), writtenThicknessIn: piece.thicknessIn, writtenWidthIn: piece.widthIn }));
  const { kerfIn, widestCutIn, widestBoardIn, longestFt, paceBfPerHour, realisedYield } = mill;
  const shapes = logs.map(({ id: _, ...log }) => log);
  const expected = await planLumber({ logs: shapes, mill: { kerfIn, widestCutIn, widestBoardIn, longestFt, paceBfPerHour, realisedYield }, wanted, measuredBy: 'landowner' });
  return { listingId: listing.id, revision: listing.revision, millId: mill.id, lumber: lumberByPlan(expected) };
}

/** Lumber worked out on a listing at a revision. */
export interface Foreseen {
  readonly listingId: string;
  readonly revision: number;
  readonly millId: string;
  readonly lumber: ExpectedLumber;
}

/** `lumberOn` for a command that has not locked anything yet; null when there is no such listing or mill, which the command then says itself. */
export async function foresee(sawyerId: string, listing: Listing | null, millId: string): Promise<Foreseen | null> {
  const mill = await Mill.findOne({ where: { id: millId, sawyerId, retiredAt: null } });
  return listing && mill ? lumberOn(listing, bidMill(mill)) : null;
}

/** The lumber foreseen, when it is of this listing as it now stands and of this mill. */
function stillOf(foreseen: Foreseen | null, listing: Listing, mill: BidMill): ExpectedLumber {
  if (!foreseen || foreseen.listingId !== listing.id || foreseen.revision !== listing.revision || foreseen.millId !== mill.id) {
    throw conflict('The listing was changed while you wrote. Load the page again: your bid must be worked out on the logs as they stand now.');
  }
  return foreseen.lumber;
}

/** Works a form out on a listing's logs with one mill and card. Refuses days that cannot be. */
export async function workOut(form: BidForm, listing: Listing, mill: BidMill, card: Card, at: Date, foreseen: Foreseen | null): Promise<FrozenEstimate> {
  checkDays(form.days, listing, at);
  const terms: BidTerms = { card, roadMiles: form.roadMiles, metalCapCents: form.metalCap, offBearer: form.offBearer, waste: form.waste, landings: 1 };
  if ((form.waste === 'hauled' && card.extras.wasteHauled === null) || (form.waste === 'bundled' && card.extras.wasteBundled === null)) {
    throw invalid([{ path: 'waste', message: 'Your rate card has no price for this. Put one there first; 0 when it costs nothing.' }]);
  }
  const options: QuoteOptions = { ...(form.stickers ? { stickers: form.stickers } : {}), ...(form.deliveryLoads ? { deliveryLoads: form.deliveryLoads } : {}) };
  return estimateOn(listing, mill, terms, options, form.ownBf, foreseen);
}

/** The estimate of frozen terms on the listing's logs as they stand now. */
export async function estimateOn(listing: Listing, mill: BidMill, terms: BidTerms, options: QuoteOptions, ownBf: number | null, foreseen: Foreseen | null): Promise<FrozenEstimate> {
  const logs = await listedLogs(listing.id);
  const worked = stillOf(foreseen, listing, mill);
  const lumber = ownBf === null ? worked : withOwnFigure(worked, ownBf);
  const estimate = estimateBid({ logs, mill, terms, options, lumber });
  const { holdCents } = estimate.quote;
  if (holdCents > MOST_HOLD_CENTS) throw invalid([{ path: '', message: `The hold comes to ${formatCents(holdCents)}, more than the ${formatCents(MOST_HOLD_CENTS)} that a card can pay. Look at your rates.` }]);
  return { terms, options, estimate };
}

/** The columns of a bid that follow from its estimate. */
export const bidFigures = ({ terms, estimate }: FrozenEstimate) => ({
  card: terms.card,
  roadMiles: terms.roadMiles,
  metalCapCents: terms.metalCapCents,
  offBearer: terms.offBearer,
  expectedBfHundredths: Math.round(estimate.lumber.bf.expected * 100),
  expectedBy: estimate.lumber.by,
  expectedCents: estimate.quote.expected.costCents,
  lowCents: estimate.quote.low.costCents,
  highCents: estimate.quote.high.costCents,
  holdCents: estimate.quote.holdCents,
});

function checkDays(days: readonly string[], listing: Listing, at: Date): void {
  const problems = days.flatMap((day) => {
    const checked = checkMillingDay(day, listing.timeZone ?? 'UTC', at);
    return checked.ok ? [] : checked.problems.map(({ message }) => ({ path: 'days', message }));
  });
  if (problems.length > 0) throw invalid(problems.slice(0, 1));
}

/** The sawyer's own mill in use. */
export async function millOf(sawyerId: string, millId: string): Promise<BidMill> {
  const mill = await Mill.findOne({ where: { id: millId, sawyerId, retiredAt: null } });
  if (!mill) throw invalid([{ path: 'millId', message: 'Choose one of your mills.' }]);
  return bidMill(mill);
}

/**
 * That none of the days to be offered is one the sawyer has taken off.
 * @throws Refusal `invalid` at the days
 */
export async function refuseDaysOff(sawyerId: string, days: readonly Day[], path = 'days'): Promise<void> {
  const off = await rows<{ day: Day }>('SELECT day::text AS day FROM sawyer_off WHERE sawyer_id = $1 AND day = ANY($2::date[]) ORDER BY day', [sawyerId, days]);
  if (off.length > 0) throw invalid([{ path, message: `You are off on ${off.map(({ day }) => formatDay(day)).join(', ')}. Offer another day, or give it back in your calendar first.` }]);
}

/** Refuses when the listing is hidden, past its closing, at another revision than the sawyer saw, or either side has blocked the other. */
export async function checkBiddable(listing: Listing, sawyerId: string, revision: number, at: Date): Promise<void> {
  if (listing.hiddenAt !== null) throw notFound('listing');
  if (listing.closesAt !== null && listing.closesAt <= at) throw conflict('Bidding on this listing has closed.');
  if (listing.revision !== revision) throw conflict('The listing was changed while you wrote. Load the page again: your bid must be worked out on the logs as they stand now.');
  const blocks = await AccountBlock.count({ where: { [Op.or]: [{ blockerId: sawyerId, blockedId: listing.ownerId }, { blockerId: listing.ownerId, blockedId: sawyerId }] } });
  if (blocks > 0) throw forbidden('You cannot bid on this listing.');
}
