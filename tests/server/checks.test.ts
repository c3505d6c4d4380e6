import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { allChecks, breachesOf, type Check } from '../../db/checks/checks.ts';
import { tellStory } from '../../db/story/story.ts';
import { rows, sequelize } from '~/server/db.ts';
import { openMoneyHouse, type MoneyHouse } from '../support/money-market.ts';
import { startStorage } from '../support/storage.ts';

let house: MoneyHouse;
let checks: readonly Check[];

beforeAll(async () => {
  house = await openMoneyHouse();
  await startStorage();
  await tellStory(new Date());
  checks = await allChecks();
}, 600_000);
afterAll(() => house.close());

const statesOf = async (table: string): Promise<string[]> => (await rows<{ status: string }>(`SELECT DISTINCT status FROM ${table} ORDER BY 1`)).map(({ status }) => status);

describe('the demo story', () => {
  it('has listings, bids, bookings and payments in every state that lasts', async () => {
    expect(await statesOf('listing')).toEqual(['closed', 'done', 'draft', 'lapsed', 'matched', 'open', 'withdrawn']);
    expect(await statesOf('bid')).toEqual(['chosen', 'declined', 'lapsed', 'open', 'released', 'toConfirm', 'withdrawn']);
    expect(await statesOf('booking')).toEqual(['agreed', 'cancelled', 'held', 'lapsed', 'proposed', 'queried', 'sawing', 'settled', 'signed', 'tallied']);
    // `settling` lasts only as long as the provider's answer.
    expect(await statesOf('held_payment')).toEqual(['due', 'held', 'refunded', 'settled', 'void']);
    expect(await statesOf('photo')).toEqual(['ready']);
    expect([await statesOf('shared_trip'), await statesOf('trip_stop')]).toEqual([['offered'], ['agreed', 'asked']]);
  });

  it('gives both demo accounts something to do', async () => {
    const [found] = await rows<{ bids: number; adaHeld: number; adaSettled: number; bramHeld: number; bramToSign: number; bramBids: number }>(
      `SELECT (SELECT count(*)::int FROM bid JOIN listing ON listing.id = listing_id AND listing.status = 'open' JOIN account ON account.id = owner_id WHERE email = 'ada@skidway.example' AND bid.status = 'open') AS bids,
         count(*) FILTER (WHERE owner.email = 'ada@skidway.example' AND booking.status = 'held')::int AS "adaHeld",
         count(*) FILTER (WHERE owner.email = 'ada@skidway.example' AND booking.status = 'settled')::int AS "adaSettled",
         count(*) FILTER (WHERE sawyer.email = 'bram@skidway.example' AND booking.status = 'held')::int AS "bramHeld",
         count(*) FILTER (WHERE sawyer.email = 'bram@skidway.example' AND booking.status = 'tallied')::int AS "bramToSign",
         (SELECT count(*)::int FROM bid JOIN account ON account.id = sawyer_id WHERE email = 'bram@skidway.example' AND bid.status = 'open') AS "bramBids"
       FROM booking JOIN account owner ON owner.id = landowner_id JOIN account sawyer ON sawyer.id = sawyer_id`,
    );
    expect(found).toMatchObject({ bids: 5, adaHeld: 1, adaSettled: 1, bramHeld: 2, bramToSign: 1 });
    expect(found?.bramBids).toBeGreaterThan(1);
  });

  it('agrees with the provider’s own books', async () => {
    const [ours] = await rows<{ cents: number }>(`SELECT sum(amount_cents)::int AS cents FROM ledger_entry WHERE account = 'provider balance'`);
    expect(ours?.cents).toBe(house.fake.control.books().platform.net);
  });
});

/**
 * A breach of each rule, done behind the application's back. Where the database itself refuses it, its guard is taken away first;
 * everything is undone afterwards.
 */
const breaches: Readonly<Record<string, readonly string[]>> = {
  'booked-days-agree-with-their-booking': [`UPDATE booked_day SET active = false WHERE id IN (SELECT id FROM booked_day WHERE active LIMIT 1)`],
  'booking-money-is-accounted-for': [`UPDATE provider_call SET request = jsonb_set(request, '{amountCents}', '1') WHERE id IN (SELECT id FROM provider_call WHERE kind = 'transfer' LIMIT 1)`],
  'bookings-agree-with-their-bid': [`UPDATE booking SET landowner_id = (SELECT id FROM account WHERE email = 'mo@skidway.example') WHERE number = 5001`],
  'chosen-bids-have-a-live-booking': [`DROP INDEX one_chosen_bid_per_listing`, `UPDATE bid SET status = 'chosen' WHERE id IN (SELECT id FROM bid WHERE status = 'released' LIMIT 1)`],
  'deadlines-are-set': [`UPDATE booking SET pay_by = NULL WHERE status = 'agreed'`],
  'ended-payments-owe-nothing': [`UPDATE held_payment SET status = 'refunded' WHERE status = 'held'`],
  'every-booking-has-its-agreement': [`DELETE FROM work_agreement WHERE booking_id = (SELECT id FROM booking WHERE number = 5002)`],
  'every-charge-is-in-the-ledger': [`UPDATE charge SET amount_cents = amount_cents + 1 WHERE id IN (SELECT id FROM charge LIMIT 1)`],
  'every-paid-call-is-in-the-ledger': [`UPDATE provider_call SET provider_id = 'tr_unknown' WHERE id IN (SELECT id FROM provider_call WHERE status = 'done' AND kind = 'transfer' LIMIT 1)`],
  'every-status-was-reached-by-a-recorded-move': [`UPDATE listing SET status = 'withdrawn' WHERE id IN (SELECT id FROM listing WHERE status = 'open' LIMIT 1)`],
  'ledger-sums-to-zero': [`UPDATE ledger_entry SET amount_cents = amount_cents + 1 WHERE id = (SELECT min(id) FROM ledger_entry)`],
  'listings-agree-with-their-booking': [`UPDATE listing SET status = 'done' WHERE status = 'matched'`],
  'live-bids-are-on-listings-that-take-a-choice': [`UPDATE bid SET status = 'open' WHERE id IN (SELECT bid.id FROM bid JOIN listing ON listing.id = listing_id WHERE bid.status = 'declined' AND listing.status = 'done' LIMIT 1)`],
  'messages-stay-between-two': [`UPDATE message SET recipient_id = (SELECT id FROM account WHERE email = 'mo@skidway.example')`],
  'moderators-have-a-second-factor': [`UPDATE account SET totp_secret = NULL WHERE is_moderator`],
  'nobody-bids-on-their-own-listing': [`UPDATE listing SET owner_id = bid.sawyer_id FROM bid WHERE bid.listing_id = listing.id AND bid.status = 'open'`],
  'nobody-is-owed-by-less-than-nothing': [`UPDATE ledger_entry SET amount_cents = -amount_cents WHERE account = 'platform fee'`],
  'one-chosen-bid-per-listing': [`DROP INDEX one_chosen_bid_per_listing`, `UPDATE bid SET status = 'chosen' WHERE status = 'declined'`],
  'one-outing-a-day': [`ALTER TABLE booked_day DROP CONSTRAINT one_outing_a_day`, `DROP INDEX booked_once`, `UPDATE booked_day SET day = '2030-01-02'`],
  'open-bids-are-on-the-listing-as-it-stands': [`UPDATE listing SET revision = revision + 1 WHERE status = 'open'`],
  'paid-checkouts-have-their-charge': [`UPDATE checkout SET status = 'expired' WHERE status = 'complete'`],
  'payments-agree-with-their-booking': [`UPDATE held_payment SET status = 'void' WHERE status = 'due'`],
  'places-shown-are-coarse': [`UPDATE listing SET coarse = place`],
  'queries-are-decided-when-signed': [`UPDATE tally_query SET decided_at = NULL`],
  'reviews-are-of-settled-jobs': [`UPDATE review SET subject_id = author_id`],
  'tallies-agree-with-their-booking': [`UPDATE tally SET offered_at = NULL WHERE signed_at IS NULL`],
};

/** How many breaches the check finds after these changes, which are then undone. */
async function foundAfter(check: Check, changes: readonly string[]): Promise<number> {
  const undone = new Error('undone');
  let found = -1;
  await sequelize.transaction(async () => {
    // No triggers: neither the append-only ones nor foreign keys.
    await sequelize.query('SET LOCAL session_replication_role = replica');
    for (const change of changes) await sequelize.query(change).catch((error: unknown) => Promise.reject(new Error(`${check.name}: ${String(error)}`, { cause: error })));
    found = (await breachesOf(check)).length;
    throw undone;
  }).catch((error: unknown) => {
    if (error !== undone) throw error;
  });
  return found;
}

describe('the checks of the database', () => {
  it('hold after the story, each with its rule in words', async () => {
    for (const check of checks) {
      expect(check.says, check.name).toMatch(/^[A-Z].+\.$/);
      expect(await breachesOf(check), check.says).toEqual([]);
    }
  });

  it('each find what breaks them', async () => {
    expect(Object.keys(breaches).sort()).toEqual(checks.map(({ name }) => name));
    for (const check of checks) expect(await foundAfter(check, breaches[check.name] ?? []), check.name).toBeGreaterThan(0);
    for (const check of checks) expect(await breachesOf(check), check.name).toEqual([]);
  });
});
