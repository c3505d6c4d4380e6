import type Stripe from 'stripe';
import { keepAccount, makeLink, openAccount, type CapabilityName } from '../accounts.ts';
import { invalid } from '../errors.ts';
import type { Params } from '../params.ts';
import { find, page } from '../reading.ts';
import { idAt, type Route } from '../route.ts';

const CAPABILITIES: readonly CapabilityName[] = ['card_payments', 'transfers'];

function asked(params: Params): CapabilityName[] {
  const branch = params.nested('capabilities');
  return branch === undefined ? [] : CAPABILITIES.filter((name) => branch.nested(name)?.flag('requested') === true);
}

/** Who carries fees, losses and paperwork, with the provider's defaults for a type of account. */
function controllerOf(params: Params, type: 'express' | 'custom' | 'standard' | undefined): Stripe.Account.Controller {
  const given = params.nested('controller');
  if (given !== undefined && type !== undefined) throw invalid('You may only specify one of these parameters: type, controller.');
  const custom = type === 'custom';
  return {
    type: 'application',
    is_controller: true,
    fees: { payer: given?.nested('fees')?.oneOf('payer', ['account', 'application']) ?? (type === 'express' ? 'application_express' : custom ? 'application_custom' : 'account') },
    losses: { payments: given?.nested('losses')?.oneOf('payments', ['application', 'stripe']) ?? (type === 'express' || custom ? 'application' : 'stripe') },
    requirement_collection: given?.oneOf('requirement_collection', ['application', 'stripe']) ?? (custom ? 'application' : 'stripe'),
    stripe_dashboard: { type: given?.nested('stripe_dashboard')?.oneOf('type', ['express', 'full', 'none']) ?? (type === 'express' ? 'express' : custom ? 'none' : 'full') },
  };
}

const interval = (params: Params): string | undefined => params.nested('settings')?.nested('payouts')?.nested('schedule')?.oneOf('interval', ['manual', 'daily', 'weekly', 'monthly']);

/** An address of ours a person may be sent to. */
function address(params: Params, name: string): string {
  const value = params.need(name);
  if (!/^https?:\/\/[^\s]+$/.test(value)) throw invalid('Not a valid URL', 'url_invalid', name);
  return value;
}

export const ACCOUNT_ROUTES: readonly Route[] = [
  {
    method: 'POST',
    path: '/v1/accounts',
    run: ({ world, params }) => {
      const type = params.oneOf('type', ['express', 'custom', 'standard']);
      const profile = params.nested('business_profile');
      const controller = controllerOf(params, type);
      for (const name of ['individual', 'company', 'tos_acceptance', 'external_account', 'documents']) {
        if (params.anything(name) !== undefined) throw invalid(`The stand-in takes ${name} on its onboarding page only.`, undefined, name);
      }
      return openAccount(world, {
        type: type ?? 'none',
        country: params.text('country', 2) ?? 'US',
        email: params.text('email') ?? null,
        businessType: params.oneOf('business_type', ['individual', 'company']) ?? null,
        businessName: profile?.text('name') ?? null,
        productDescription: profile?.text('product_description') ?? null,
        url: profile?.text('url') ?? null,
        metadata: params.metadata(),
        capabilities: asked(params),
        controller,
        interval: interval(params) ?? 'daily',
      });
    },
  },
  { method: 'GET', path: '/v1/accounts', run: ({ world, params }) => page(world, world.store.all('account'), '/v1/accounts', params) },
  { method: 'GET', path: '/v1/accounts/*', run: (call) => find(call.world, 'account', idAt(call)) },
  {
    method: 'POST',
    path: '/v1/accounts/*',
    run: (call) => {
      const before = find(call.world, 'account', idAt(call));
      const every = interval(call.params);
      const added = Object.fromEntries(asked(call.params).filter((name) => before.capabilities?.[name] === undefined).map((name) => [name, before.payouts_enabled ? 'active' : 'inactive']));
      const settings = before.settings;
      return keepAccount(call.world, before, {
        ...before,
        email: call.params.text('email') ?? before.email,
        metadata: call.params.metadata(before.metadata),
        capabilities: { ...before.capabilities, ...added },
        ...(every === undefined || settings == null ? {} : { settings: { ...settings, payouts: { debit_negative_balances: true, statement_descriptor: null, schedule: { delay_days: 2, interval: every } } } }),
      });
    },
  },
  {
    method: 'DELETE',
    path: '/v1/accounts/*',
    run: (call) => {
      const account = find(call.world, 'account', idAt(call));
      if (call.world.store.all('balance_transaction', account.id).reduce((sum, each) => sum + each.net, 0) !== 0) {
        throw invalid('You cannot delete this account because its balance is not zero.', 'account_invalid');
      }
      call.world.store.put('account', account.id, null);
      return { id: account.id, object: 'account', deleted: true };
    },
  },
  {
    method: 'POST',
    path: '/v1/account_links',
    run: ({ world, params }) => {
      const account = find(world, 'account', params.need('account'), '', 'account', 400);
      const type = params.oneOf('type', ['account_onboarding', 'account_update']);
      if (type === undefined) throw invalid('Missing required param: type.', 'parameter_missing', 'type');
      params.nested('collection_options')?.text('fields');
      params.text('collect');
      const link = makeLink(world, account.id, 'onboarding', address(params, 'return_url'), address(params, 'refresh_url'));
      return { object: 'account_link', created: world.now(), expires_at: link.expiresAt, url: `${world.options.baseUrl()}/setup/${link.token}` } satisfies Stripe.AccountLink;
    },
  },
  {
    method: 'POST',
    path: '/v1/accounts/*/login_links',
    run: (call) => {
      const account = find(call.world, 'account', idAt(call));
      if (account.controller?.stripe_dashboard?.type !== 'express') throw invalid('Cannot create a login link for an account without the Express Dashboard.');
      if (!account.details_submitted) throw invalid('Cannot create a login link for an account that has not completed onboarding.');
      const link = makeLink(call.world, account.id, 'dashboard', '', '');
      return { object: 'login_link', created: call.world.now(), url: `${call.world.options.baseUrl()}/setup/${link.token}` } satisfies Stripe.LoginLink;
    },
  },
];
