import type Stripe from 'stripe';
import { balanceOf } from '../balance.ts';
import { invalid, missing } from '../errors.ts';
import { makePayout } from '../payouts.ts';
import { find, page } from '../reading.ts';
import { idAt, type Route } from '../route.ts';
import { makeTransfer, reverseTransfer } from '../transfers.ts';
import { idOf, type World } from '../world.ts';

/** The platform's own payouts. They are manual from the start: automatic ones would drain money held for others. */
function balanceSettings(world: World): Stripe.BalanceSettings {
  return {
    object: 'balance_settings',
    payments: {
      debit_negative_balances: false,
      payouts: {
        automatic_transfer_rules_by_currency: null,
        minimum_balance_by_currency: null,
        schedule: { interval: world.store.get('note', 'platform payouts')?.value ?? 'manual' },
        statement_descriptor: null,
        status: 'enabled',
      },
      settlement_timing: { delay_days: 2, start_of_day: null },
    },
  };
}

export const MONEY_ROUTES: readonly Route[] = [
  { method: 'GET', path: '/v1/balance', run: ({ world, owner }) => balanceOf(world, owner) },
  { method: 'GET', path: '/v1/balance_settings', run: ({ world }) => balanceSettings(world) },
  {
    method: 'POST',
    path: '/v1/balance_settings',
    run: ({ world, params }) => {
      const interval = params.nested('payments')?.nested('payouts')?.nested('schedule')?.oneOf('interval', ['manual', 'daily', 'weekly', 'monthly']);
      if (interval !== undefined) world.setNote('platform payouts', interval);
      return balanceSettings(world);
    },
  },
  {
    method: 'GET',
    path: '/v1/balance_transactions',
    run: ({ world, params, owner }) => {
      const source = params.text('source');
      const type = params.text('type');
      const currency = params.text('currency');
      const wanted = world.store
        .all('balance_transaction', owner)
        .filter((each) => (source === undefined || each.source === source) && (type === undefined || each.type === type) && (currency === undefined || each.currency === currency));
      return page(world, wanted, '/v1/balance_transactions', params);
    },
  },
  { method: 'GET', path: '/v1/balance_transactions/*', run: (call) => find(call.world, 'balance_transaction', idAt(call), call.owner) },
  {
    method: 'POST',
    path: '/v1/transfers',
    run: ({ world, params }) => {
      params.currency();
      const source = params.text('source_transaction');
      params.oneOf('source_type', ['bank_account', 'card']);
      return makeTransfer(world, {
        amount: params.amount('amount'),
        destination: params.need('destination'),
        description: params.text('description') ?? null,
        metadata: params.metadata(),
        sourceTransaction: source,
        transferGroup: params.text('transfer_group'),
      });
    },
  },
  {
    method: 'GET',
    path: '/v1/transfers',
    run: ({ world, params }) => {
      const group = params.text('transfer_group');
      const destination = params.text('destination');
      const wanted = world.store.all('transfer').filter((each) => (group === undefined || each.transfer_group === group) && (destination === undefined || idOf(each.destination) === destination));
      return page(world, wanted, '/v1/transfers', params);
    },
  },
  { method: 'GET', path: '/v1/transfers/*', run: (call) => find(call.world, 'transfer', idAt(call)) },
  {
    method: 'POST',
    path: '/v1/transfers/*',
    run: (call) => {
      const transfer = find(call.world, 'transfer', idAt(call));
      const after = { ...transfer, metadata: call.params.metadata(transfer.metadata), description: call.params.text('description') ?? transfer.description };
      call.world.store.put('transfer', after.id, after);
      call.world.emit('transfer.updated', after, { metadata: transfer.metadata });
      return after;
    },
  },
  {
    method: 'POST',
    path: '/v1/transfers/*/reversals',
    run: (call) => {
      const transfer = find(call.world, 'transfer', idAt(call));
      call.params.text('description');
      if (call.params.flag('refund_application_fee') === true) throw invalid('The transfer has no application fee.');
      return reverseTransfer(call.world, transfer, call.params.amount('amount'), call.params.metadata());
    },
  },
  {
    method: 'GET',
    path: '/v1/transfers/*/reversals',
    run: (call) => {
      const transfer = find(call.world, 'transfer', idAt(call));
      return page(call.world, call.world.store.all('transfer_reversal').filter((each) => idOf(each.transfer) === transfer.id), `/v1/transfers/${transfer.id}/reversals`, call.params);
    },
  },
  { method: 'GET', path: '/v1/transfers/*/reversals/*', run: (call) => find(call.world, 'transfer_reversal', idAt(call, 1)) },
  {
    method: 'POST',
    path: '/v1/payouts',
    run: ({ world, params, owner }) => {
      const amount = params.amount('amount');
      if (amount === undefined) throw missing('amount');
      params.currency();
      params.oneOf('method', ['standard']);
      return makePayout(world, owner, { amount, automatic: false, description: params.text('description') ?? null, metadata: params.metadata() });
    },
  },
  {
    method: 'GET',
    path: '/v1/payouts',
    run: ({ world, params, owner }) => {
      const status = params.text('status');
      return page(world, world.store.all('payout', owner).filter((each) => status === undefined || each.status === status), '/v1/payouts', params);
    },
  },
  { method: 'GET', path: '/v1/payouts/*', run: (call) => find(call.world, 'payout', idAt(call), call.owner) },
];
