import { formatCents, FOUR_EYES_CENTS, type Cents } from '~/domain/money.ts';
import { paths } from '~/domain/paths.ts';
import { allocate } from '~/domain/trade/allocation.ts';
import { adjustmentAsked } from '~/emails/money-letters.ts';
import { authorize } from '../authorize.ts';
import { lockBookingMoney } from '../booking-money.ts';
import { chargesLeft } from '../charges-left.ts';
import { inTransaction } from '../db.ts';
import { conflict, forbidden, invalid, notFound } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { balances, post } from '../ledger.ts';
import { Account, Adjustment, Booking, ProviderCall, Reconciliation, type AdjustmentKind, type HeldPayment } from '../models/index.ts';
import { linkTo } from '../parties.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import { queueProviderCalls } from './queue-provider-call.ts';

export interface AdjustmentWanted {
  readonly kind: AdjustmentKind;
  /** The booking's number; for a difference, the one it names, if it names one. */
  readonly booking: number | null;
  /** Not asked for `forgive` and `enter-difference`: there it is the whole. */
  readonly amountCents: Cents | null;
  readonly object?: string | null;
  readonly against?: Adjustment['against'];
  readonly reason: string;
}

const tooMuch = (most: Cents, what: string): Error => (most <= 0 ? conflict(`There is ${what}.`) : invalid([{ path: 'amount', message: `At most ${formatCents(most)}.` }]));

/** How much of this kind there is to adjust on a booking, which is locked. */
async function mostOf(kind: AdjustmentKind, bookingId: string): Promise<{ readonly cents: Cents; readonly nothing: string }> {
  const { payment } = await lockBookingMoney(bookingId);
  const now = await balances(bookingId);
  const held = -now['landowner held'];
  const left = payment ? (await chargesLeft(payment.id)).reduce((sum, { leftCents }) => sum + Math.max(0, leftCents), 0) : 0;
  if (kind === 'forgive') return { cents: now['sawyer receivable'], nothing: 'nothing owed by the sawyer' };
  if (kind === 'hold-to-landowner') return { cents: payment?.status === 'held' && payment.disputedAt === null ? Math.min(held, left) - 1 : 0, nothing: 'nothing held that could go back in part; a whole hold goes back by cancelling' };
  return { cents: held > 0 ? 0 : Math.min(-now['platform fee'], left), nothing: 'no fee kept from this booking that could be given back' };
}

/** The whole of what a difference comes to, and its booking. @throws Refusal `conflict` when the newest comparison has no such difference */
async function differenceOf(object: string | null | undefined): Promise<{ cents: Cents; booking: number | null }> {
  const newest = await Reconciliation.findOne({ where: {}, order: [['beganAt', 'DESC']] });
  const found = newest?.differences.find((one) => one.object === object);
  const cents = (found?.theirsCents ?? 0) - (found?.oursCents ?? 0);
  if (!found || cents === 0 || found.theirsCents === 0) throw conflict('The newest comparison has no such difference that could be entered.');
  return { cents, booking: found.booking ?? null };
}

/**
 * A moderator sets money right by hand, with a written reason. Up to $500 it is done at once; above, a second moderator approves it.
 * @returns what came of it
 */
export async function askAdjustment(by: Viewer, wanted: AdjustmentWanted, at: Date): Promise<'done' | 'asked'> {
  authorize(by, 'desk', 'adjustMoney', baseRoles(by));
  return inTransaction(async () => {
    const difference = wanted.kind === 'enter-difference' ? await differenceOf(wanted.object) : null;
    const number = difference ? difference.booking : wanted.booking;
    const booking = number === null ? null : await Booking.findOne({ where: { number } });
    if (!difference && !booking) throw notFound('booking');
    const most = difference || !booking ? null : await mostOf(wanted.kind, booking.id);
    const amountCents = difference?.cents ?? (wanted.kind === 'forgive' ? (most?.cents ?? 0) : (wanted.amountCents ?? 0));
    if (most && (amountCents <= 0 || amountCents > most.cents)) throw tooMuch(most.cents, most.nothing);
    const asked = await Adjustment.create({
      kind: wanted.kind, bookingId: booking?.id ?? null, object: difference ? (wanted.object ?? null) : null, against: difference ? (wanted.against ?? 'platform fee') : null, amountCents, reason: wanted.reason, askedBy: by.id, askedAt: at,
    });
    await record(by, 'askAdjustment', 'adjustment', asked.id, at, { data: { kind: asked.kind, amountCents, booking: number, reason: asked.reason } });
    if (Math.abs(amountCents) > FOUR_EYES_CENTS) {
      await tellModerators(by, asked);
      return 'asked';
    }
    await carryOut(by, asked, at);
    return 'done';
  });
}

async function tellModerators(by: Viewer, asked: Adjustment): Promise<void> {
  for (const moderator of await Account.findAll({ where: { isModerator: true, status: 'active' } })) {
    if (moderator.id !== by.id) await enqueue('send-mail', adjustmentAsked(moderator, by.name, asked.amountCents, asked.reason, linkTo(paths.deskMoney)));
  }
}

async function lockAsked(id: string): Promise<Adjustment> {
  const found = /^[0-9a-f-]{36}$/.test(id) ? await Adjustment.findByPk(id, { lock: true }) : null;
  if (!found) throw notFound('adjustment');
  if (found.status !== 'asked') throw conflict('This adjustment has been decided already.');
  return found;
}

/** A second moderator approves what another asked for, and it is done. */
export async function approveAdjustment(by: Viewer, id: string, at: Date): Promise<void> {
  authorize(by, 'desk', 'adjustMoney', baseRoles(by));
  await inTransaction(async () => {
    const asked = await lockAsked(id);
    if (asked.askedBy === by.id) throw forbidden('A second moderator approves what you asked for.');
    if (asked.bookingId !== null && asked.kind !== 'enter-difference') {
      const most = await mostOf(asked.kind, asked.bookingId);
      if (asked.amountCents > most.cents) throw conflict(`Things have moved on since it was asked for: there is now ${most.cents > 0 ? `only ${formatCents(most.cents)}` : most.nothing}. Refuse it and ask anew.`);
    }
    await carryOut(by, asked, at);
  });
}

/** Any moderator refuses it; the one who asked takes it back. Nothing moves. */
export async function refuseAdjustment(by: Viewer, id: string, at: Date): Promise<void> {
  authorize(by, 'desk', 'adjustMoney', baseRoles(by));
  await inTransaction(async () => {
    const asked = await lockAsked(id);
    await asked.update({ status: 'refused', decidedBy: by.id, decidedAt: at });
    await record(by, 'refuseAdjustment', 'adjustment', asked.id, at);
  });
}

async function carryOut(by: Viewer, asked: Adjustment, at: Date): Promise<void> {
  await asked.update({ status: 'done', decidedBy: by.id, decidedAt: at });
  await record(by, 'adjustMoney', 'adjustment', asked.id, at, { data: { kind: asked.kind, amountCents: asked.amountCents } });
  const cents = asked.amountCents;
  const group = { at, bookingId: asked.bookingId, actorId: by.id, note: asked.reason };
  if (asked.kind === 'enter-difference') {
    const news = await post({ ...group, cause: 'adjustment', causeId: asked.object ?? asked.id, sides: [{ account: 'provider balance', amountCents: cents }, { account: asked.against ?? 'platform fee', amountCents: -cents }] });
    if (!news) throw conflict('This difference has been entered already.');
    return;
  }
  const { payment } = await lockBookingMoney(asked.bookingId ?? '');
  if (!payment) throw conflict('This booking has no payment.');
  if (asked.kind === 'forgive') return forgive(payment, cents, { ...group, causeId: asked.id });
  const toSawyer = asked.kind === 'fee-to-sawyer';
  await post({
    ...group, cause: 'adjustment', causeId: asked.id,
    sides: [
      { account: asked.kind === 'hold-to-landowner' ? 'landowner held' : 'platform fee', amountCents: cents },
      { account: toSawyer ? 'sawyer payable' : 'refund payable', amountCents: -cents },
    ],
  });
  const { transfers, refunds } = allocate(await chargesLeft(payment.id), toSawyer ? cents : 0, toSawyer ? 0 : cents);
  await queueProviderCalls('transfer', payment, transfers, at);
  await queueProviderCalls('refund', payment, refunds, at);
}

/** What a sawyer owes after a lost dispute becomes our loss, and is not taken back any more. */
async function forgive(payment: HeldPayment, cents: Cents, group: { at: Date; causeId: string; bookingId: string | null; actorId: string; note: string }): Promise<void> {
  const taking = await ProviderCall.findAll({ where: { paymentId: payment.id, kind: 'reversal', status: ['waiting', 'failed', 'stuck'] }, lock: true });
  if (taking.some(({ status }) => status !== 'stuck')) throw conflict('It is still being taken back from the sawyer’s balance. Forgive it when that is stuck.');
  for (const call of taking) await call.update({ status: 'dropped', doneAt: group.at });
  await post({ ...group, cause: 'adjustment', sides: [{ account: 'dispute loss', amountCents: cents }, { account: 'sawyer receivable', amountCents: -cents }] });
}
