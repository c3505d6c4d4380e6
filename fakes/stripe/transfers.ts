import type Stripe from 'stripe';
import { move, totals } from './balance.ts';
import { invalid, noSuch } from './errors.ts';
import { draftCharge } from './payments.ts';
import { idOf, type World } from './world.ts';

export interface TransferTerms {
  readonly amount: number | undefined;
  readonly destination: string;
  readonly description: string | null;
  readonly metadata: Stripe.Metadata;
  readonly sourceTransaction: string | undefined;
  readonly transferGroup: string | undefined;
}

const tooLow = (): Error =>
  invalid(
    'You have insufficient available funds in your Stripe account. Try adding funds directly to your available balance by creating Charges using the 4000000000000077 test card.',
    'balance_insufficient',
  );

/** What transfers from one charge have taken so far, less what came back. */
const takenFrom = (world: World, charge: string): number =>
  world.store.all('transfer').filter((transfer) => idOf(transfer.source_transaction) === charge).reduce((sum, transfer) => sum + transfer.amount - transfer.amount_reversed, 0);

function sourceOf(world: World, id: string, amount: number | undefined): Stripe.Charge {
  const charge = world.store.get('charge', id);
  if (charge === undefined || world.store.ownerOf('charge', id) !== '') throw noSuch('charge', id, 'source_transaction', 400);
  if (charge.status !== 'succeeded') throw invalid('The source charge has not succeeded.', 'transfer_source_balance_parameters_mismatch', 'source_transaction');
  if ((amount ?? charge.amount) + takenFrom(world, id) > charge.amount) {
    throw invalid('Cannot create transfers: the sum of all transfers cannot be greater than the amount of the source charge.', undefined, 'amount');
  }
  return charge;
}

/**
 * Moves money from the platform to a connected account. With a source charge it may be made before the charge's money
 * is available, and becomes available with it; without one it needs the available balance.
 */
export function makeTransfer(world: World, terms: TransferTerms): Stripe.Transfer {
  const account = world.store.get('account', terms.destination);
  if (account === undefined) throw noSuch('destination', terms.destination, 'destination', 400);
  if (account.capabilities?.transfers !== 'active') {
    throw invalid('Your destination account needs to have at least one of the following capabilities enabled: transfers, crypto_transfers, legacy_payments', 'insufficient_capabilities_for_transfer');
  }
  const source = terms.sourceTransaction === undefined ? null : sourceOf(world, terms.sourceTransaction, terms.amount);
  const amount = terms.amount ?? source?.amount;
  if (amount === undefined) throw invalid('Missing required param: amount.', 'parameter_missing', 'amount');
  if (source?.transfer_group != null && terms.transferGroup !== undefined && terms.transferGroup !== source.transfer_group) {
    throw invalid('The transfer_group of the source_transaction is already set to another value.', undefined, 'transfer_group');
  }
  const balance = totals(world, '');
  if (source === null ? balance.available < amount : balance.available + balance.pending < amount) throw tooLow();

  const id = world.id('tr');
  const sourceMovement = source === null ? undefined : world.store.get('balance_transaction', idOf(source.balance_transaction) ?? '');
  const availableOn = Math.max(world.now(), sourceMovement?.available_on ?? 0);
  const out = move(world, '', { amount: -amount, type: 'transfer', category: 'transfer', source: id, description: terms.description, availableOn });
  const paymentId = world.id('py');
  const into = move(world, account.id, { amount, type: 'payment', category: 'charge', source: paymentId, description: terms.description, availableOn });
  const group = terms.transferGroup ?? source?.transfer_group ?? (source === null ? null : `group_${source.id}`);
  const payment: Stripe.Charge = {
    ...draftCharge(world, paymentId, amount),
    amount_captured: amount,
    balance_transaction: into.id,
    captured: true,
    paid: true,
    source_transfer: id,
    status: 'succeeded',
  };
  const made = {
    id,
    object: 'transfer',
    amount,
    amount_reversed: 0,
    balance_transaction: out.id,
    created: world.now(),
    currency: 'usd',
    description: terms.description,
    destination: account.id,
    destination_payment: paymentId,
    livemode: false,
    metadata: terms.metadata,
    reversals: { object: 'list', data: [], has_more: false, url: `/v1/transfers/${id}/reversals` },
    reversed: false,
    source_transaction: source?.id ?? null,
    source_type: 'card',
    transfer_group: group,
  } satisfies Stripe.Transfer;
  world.store.put('transfer', id, made);
  world.store.put('charge', paymentId, payment, account.id);
  if (source !== null && source.transfer_group === null) world.store.put('charge', source.id, { ...source, transfer_group: group });
  world.emit('transfer.created', made);
  return made;
}

/** Takes a transfer back, in whole or in part, as far as the connected account's balance reaches. */
export function reverseTransfer(world: World, transfer: Stripe.Transfer, asked: number | undefined, metadata: Stripe.Metadata): Stripe.TransferReversal {
  const left = transfer.amount - transfer.amount_reversed;
  if (left === 0) throw invalid(`Transfer ${transfer.id} has already been fully reversed.`);
  const amount = asked ?? left;
  if (amount > left) throw invalid(`Reversal amount ($${(amount / 100).toFixed(2)}) is greater than unreversed amount on transfer ($${(left / 100).toFixed(2)})`, undefined, 'amount');
  const destination = idOf(transfer.destination) ?? '';
  const theirs = totals(world, destination);
  if (theirs.available + theirs.pending < amount) throw tooLow();
  const payment = world.store.get('charge', idOf(transfer.destination_payment) ?? '');
  if (payment === undefined) throw new Error(`Transfer ${transfer.id} has no payment`);

  const id = world.id('trr');
  const back = move(world, '', { amount, type: 'transfer_refund', category: 'transfer_reversal', source: id, description: 'REFUND FOR TRANSFER' });
  const theirRefund = world.id('pyr');
  move(world, destination, { amount: -amount, type: 'payment_refund', category: 'refund', source: theirRefund, description: 'REFUND FOR PAYMENT' });
  const made = {
    id,
    object: 'transfer_reversal',
    amount,
    balance_transaction: back.id,
    created: world.now(),
    currency: 'usd',
    destination_payment_refund: theirRefund,
    metadata,
    source_refund: null,
    transfer: transfer.id,
  } satisfies Stripe.TransferReversal;
  const reversed = transfer.amount_reversed + amount;
  const after: Stripe.Transfer = {
    ...transfer,
    amount_reversed: reversed,
    reversed: reversed === transfer.amount,
    reversals: { ...transfer.reversals, data: [made, ...transfer.reversals.data] },
  };
  world.store.put('transfer_reversal', id, made);
  world.store.put('transfer', transfer.id, after);
  world.store.put('charge', payment.id, { ...payment, amount_refunded: reversed, refunded: after.reversed });
  world.emit('transfer.reversed', after, { amount_reversed: transfer.amount_reversed });
  return made;
}
