import { z } from 'zod';
import { choice, day, fieldOf, idOf, list, money, number, optional, text, whole } from './fields.ts';

/** How many days a bid may offer. */
export const MOST_DAYS = 10;

/** The terms of a bid as its form posts them: enough to work the figures out. What they come to is worked out by us, never posted. */
export const bidTermsForm = z.object({
  millId: fieldOf(idOf('Choose the mill you would bring.')),
  /** The listing's revision the sawyer saw: a bid on an older one is refused, not guessed at. */
  listingRevision: fieldOf(whole(0, 1_000_000)),
  offBearer: fieldOf(choice(['landowner-provides', 'sawyer-brings'], 'Say who brings the off-bearer.')),
  waste: fieldOf(choice(['left', 'hauled', 'bundled'], 'Say what becomes of slabs and sawdust.')),
  roadMiles: fieldOf(whole(0, 1_000, 'miles')),
  metalCap: fieldOf(money),
  stickers: fieldOf(optional(whole(0, 5_000, 'stickers'))),
  deliveryLoads: fieldOf(optional(whole(0, 20, 'loads'))),
  ownBf: fieldOf(optional(number(1, 200_000, 'bf'))),
  ownReason: fieldOf(text(300)),
  days: list,
  message: fieldOf(text(2_000)),
});

/** A bid to be placed or changed: the terms with at least one day, and a reason where the sawyer's figure differs. */
export const bidForm = bidTermsForm.superRefine((bid, ctx) => {
  const days = bid.days.map((typed) => day(typed));
  const wrong = days.findIndex(({ ok }) => !ok);
  if (wrong >= 0) ctx.addIssue({ code: 'custom', path: ['days'], message: 'Write each day as year, month and day, like 2026-12-10.' });
  if (bid.days.length === 0) ctx.addIssue({ code: 'custom', path: ['days'], message: 'Offer at least one day you could come.' });
  if (bid.days.length > MOST_DAYS) ctx.addIssue({ code: 'custom', path: ['days'], message: `Offer at most ${MOST_DAYS} days.` });
  if (bid.ownBf !== null && bid.ownReason === '') ctx.addIssue({ code: 'custom', path: ['ownReason'], message: 'Say why your figure differs: the landowner reads this.' });
});

export type BidForm = z.output<typeof bidForm>;

/** Confirming a bid on a revised listing: the revision the sawyer saw. */
export const confirmBidForm = z.object({ listingRevision: fieldOf(whole(0, 1_000_000)) });

/** Choosing a bid: the revision of the listing that the landowner read. */
export const chooseBidForm = z.object({ listingRevision: fieldOf(whole(0, 1_000_000)), terms: z.string().max(100).default('') });
