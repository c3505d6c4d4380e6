import { expireSession, linesOf, openSession, type LineTerms } from '../checkout.ts';
import { invalid, missing } from '../errors.ts';
import type { Params } from '../params.ts';
import { find, page } from '../reading.ts';
import { idAt, type Route } from '../route.ts';

function line(params: Params): LineTerms {
  const price = params.nested('price_data');
  if (price === undefined) throw missing(params.label('price_data'));
  price.currency();
  const product = price.nested('product_data');
  if (product === undefined) throw missing(price.label('product_data'));
  const unitAmount = price.amount('unit_amount');
  if (unitAmount === undefined) throw missing(price.label('unit_amount'));
  const quantity = params.integer('quantity');
  if (quantity === undefined || quantity < 1) throw invalid('Quantity is required. Add `quantity` to `line_items[0]`', 'parameter_missing', params.label('quantity'));
  return { name: product.need('name'), description: product.text('description') ?? null, unitAmount, quantity };
}

function url(params: Params, name: string): string | undefined {
  const value = params.text(name);
  if (value !== undefined && !/^https?:\/\/[^\s]+$/.test(value)) throw invalid('Not a valid URL', 'url_invalid', name);
  return value;
}

export const CHECKOUT_ROUTES: readonly Route[] = [
  {
    method: 'POST',
    path: '/v1/checkout/sessions',
    run: ({ world, params }) => {
      const mode = params.oneOf('mode', ['payment', 'setup', 'subscription']);
      if (mode === undefined) throw missing('mode');
      if (mode !== 'payment') throw invalid('The stand-in opens sessions in payment mode only.', undefined, 'mode');
      params.oneOf('ui_mode', ['hosted_page']);
      params.texts('payment_method_types');
      params.text('locale');
      const successUrl = url(params, 'success_url');
      if (successUrl === undefined) throw missing('success_url');
      const lines = params.members('line_items').map(line);
      if (lines.length === 0) throw missing('line_items');
      const intent = params.nested('payment_intent_data');
      intent?.oneOf('capture_method', ['automatic', 'automatic_async']);
      return openSession(world, {
        lines,
        successUrl,
        cancelUrl: url(params, 'cancel_url') ?? null,
        clientReferenceId: params.text('client_reference_id', 200) ?? null,
        customerEmail: params.text('customer_email', 800) ?? null,
        metadata: params.metadata(),
        expiresAt: params.integer('expires_at'),
        submitType: params.oneOf('submit_type', ['auto', 'book', 'donate', 'pay']) ?? null,
        intent: {
          description: intent?.text('description') ?? null,
          metadata: intent?.metadata() ?? {},
          transferGroup: intent?.text('transfer_group') ?? null,
          statementSuffix: intent?.text('statement_descriptor_suffix', 22) ?? null,
          receiptEmail: intent?.text('receipt_email') ?? null,
        },
      });
    },
  },
  {
    method: 'GET',
    path: '/v1/checkout/sessions',
    run: ({ world, params }) => {
      const intent = params.text('payment_intent');
      const status = params.text('status');
      const wanted = world.store.all('session').filter((each) => (intent === undefined || each.payment_intent === intent) && (status === undefined || each.status === status));
      return page(world, wanted, '/v1/checkout/sessions', params);
    },
  },
  { method: 'GET', path: '/v1/checkout/sessions/*', run: (call) => find(call.world, 'session', idAt(call)) },
  {
    method: 'POST',
    path: '/v1/checkout/sessions/*',
    run: (call) => {
      const session = find(call.world, 'session', idAt(call));
      const after = { ...session, metadata: call.params.metadata(session.metadata ?? {}) };
      call.world.store.put('session', after.id, after);
      return after;
    },
  },
  { method: 'POST', path: '/v1/checkout/sessions/*/expire', run: (call) => expireSession(call.world, find(call.world, 'session', idAt(call))) },
  {
    method: 'GET',
    path: '/v1/checkout/sessions/*/line_items',
    run: (call) => {
      const session = find(call.world, 'session', idAt(call));
      call.params.integer('limit');
      return linesOf(call.world, session.id);
    },
  },
];
