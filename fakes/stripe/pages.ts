import type Stripe from 'stripe';
import { completeOnboarding, followLink } from './accounts.ts';
import { totals } from './balance.ts';
import { TEST_CARDS, readCard } from './cards.ts';
import { linesOf, paySession } from './checkout.ts';
import { ApiError } from './errors.ts';
import { dollars, errorBox, escape, field, htmlPage } from './html.ts';
import { BANK_ACCOUNT_THAT_FAILS } from './payouts.ts';
import type { World } from './world.ts';

/** What a page answers with: HTML, or another address to go to. */
export type PageAnswer = { readonly status: number; readonly html: string } | { readonly redirect: string };

const CARD_NOTICE = 'Stand-in card page: no real money';
const SETUP_NOTICE = 'Stand-in payout page: no real money, type nothing true';

const say = (notice: string, title: string, text: string, status = 200, link?: { href: string; text: string }): PageAnswer => ({
  status,
  html: htmlPage(notice, title, `<h1>${escape(title)}</h1><p>${escape(text)}</p>${link === undefined ? '' : `<a class="button" href="${escape(link.href)}">${escape(link.text)}</a>`}`),
});

const successAddress = (session: Stripe.Checkout.Session): string => (session.success_url ?? '/').replaceAll('{CHECKOUT_SESSION_ID}', session.id);

/** The card page, and what became of a session that is no longer open. */
export function cardPage(world: World, id: string, typed: URLSearchParams = new URLSearchParams(), error: string | null = null): PageAnswer {
  const session = world.store.get('session', id);
  if (session === undefined) return say(CARD_NOTICE, 'No such payment', 'The address is wrong or the payment was never begun.', 404);
  const cancel = session.cancel_url === null ? undefined : { href: session.cancel_url, text: 'Go back' };
  if (session.status === 'complete') return say(CARD_NOTICE, 'Already paid', 'This payment is complete. Nothing was charged again.', 200, { href: successAddress(session), text: 'Go on' });
  if (session.status !== 'open' || session.expires_at <= world.now()) return say(CARD_NOTICE, 'This payment page has expired', 'Go back and begin the payment again. Nothing was charged.', 410, cancel);
  const lines = linesOf(world, id).data.map((line) => `<tr><td>${escape(line.description ?? '')}${line.quantity === 1 ? '' : ` × ${line.quantity}`}</td><td>${dollars(line.amount_total)}</td></tr>`).join('');
  const cards = TEST_CARDS.map((card) => `<tr><td><code>${card.number.replace(/(.{4})(?=.)/g, '$1 ')}</code></td><td>${escape(card.shows)}</td></tr>`).join('');
  const value = (name: string): string => typed.get(name) ?? '';
  const body = `<h1>Pay</h1><p class="sum">${dollars(session.amount_total ?? 0)}</p><table>${lines}</table>
${errorBox(error)}
<form method="post" action="/c/pay/${escape(id)}">
${field('email', 'E-mail', value('email') || (session.customer_email ?? ''), { type: 'email', autocomplete: 'off' })}
${field('cardNumber', 'Card number', value('cardNumber'), { mode: 'numeric', hint: 'A test card only, for instance 4242 4242 4242 4242' })}
<div class="pair"><div>${field('cardExpiry', 'Expiry (MM / YY)', value('cardExpiry'), { mode: 'numeric' })}</div><div>${field('cardCvc', 'Security code', value('cardCvc'), { mode: 'numeric' })}</div></div>
${field('billingName', 'Name on card', value('billingName'))}
${field('billingPostalCode', 'ZIP', value('billingPostalCode'), { mode: 'numeric' })}
<button type="submit">Pay ${dollars(session.amount_total ?? 0)}</button></form>
${cancel === undefined ? '' : `<a class="button plain" href="${escape(cancel.href)}">Cancel and go back</a>`}
<details><summary>Test cards</summary><p class="hint">Any future expiry, any three-figure code, any ZIP.</p><table>${cards}</table></details>`;
  return { status: error === null ? 200 : 402, html: htmlPage(CARD_NOTICE, 'Stand-in card page', body) };
}

/** The reason why the other fields cannot be taken, or null. */
function problem(world: World, typed: URLSearchParams): string | null {
  const expiry = /^\s*(\d{1,2})\s*\/?\s*(?:20)?(\d{2})\s*$/.exec(typed.get('cardExpiry') ?? '');
  const month = Number(expiry?.[1] ?? 0);
  if (month < 1 || month > 12) return "Your card's expiration date is incomplete: type it as MM / YY.";
  const ends = Date.UTC(2000 + Number(expiry?.[2] ?? 0), month, 1) / 1000;
  if (ends <= world.now()) return "Your card's expiration date is in the past.";
  if (!/^\s*\d{3,4}\s*$/.test(typed.get('cardCvc') ?? '')) return "Your card's security code is incomplete.";
  if (!/^\S+@\S+$/.test((typed.get('email') ?? '').trim())) return 'Type an e-mail address.';
  if ((typed.get('billingName') ?? '').trim() === '') return 'Type the name on the card.';
  return null;
}

/** A person presses Pay. */
export function payPage(world: World, id: string, typed: URLSearchParams): PageAnswer {
  const session = world.store.get('session', id);
  if (session === undefined || session.status !== 'open' || session.expires_at <= world.now()) return cardPage(world, id);
  const card = readCard(typed.get('cardNumber') ?? '');
  if (!('shows' in card)) return cardPage(world, id, typed, card.message);
  const wrong = problem(world, typed);
  if (wrong !== null) return cardPage(world, id, typed, wrong);
  const payer = { name: (typed.get('billingName') ?? '').trim(), email: (typed.get('email') ?? '').trim(), postalCode: (typed.get('billingPostalCode') ?? '').trim() || null };
  return world.store.change((): PageAnswer => {
    try {
      return { redirect: successAddress(paySession(world, id, card, payer)) };
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      return cardPage(world, id, typed, error.message);
    }
  });
}

/** Follows an account link: once, and within its time. Otherwise the person goes to the address for a new one. */
export function setupLink(world: World, token: string): PageAnswer {
  const link = world.store.get('link', token);
  if (link === undefined) return say(SETUP_NOTICE, 'No such link', 'The address is wrong. Ask for a new link where you came from.', 404);
  const page = world.store.change(() => followLink(world, link));
  if (page === null) return link.refreshUrl === '' ? say(SETUP_NOTICE, 'This link was used or is too old', 'Ask for a new one where you came from.', 410) : { redirect: link.refreshUrl };
  return { redirect: `/setup/${token}/${page}` };
}

/** The page behind a link: the onboarding form, or what an account has and was paid. */
export function setupPage(world: World, token: string, page: string, typed = new URLSearchParams(), error: string | null = null): PageAnswer {
  const link = world.store.get('link', token);
  const account = link === undefined ? undefined : world.store.get('account', link.account);
  if (link === undefined || account === undefined || link.openedAs !== page) return say(SETUP_NOTICE, 'No such page', 'Ask for a new link where you came from.', 404);
  if (link.purpose === 'dashboard') return dashboard(world, account);
  const value = (name: string, otherwise = ''): string => typed.get(name) ?? otherwise;
  const body = `<h1>Set up payouts</h1><p>The platform sends your pay to this account; from here it goes to your bank.</p>${errorBox(error)}
<form method="post" action="/setup/${escape(token)}/${escape(page)}">
${field('name', 'Your full name', value('name'))}
${field('born', 'Date of birth (MM/DD/YYYY)', value('born', '01/01/1980'), { hint: 'Any date at least 18 years ago' })}
${field('ssn', 'Last four of social security number', value('ssn', '0000'), { mode: 'numeric', hint: 'For the test: 0000' })}
${field('routing', 'Routing number', value('routing', '110000000'), { mode: 'numeric', hint: 'For the test: 110000000' })}
${field('account', 'Account number', value('account', '000123456789'), { mode: 'numeric', hint: `000123456789 works; payouts to ${BANK_ACCOUNT_THAT_FAILS} come back` })}
<fieldset><legend>Identity check</legend><label><input type="radio" name="verified" value="yes" ${typed.get('verified') === 'no' ? '' : 'checked'}> The provider accepts it</label>
<label><input type="radio" name="verified" value="no" ${typed.get('verified') === 'no' ? 'checked' : ''}> The provider asks for a document</label></fieldset>
<button type="submit">Agree and submit</button></form>
<a class="button plain" href="${escape(link.returnUrl)}">Save for later and go back</a>`;
  return { status: error === null ? 200 : 422, html: htmlPage(SETUP_NOTICE, 'Stand-in payout page', body) };
}

/** A person sends the onboarding form. */
export function setupSent(world: World, token: string, page: string, typed: URLSearchParams): PageAnswer {
  const link = world.store.get('link', token);
  if (link === undefined || link.openedAs !== page || link.purpose !== 'onboarding') return setupPage(world, token, page);
  const name = (typed.get('name') ?? '').trim();
  const born = /^(\d{1,2})\/(\d{1,2})\/(\d{4})$/.exec((typed.get('born') ?? '').trim());
  const routing = (typed.get('routing') ?? '').trim();
  const number = (typed.get('account') ?? '').trim();
  if (name === '') return setupPage(world, token, page, typed, 'Type your full name.');
  if (born === null || new Date(world.now() * 1000).getUTCFullYear() - Number(born[3]) < 18) return setupPage(world, token, page, typed, 'Type a date of birth at least 18 years ago, as MM/DD/YYYY.');
  if (!/^\d{4}$/.test((typed.get('ssn') ?? '').trim())) return setupPage(world, token, page, typed, 'Type four figures for the social security number.');
  if (!/^\d{9}$/.test(routing)) return setupPage(world, token, page, typed, 'A routing number has nine figures.');
  if (!/^\d{4,17}$/.test(number)) return setupPage(world, token, page, typed, 'An account number has 4 to 17 figures.');
  world.store.change(() => completeOnboarding(world, link.account, { name, routingNumber: routing, accountNumber: number, verified: typed.get('verified') !== 'no' }));
  return { redirect: link.returnUrl };
}

function dashboard(world: World, account: Stripe.Account): PageAnswer {
  const { available, pending } = totals(world, account.id);
  const payouts = world.store.all('payout', account.id).reverse().map((payout) => `<tr><td>${new Date(payout.created * 1000).toISOString().slice(0, 10)}</td><td>${dollars(payout.amount)}</td><td>${escape(payout.status)}</td></tr>`).join('');
  const table = payouts === '' ? '<p>No payouts yet.</p>' : `<table><tr><th>Day</th><th>Amount</th><th>State</th></tr>${payouts}</table>`;
  return { status: 200, html: htmlPage(SETUP_NOTICE, 'Stand-in payouts', `<h1>Your payouts</h1><p>Available ${dollars(available)}, on its way ${dollars(pending)}.</p>${table}`) };
}
