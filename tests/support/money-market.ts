import Stripe from 'stripe';
import { type FakeStripe, startFakeStripe } from '../../fakes/stripe/server.ts';
import { createServer, type Server } from 'node:http';
import { OAK_TERMS, termsWith } from './rate-cards.ts';
import { settle } from '~/domain/trade/settlement.ts';
import { NO_WORK } from '~/domain/trade/price.ts';
import { bookingStates } from '~/domain/states/booking.ts';
import { handleProviderEvent } from '~/server/commands/handle-provider-event.ts';
import { makeProviderCall } from '~/server/commands/make-provider-call.ts';
import { recordProviderEvent } from '~/server/commands/record-provider-event.ts';
import { settleBooking, type SettleOutcome } from '~/server/commands/settle-booking.ts';
import { inTransaction, rows } from '~/server/db.ts';
import { env } from '~/server/env.ts';
import { balances, heldFor } from '~/server/ledger.ts';
import { Bid, BookedDay, Booking, HeldPayment, Listing, Outing, SawyerProfile, Tally, WorkAgreement } from '~/server/models/index.ts';
import { transition } from '~/server/transition.ts';
import { system, type Viewer } from '~/server/viewer.ts';

/** The payment provider's stand-in at the address this file's environment names, and the application's ear for its messages. */
export interface MoneyHouse {
  readonly fake: FakeStripe;
  readonly provider: Stripe;
  /** Does what the worker would do until nothing is left: handles messages and makes calls. Failing calls are tried `tries` times. */
  readonly work: (tries?: number) => Promise<void>;
  readonly close: () => Promise<void>;
}

/** Opens the application's ear for the provider's messages in this process. */
async function openEar(): Promise<{ readonly url: string; readonly close: () => Promise<void> }> {
  const ear: Server = createServer((request, response) => {
    const parts: Buffer[] = [];
    request.on('data', (part: Buffer) => parts.push(part));
    request.on('end', () => {
      recordProviderEvent(Buffer.concat(parts).toString('utf8'), String(request.headers['stripe-signature'] ?? ''), new Date()).then(
        () => response.writeHead(200).end(),
        () => response.writeHead(400).end(),
      );
    });
  });
  await new Promise<void>((done) => ear.listen(0, '127.0.0.1', done));
  const address = ear.address();
  return {
    url: `http://127.0.0.1:${typeof address === 'object' && address ? address.port : 0}/`,
    close: async () => {
      ear.closeAllConnections();
      await new Promise((done) => ear.close(done));
    },
  };
}

/**
 * Starts both. Call it once in a file, in `beforeAll`.
 * @param webhookUrl where another process listens for the messages, if not this one
 */
export async function openMoneyHouse(webhookUrl?: string): Promise<MoneyHouse> {
  const ear = webhookUrl === undefined ? await openEar() : null;
  const fake = await startFakeStripe({
    port: Number(new URL(env().PAYMENTS_URL).port), key: env().PAYMENTS_SECRET_KEY, webhookUrl: webhookUrl ?? ear?.url ?? '', webhookSecret: env().PAYMENTS_WEBHOOK_SECRET, webhooks: { retryBaseMs: 20 },
  });
  const at = new URL(fake.url);
  const provider = new Stripe(env().PAYMENTS_SECRET_KEY, { host: at.hostname, port: at.port, protocol: 'http', maxNetworkRetries: 0, telemetry: false });
  return {
    fake, provider,
    work: (tries) => workAll(fake, tries),
    close: async () => {
      await fake.close();
      await ear?.close();
    },
  };
}

async function workAll(fake: FakeStripe, tries = 6): Promise<void> {
  // A claim or a wait after a failure is measured on this clock, which runs ahead so that no check sleeps.
  let clock = Date.now();
  for (let round = 0; round < tries; round += 1) {
    await fake.control.quiet();
    const events = await rows<{ id: string }>('SELECT id FROM provider_event WHERE handled_at IS NULL ORDER BY received_at');
    for (const { id } of events) await handleProviderEvent(id, new Date()).catch(() => undefined);
    const calls = await rows<{ id: string }>(`SELECT id FROM provider_call WHERE status IN ('waiting', 'failed') ORDER BY created_at`);
    for (const { id } of calls) await makeProviderCall(id, new Date(clock)).catch(() => undefined);
    if (events.length + calls.length === 0) return;
    clock += 7 * 3_600_000;
  }
  await fake.control.quiet();
}

/** An agreed booking straight in the database: White oak, `OAK_TERMS`, a hold of $600 (or as given), due, the day booked. */
export async function makeAgreedBooking(landowner: Viewer, sawyer: Viewer, options: { readonly holdCents?: number; readonly startsAt?: Date; readonly day?: string } = {}): Promise<Booking> {
  const at = new Date();
  const startsAt = options.startsAt ?? new Date(at.getTime() + 10 * 86_400_000);
  const holdCents = options.holdCents ?? 60_000;
  const here = { type: 'Point' as const, coordinates: [-90.64, 43.65] as const };
  const listing = await Listing.create({
    ownerId: landowner.id, status: 'matched', revision: 1, title: 'White oak, 3 logs', treeOwner: 'mine', treeOwnerConfirmedAt: at, howDown: 'uprooted', cameDownOn: '2026-07-14', endsSealed: true,
    zip: '54665', town: 'Viroqua', state: 'WI', timeZone: 'America/Chicago', place: here, coarse: here, metalRisk: 'unknown', closesAt: at, species: ['white-oak'], logCount: 3, boardFeet: 400, largestEndObIn: 21,
    createdAt: at, updatedAt: at, publishedAt: at,
  });
  const [mill] = await rows<{ id: string }>(
    `INSERT INTO mill (sawyer_id, name, kind, kerf_in, largest_log_in, widest_cut_in, widest_board_in, longest_ft, shortest_ft, pace_bf_per_hour, turns_logs_by, created_at)
     VALUES ($1, 'Wide band', 'band', 0.1, 30, 26, 24, 18, 4, 200, 'machine', $2) RETURNING id`,
    [sawyer.id, at],
  );
  const bid = await Bid.create({
    listingId: listing.id, listingRevision: 1, sawyerId: sawyer.id, millId: mill?.id ?? '', status: 'chosen', mill: {}, card: OAK_TERMS.card, estimate: { terms: OAK_TERMS }, roadMiles: 31, expectedBfHundredths: 40_000, expectedBy: 'log-scale',
    expectedCents: 40_000, lowCents: 35_000, highCents: holdCents, holdCents, offBearer: 'landowner-provides', createdAt: at, updatedAt: at,
  });
  const outing = await Outing.create({ sawyerId: sawyer.id, kind: 'booking', createdAt: at });
  const booking = await Booking.create({
    listingId: listing.id, bidId: bid.id, landownerId: landowner.id, sawyerId: sawyer.id, outingId: outing.id, status: 'agreed', timeZone: 'America/Chicago',
    startsAt, payBy: new Date(at.getTime() + 5 * 86_400_000), createdAt: at, updatedAt: at,
  });
  await booking.reload();
  const day = options.day ?? new Date(Date.UTC(2027, 0, booking.number - 5000)).toISOString().slice(0, 10);
  await BookedDay.create({ sawyerId: sawyer.id, day, outingId: outing.id, bookingId: booking.id });
  await WorkAgreement.create({ bookingId: booking.id, textVersion: 'test', terms: { terms: OAK_TERMS, feeBasisPoints: 500 }, sha256: 'x', frozenAt: at });
  await HeldPayment.create({ bookingId: booking.id, dueCents: holdCents, transferGroup: `booking-${booking.number}`, createdAt: at, updatedAt: at });
  return booking;
}

/** Gives a sawyer a payout account; `ready: false` leaves the onboarding undone. */
export async function makePayoutAccount(house: MoneyHouse, sawyer: Viewer, ready = true): Promise<string> {
  const account = await house.provider.accounts.create({ type: 'express', capabilities: { transfers: { requested: true } } });
  if (ready) house.fake.control.onboard(account.id);
  await SawyerProfile.upsert({ accountId: sawyer.id, payoutAccount: account.id, payoutsReady: ready, updatedAt: new Date() });
  return account.id;
}

/** Saws and signs a held booking at a cost: what the tally's own commands do, as far as money sees it. */
export async function sawAndSign(booking: Booking, costCents: number, signedBy: 'landowner' | 'deadline' = 'landowner'): Promise<SettleOutcome> {
  const at = new Date();
  const heldCents = await heldFor(booking.id);
  // A job whose minimum is the cost: the fee rule and the split stay the domain's own.
  const settlement = settle(termsWith({ minimum: { cents: costCents, covers: 'whole-job' } }), NO_WORK, { heldCents, feeBasisPoints: 500 });
  await inTransaction(async () => {
    const row = await Booking.findByPk(booking.id, { lock: true, rejectOnEmpty: true });
    for (const move of ['startSawing', 'offerTally', 'sign'] as const) await transition(bookingStates, move, row, system('test'), at);
    await Tally.create({ bookingId: booking.id, createdAt: at, offeredAt: at, signedAt: at, signedBy, settlement });
  });
  return settleBooking(system('test'), booking.id, at);
}

/** The identities that must hold whatever happened: the ledger against itself, each booking, and the provider's own books. */
export async function checkBooks(house: MoneyHouse, bookingIds?: readonly string[]): Promise<string[]> {
  const faults: string[] = [];
  const all = await balances();
  const sum = Object.values(all).reduce((total, cents) => total + cents, 0);
  if (sum !== 0) faults.push(`the ledger sums to ${sum}`);
  const theirs = house.fake.control.books();
  if (all['provider balance'] !== theirs.platform.net) faults.push(`provider balance: ours ${all['provider balance']}, theirs ${theirs.platform.net}`);
  for (const booking of await Booking.findAll(bookingIds ? { where: { id: [...bookingIds] } } : {})) {
    const ours = await balances(booking.id);
    const group = theirs.groups[`booking-${booking.number}`] ?? { charged: 0, transferred: 0, refunded: 0, disputedAway: 0, reversed: 0, fees: 0 };
    const owed = -(ours['landowner held'] + ours['sawyer payable'] + ours['refund payable']);
    const fee = -ours['platform fee'];
    const apart = ours['dispute loss'] + ours['sawyer receivable'];
    if (group.charged !== group.transferred - group.reversed + group.refunded + fee + owed + (group.disputedAway - apart)) {
      faults.push(`booking ${booking.number}: charged ${group.charged}, transferred ${group.transferred}, reversed ${group.reversed}, refunded ${group.refunded}, fee ${fee}, owed or held ${owed}, disputed ${group.disputedAway}, ${apart}`);
    }
    for (const account of ['dispute loss', 'sawyer receivable'] as const) if (ours[account] < 0) faults.push(`booking ${booking.number}: ${account} is ${ours[account]}`);
    if (owed < 0 || fee < 0) faults.push(`booking ${booking.number}: owes ${owed}, fee ${fee}`);
  }
  return faults;
}
