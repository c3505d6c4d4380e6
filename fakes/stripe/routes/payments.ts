import { cardOfMethod } from '../cards.ts';
import { LEAST_CHARGE } from '../checkout.ts';
import { answerDispute, closeDispute } from '../disputes.ts';
import { invalid, missing, noSuch } from '../errors.ts';
import type { Params } from '../params.ts';
import { cancelIntent, chargeOf, openIntent, payIntent } from '../payments.ts';
import { find, page } from '../reading.ts';
import { refundCharge } from '../refunds.ts';
import { idAt, type Route } from '../route.ts';
import { idOf, type World } from '../world.ts';

/** Charges the ready-made payment method named in `payment_method` (`pm_card_visa` and its kin). */
function confirm(world: World, intent: string, params: Params): unknown {
  const method = params.need('payment_method');
  params.text('return_url');
  const card = cardOfMethod(method);
  if (card === undefined) throw noSuch('PaymentMethod', method, 'payment_method', 400);
  params.finish();
  return payIntent(world, intent, card, { name: null, email: null, postalCode: null });
}

export const PAYMENT_ROUTES: readonly Route[] = [
  {
    method: 'POST',
    path: '/v1/payment_intents',
    run: ({ world, params }) => {
      const amount = params.amount('amount');
      if (amount === undefined) throw missing('amount');
      params.currency();
      if (amount < LEAST_CHARGE) throw invalid('Amount must be at least $0.50 usd', 'amount_too_small', 'amount');
      params.texts('payment_method_types');
      const automatic = params.nested('automatic_payment_methods');
      automatic?.flag('enabled');
      automatic?.oneOf('allow_redirects', ['always', 'never']);
      params.oneOf('capture_method', ['automatic', 'automatic_async']);
      const confirmed = params.flag('confirm') === true;
      const terms = {
        amount,
        description: params.text('description') ?? null,
        metadata: params.metadata(),
        transferGroup: params.text('transfer_group') ?? null,
        statementSuffix: params.text('statement_descriptor_suffix', 22) ?? null,
        receiptEmail: params.text('receipt_email') ?? null,
      };
      const intent = openIntent(world, terms);
      return confirmed ? confirm(world, intent.id, params) : intent;
    },
  },
  { method: 'GET', path: '/v1/payment_intents', run: ({ world, params }) => page(world, world.store.all('payment_intent'), '/v1/payment_intents', params) },
  { method: 'GET', path: '/v1/payment_intents/*', run: (call) => find(call.world, 'payment_intent', idAt(call)) },
  {
    method: 'POST',
    path: '/v1/payment_intents/*',
    run: (call) => {
      const intent = find(call.world, 'payment_intent', idAt(call));
      const after = { ...intent, metadata: call.params.metadata(intent.metadata), description: call.params.text('description') ?? intent.description };
      call.world.store.put('payment_intent', after.id, after);
      return after;
    },
  },
  { method: 'POST', path: '/v1/payment_intents/*/confirm', run: (call) => confirm(call.world, find(call.world, 'payment_intent', idAt(call)).id, call.params) },
  {
    method: 'POST',
    path: '/v1/payment_intents/*/cancel',
    run: (call) => cancelIntent(call.world, find(call.world, 'payment_intent', idAt(call)), call.params.oneOf('cancellation_reason', ['abandoned', 'duplicate', 'fraudulent', 'requested_by_customer']) ?? null),
  },
  {
    method: 'GET',
    path: '/v1/charges',
    run: ({ world, params, owner }) => {
      const group = params.text('transfer_group');
      const intent = params.text('payment_intent');
      const wanted = world.store.all('charge', owner).filter((each) => (group === undefined || each.transfer_group === group) && (intent === undefined || each.payment_intent === intent));
      return page(world, wanted, '/v1/charges', params);
    },
  },
  { method: 'GET', path: '/v1/charges/*', run: (call) => find(call.world, 'charge', idAt(call), call.owner) },
  {
    method: 'POST',
    path: '/v1/refunds',
    run: ({ world, params }) => {
      const chargeId = params.text('charge');
      const paymentIntent = params.text('payment_intent');
      if (chargeId === undefined && paymentIntent === undefined) throw invalid('One of the following params should be provided for this request: payment_intent or charge.');
      if (paymentIntent !== undefined) find(world, 'payment_intent', paymentIntent, '', 'payment_intent', 400);
      if (chargeId !== undefined) find(world, 'charge', chargeId, '', 'charge', 400);
      const charge = chargeOf(world, { charge: chargeId, paymentIntent });
      if (charge === undefined) throw invalid('This PaymentIntent does not have a successful charge to refund.');
      if (params.flag('reverse_transfer') === true || params.flag('refund_application_fee') === true) throw invalid('Cannot reverse a transfer: the charge was not created with a destination.');
      const amount = params.amount('amount');
      const reason = params.oneOf('reason', ['duplicate', 'fraudulent', 'requested_by_customer']) ?? null;
      return refundCharge(world, charge, { amount, reason, metadata: params.metadata() });
    },
  },
  {
    method: 'GET',
    path: '/v1/refunds',
    run: ({ world, params }) => {
      const charge = params.text('charge');
      const intent = params.text('payment_intent');
      const wanted = world.store.all('refund').filter((each) => (charge === undefined || each.charge === charge) && (intent === undefined || each.payment_intent === intent));
      return page(world, wanted, '/v1/refunds', params);
    },
  },
  { method: 'GET', path: '/v1/refunds/*', run: (call) => find(call.world, 'refund', idAt(call)) },
  {
    method: 'GET',
    path: '/v1/disputes',
    run: ({ world, params }) => {
      const charge = params.text('charge');
      const intent = params.text('payment_intent');
      const wanted = world.store.all('dispute').filter((each) => (charge === undefined || idOf(each.charge) === charge) && (intent === undefined || idOf(each.payment_intent) === intent));
      return page(world, wanted, '/v1/disputes', params);
    },
  },
  { method: 'GET', path: '/v1/disputes/*', run: (call) => find(call.world, 'dispute', idAt(call)) },
  {
    method: 'POST',
    path: '/v1/disputes/*',
    run: (call) => {
      const dispute = find(call.world, 'dispute', idAt(call));
      const given = call.params.nested('evidence');
      const evidence: Record<string, string> = {};
      for (const name of given?.keys() ?? []) {
        if (!(name in dispute.evidence)) throw invalid(`Received unknown parameter: evidence[${name}]`, 'parameter_unknown', `evidence[${name}]`);
        evidence[name] = given?.text(name, 20_000) ?? '';
      }
      return answerDispute(call.world, dispute, evidence, call.params.flag('submit') ?? Object.keys(evidence).length > 0, call.params.metadata(dispute.metadata));
    },
  },
  { method: 'POST', path: '/v1/disputes/*/close', run: (call) => closeDispute(call.world, find(call.world, 'dispute', idAt(call)), 'lost') },
];
