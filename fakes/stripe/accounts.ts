import type Stripe from 'stripe';
import { invalid } from './errors.ts';
import type { KeptLink } from './store.ts';
import type { World } from './world.ts';

export type CapabilityName = 'card_payments' | 'transfers';

export interface AccountTerms {
  readonly type: 'express' | 'custom' | 'standard' | 'none';
  readonly country: string;
  readonly email: string | null;
  readonly businessType: 'company' | 'individual' | null;
  readonly businessName: string | null;
  readonly productDescription: string | null;
  readonly url: string | null;
  readonly metadata: Stripe.Metadata;
  readonly capabilities: readonly CapabilityName[];
  readonly controller: Stripe.Account.Controller;
  readonly interval: string;
}

const NEEDED = ['external_account', 'individual.dob.day', 'individual.first_name', 'individual.last_name', 'individual.ssn_last_4', 'tos_acceptance.date'];

function requirements(due: readonly string[], reason: Stripe.Account.Requirements['disabled_reason']): Stripe.Account.Requirements {
  return { alternatives: [], current_deadline: null, currently_due: [...due], disabled_reason: reason, errors: [], eventually_due: [...due], past_due: [...due], pending_verification: [] };
}

/** Makes a connected account that still has to be told about its person and bank. */
export function openAccount(world: World, terms: AccountTerms): Stripe.Account {
  const id = world.id('acct').replace('_', '_1');
  const made = {
    id,
    object: 'account',
    business_profile: {
      annual_revenue: null,
      estimated_worker_count: null,
      mcc: null,
      minority_owned_business_designation: null,
      name: terms.businessName,
      product_description: terms.productDescription,
      specified_commercial_transactions_act_url: null,
      support_address: null,
      support_email: null,
      support_phone: null,
      support_url: null,
      url: terms.url,
    },
    business_type: terms.businessType,
    capabilities: Object.fromEntries(terms.capabilities.map((name) => [name, 'inactive'])),
    charges_enabled: false,
    controller: terms.controller,
    country: terms.country,
    created: world.now(),
    default_currency: 'usd',
    details_submitted: false,
    email: terms.email,
    external_accounts: { object: 'list', data: [], has_more: false, url: `/v1/accounts/${id}/external_accounts` },
    future_requirements: { ...requirements([], null) } as Stripe.Account.FutureRequirements,
    metadata: terms.metadata,
    payouts_enabled: false,
    requirements: requirements(NEEDED, 'requirements.past_due'),
    settings: {
      branding: { icon: null, logo: null, primary_color: null, secondary_color: null },
      card_payments: { statement_descriptor_prefix: null, statement_descriptor_prefix_kana: null, statement_descriptor_prefix_kanji: null },
      dashboard: { display_name: terms.businessName, timezone: 'Etc/UTC' },
      payments: { statement_descriptor: null, statement_descriptor_kana: null, statement_descriptor_kanji: null, statement_descriptor_prefix_kana: null, statement_descriptor_prefix_kanji: null },
      payouts: { debit_negative_balances: true, schedule: { delay_days: 2, interval: terms.interval }, statement_descriptor: null },
    },
    tos_acceptance: { date: null, ip: null, user_agent: null },
    type: terms.type,
  } satisfies Stripe.Account;
  world.store.put('account', id, made);
  return made;
}

/** Keeps a changed account and tells of it, as a connected account's event. */
export function keepAccount(world: World, before: Stripe.Account, after: Stripe.Account): Stripe.Account {
  world.store.put('account', after.id, after);
  const previous: Record<string, unknown> = {};
  for (const key of ['charges_enabled', 'payouts_enabled', 'details_submitted', 'capabilities', 'requirements', 'metadata', 'email'] as const) {
    if (JSON.stringify(before[key]) !== JSON.stringify(after[key])) previous[key] = before[key];
  }
  world.emit('account.updated', after, previous, after.id);
  return after;
}

/** What a person gives on the onboarding page. */
export interface Particulars {
  readonly name: string;
  readonly routingNumber: string;
  readonly accountNumber: string;
  readonly verified: boolean;
}

/** The person has answered: capabilities become active, unless their identity could not be verified. */
export function completeOnboarding(world: World, id: string, given: Particulars): Stripe.Account {
  const account = world.store.get('account', id);
  if (account === undefined) throw invalid(`No such account: '${id}'`);
  const bank = {
    id: world.id('ba'),
    object: 'bank_account',
    account: id,
    account_holder_name: given.name,
    account_holder_type: 'individual',
    account_type: 'checking',
    available_payout_methods: ['standard'],
    bank_name: 'STAND-IN TEST BANK',
    country: 'US',
    currency: 'usd',
    default_for_currency: true,
    fingerprint: `stand-in-${given.accountNumber.slice(-4)}`,
    last4: given.accountNumber.slice(-4),
    metadata: {},
    routing_number: given.routingNumber,
    status: 'new',
  } satisfies Stripe.BankAccount;
  world.setNote(`bank of ${id}`, given.accountNumber);
  const state = given.verified ? ('active' as const) : ('inactive' as const);
  const capabilities = Object.fromEntries(Object.keys(account.capabilities ?? {}).map((name) => [name, state])) as Stripe.Account.Capabilities;
  return keepAccount(world, account, {
    ...account,
    business_type: account.business_type ?? 'individual',
    capabilities,
    charges_enabled: given.verified,
    details_submitted: true,
    external_accounts: { object: 'list', data: [bank], has_more: false, url: `/v1/accounts/${id}/external_accounts` },
    payouts_enabled: given.verified,
    requirements: given.verified ? requirements([], null) : requirements(['individual.verification.document'], 'requirements.past_due'),
    tos_acceptance: { ...account.tos_acceptance, date: world.now() },
  });
}

/** The provider stops an account (a rejected document, a risk): payouts and capabilities go. */
export function restrictAccount(world: World, account: Stripe.Account): Stripe.Account {
  const capabilities = Object.fromEntries(Object.keys(account.capabilities ?? {}).map((name) => [name, 'inactive'])) as Stripe.Account.Capabilities;
  return keepAccount(world, account, {
    ...account,
    capabilities,
    charges_enabled: false,
    payouts_enabled: false,
    requirements: requirements(['individual.verification.document'], 'requirements.past_due'),
  });
}

const LINK_LIFE_S = 300;

/** A link that opens one page once, within five minutes. */
export function makeLink(world: World, account: string, purpose: KeptLink['purpose'], returnUrl: string, refreshUrl: string): KeptLink {
  const token = world.id('link').slice(5);
  const link: KeptLink = { token, account, expiresAt: world.now() + LINK_LIFE_S, returnUrl, refreshUrl, openedAs: null, purpose };
  world.store.put('link', token, link);
  return link;
}

/** Follows a link: the secret of the page it opens, or null when it was followed before or is too old. */
export function followLink(world: World, link: KeptLink): string | null {
  if (link.openedAs !== null || link.expiresAt <= world.now()) return null;
  const page = world.id('page').slice(5);
  world.store.put('link', link.token, { ...link, openedAs: page });
  return page;
}
