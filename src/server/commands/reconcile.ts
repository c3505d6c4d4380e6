import { Op } from 'sequelize';
import { inTransaction, rows } from '../db.ts';
import { log } from '../log.ts';
import { balances, post } from '../ledger.ts';
import { CardDispute, ProviderCall, Reconciliation, type Finding } from '../models/index.ts';
import { callNamedBy, checkoutOfCharge, findReversal, movementsSince, providerBalance, readDispute, readRefund, type Movement } from '../services/card-payments.ts';
import { checkOpenCheckouts } from './check-checkouts.ts';
import { finishProviderCall } from './finish-provider-call.ts';
import { noteDispute } from './note-dispute.ts';
import { receiveCheckout } from './receive-checkout.ts';

/** Movements of this many days before the last comparison are looked at again. */
const OVERLAP_DAYS = 3;

interface Entered {
  readonly cents: number;
  readonly booking: number | null;
}

/** What our ledger has entered on the provider's balance for each of the provider's objects. Leans on ledger_group_of_cause. */
async function entered(sourceIds: readonly string[]): Promise<(sourceId: string) => Entered> {
  const found = await rows<Entered & { readonly sourceId: string }>(
    `SELECT grp.cause_id AS "sourceId", sum(entry.amount_cents)::int AS cents, min(booking.number) AS booking
     FROM ledger_entry entry JOIN ledger_group grp ON grp.id = entry.group_id LEFT JOIN booking ON booking.id = grp.booking_id
     WHERE grp.cause_id = ANY($1::text[]) AND entry.account = 'provider balance' GROUP BY grp.cause_id`,
    [sourceIds],
  );
  const bySource = new Map(found.map((each) => [each.sourceId, each]));
  return (sourceId) => bySource.get(sourceId) ?? { cents: 0, booking: null };
}

async function finishCall(kind: 'refund' | 'transfer', id: string, at: Date): Promise<void> {
  const callId = (await ProviderCall.findOne({ where: { providerId: id } }))?.id ?? (await callNamedBy(kind, id));
  if (!callId || !(await ProviderCall.findByPk(callId))) return;
  await finishProviderCall(callId, kind === 'refund' ? await readRefund(id) : { providerId: id, status: 'moved' }, at);
}

/** A reversal's own id does not say which transfer it belongs to, so every one that is not entered yet is asked about. */
async function finishReversals(at: Date): Promise<void> {
  for (const call of await ProviderCall.findAll({ where: { kind: 'reversal', status: { [Op.ne]: 'done' } } })) {
    const transfer = call.reverses === null ? null : await ProviderCall.findByPk(call.reverses);
    const made = transfer?.providerId ? await findReversal(transfer.providerId, call.id) : null;
    if (made) await finishProviderCall(call.id, made, at);
  }
}

/**
 * Our own payout of earned fees, money of our own paid in (both against what we have earned), or a fee that the provider took: nobody
 * decides these in the application, so they are only entered.
 */
async function enterOwn(movement: Movement, account: 'platform fee' | 'provider fee', at: Date): Promise<void> {
  await inTransaction(async () => {
    await post({
      at, cause: movement.type, causeId: movement.sourceId, bookingId: null,
      sides: [{ account: 'provider balance', amountCents: movement.netCents }, { account, amountCents: -movement.netCents }],
    });
  });
}

/** Looks up what a message that never came would have told. */
async function repair(movement: Movement, at: Date): Promise<void> {
  if (movement.type === 'charge' || movement.type === 'payment') {
    const seen = await checkoutOfCharge(movement.sourceId);
    if (seen) await receiveCheckout(seen, at);
  } else if (movement.type === 'refund' || movement.type === 'refund_failure') await finishCall('refund', movement.sourceId, at);
  else if (movement.type === 'transfer') await finishCall('transfer', movement.sourceId, at);
  else if (movement.type === 'transfer_refund') await finishReversals(at);
  else if (movement.type === 'adjustment' && movement.category.startsWith('dispute')) await noteDispute(await readDispute(movement.sourceId), at);
  else if (movement.type === 'payout' || movement.type === 'payout_failure' || movement.type === 'topup') await enterOwn(movement, 'platform fee', at);
  else if (movement.type === 'stripe_fee') await enterOwn(movement, 'provider fee', at);
}

const wordsOf = (movement: Movement): string => `${movement.type}${movement.category === movement.type ? '' : ` (${movement.category})`}`;

async function compare(movements: readonly Movement[], at: Date): Promise<{ repaired: Finding[]; differences: Finding[] }> {
  const repaired: Finding[] = [];
  const differences: Finding[] = [];
  const bySource = new Map<string, Movement[]>();
  for (const movement of movements) bySource.set(movement.sourceId, [...(bySource.get(movement.sourceId) ?? []), movement]);
  const before = await entered([...bySource.keys()]);
  for (const [sourceId, group] of bySource) {
    const theirsCents = group.reduce((sum, { netCents }) => sum + netCents, 0);
    if (before(sourceId).cents === theirsCents) continue;
    for (const movement of group) await repair(movement, at);
    const after = (await entered([sourceId]))(sourceId);
    const finding: Finding = { what: group.map(wordsOf).join(', '), object: sourceId, oursCents: after.cents, theirsCents, ...(after.booking === null ? {} : { booking: after.booking }) };
    (after.cents === theirsCents ? repaired : differences).push(finding);
  }
  return { repaired, differences };
}

/** What our ledger has of the provider's objects in the window that the provider does not list. */
async function unknownToProvider(movements: readonly Movement[], since: Date, until: Date): Promise<Finding[]> {
  const known = new Set(movements.map(({ sourceId }) => sourceId));
  const ours = await rows<{ object: string; what: string; cents: number; booking: number | null }>(
    `SELECT grp.cause_id AS object, grp.cause AS what, sum(entry.amount_cents)::int AS cents, min(booking.number) AS booking
     FROM ledger_group grp JOIN ledger_entry entry ON entry.group_id = grp.id AND entry.account = 'provider balance' LEFT JOIN booking ON booking.id = grp.booking_id
     WHERE grp.at BETWEEN $1 AND $2 GROUP BY grp.id, grp.cause_id, grp.cause`,
    [since, until],
  );
  return ours.filter(({ object }) => !known.has(object)).map(({ object, what, cents, booking }) => ({ what: `${what}: not in the provider's books`, object, oursCents: cents, theirsCents: 0, ...(booking === null ? {} : { booking }) }));
}

/**
 * Compares the ledger with the provider's own books, movement by movement and in all; takes in what is only a missed message, and keeps
 * every other difference with its booking. Nightly and on demand; may run as often as one likes.
 */
export async function reconcile(at: Date): Promise<Reconciliation> {
  const last = await Reconciliation.findOne({ where: { finishedAt: { [Op.ne]: null } }, order: [['beganAt', 'DESC']] });
  const since = last ? new Date(last.beganAt.getTime() - OVERLAP_DAYS * 86_400_000) : new Date(0);
  const run = await Reconciliation.create({ beganAt: at });
  await checkOpenCheckouts(at, new Date(at.getTime() + 1));
  for (const dispute of await CardDispute.findAll({ where: { status: 'open' } })) await noteDispute(await readDispute(dispute.id), at);
  const movements = await movementsSince(since);
  const { repaired, differences } = await compare(movements, at);
  // A group may be entered some time after the provider's own line: only the inside of the window is compared this way.
  const inside = last ? new Date(since.getTime() + 86_400_000) : since;
  differences.push(...(await unknownToProvider(movements, inside, at)));
  const ledgerCents = (await balances())['provider balance'];
  const providerCents = await providerBalance();
  await run.update({ finishedAt: at, ledgerCents, providerCents, repaired, differences });
  const level = differences.length > 0 || ledgerCents !== providerCents ? 'warn' : 'info';
  log()[level]({ repaired: repaired.length, differences: differences.length, ledgerCents, providerCents }, 'reconciled with the payment provider');
  return run;
}

