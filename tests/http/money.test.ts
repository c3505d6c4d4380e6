import { beforeAll, describe, expect, inject, it } from 'vitest';
import { Browser, readMail } from '../support/browser.ts';

// The money pages on the built server, with the worker and the payment provider's stand-in beside it. The booking is put straight into
// the product's database: how one comes about is another file's subject.
const origin = inject('origin');
const mailPage = inject('mailPage');
const ada = new Browser(origin);
const bram = new Browser(origin);
const eve = new Browser(origin);
let number = 0;
let market: typeof import('../support/money-market.ts');
let booking: Awaited<ReturnType<typeof market.makeAgreedBooking>>;

beforeAll(async () => {
  Object.assign(process.env, inject('productEnvironment'));
  await ada.signUp({ name: 'Ada', email: 'ada@money.example', as: ['landowner'] }, mailPage);
  await bram.signUp({ name: 'Bram', email: 'bram@money.example', as: ['sawyer'] }, mailPage);
  await eve.signUp({ name: 'Eve', email: 'eve@money.example', as: ['landowner', 'sawyer'] }, mailPage);
  market = await import('../support/money-market.ts');
  const { Account } = await import('~/server/models/index.ts');
  const { viewerFor } = await import('../support/cast.ts');
  const viewer = async (email: string) => viewerFor((await Account.findOne({ where: { email }, rejectOnEmpty: true })).id);
  booking = await market.makeAgreedBooking(await viewer('ada@money.example'), await viewer('bram@money.example'));
  number = booking.number;
});

const page = async (browser: Browser, path: string): Promise<string> => {
  const answer = await browser.get(path);
  expect(answer.status, path).toBe(200);
  return (await answer.text()).replace(/\s+/g, ' ');
};
/** Looks at a page until it has the words: the worker and the provider take a moment. */
const until = async (browser: Browser, path: string, words: string): Promise<string> => {
  const end = Date.now() + 15_000;
  for (;;) {
    const text = await page(browser, path);
    if (text.includes(words)) return text;
    if (Date.now() > end) throw new Error(`${path} never said "${words}": ${text.slice(text.indexOf('<main'), text.indexOf('<main') + 2_000)}`);
    await new Promise((done) => setTimeout(done, 150));
  }
};

describe('who may see and do', () => {
  it.each(['pay', 'paid', 'cancel', 'receipt'])('%s: strangers and guests may not', async (name) => {
    expect((await eve.get(`/bookings/${number}/${name}`)).status).toBe(404);
    const posted = await eve.post(`/bookings/${number}/${name}`, { reason: 'Mine now.', amount: '5', expects: '0' });
    expect([403, 404]).toContain(posted.status);
    expect(await posted.text()).toContain('<main');
    const guest = await new Browser(origin).get(`/bookings/${number}/${name}`);
    expect([guest.status, guest.headers.get('location')]).toEqual([303, `/sign-in?next=${encodeURIComponent(`/bookings/${number}/${name}`)}`]);
  });

  it('only the landowner pays, only sawyers have payouts, a receipt needs a signed tally', async () => {
    expect((await bram.get(`/bookings/${number}/pay`)).status).toBe(403);
    expect((await bram.post(`/bookings/${number}/pay`)).status).toBe(403);
    expect((await ada.get('/account/payouts')).status).toBe(403);
    expect((await ada.get(`/bookings/${number}/receipt`)).status).toBe(404);
    expect((await ada.get('/bookings/99999999/pay')).status).toBe(404);
    expect((await ada.get('/bookings/x/pay')).status).toBe(404);
  });

  it('the message door takes only what is signed', async () => {
    const answer = await fetch(`${origin}/api/webhooks/payments`, { method: 'POST', headers: { 'content-type': 'application/json' }, body: '{"id":"evt_1"}' });
    expect(answer.status).toBe(422);
    expect(answer.headers.get('content-type')).toContain('application/problem+json');
  });
});

describe('from the hold to the receipt', () => {
  it('pays by card, and is held when the provider says so', async () => {
    expect(await page(ada, `/bookings/${number}/pay`)).toContain('$600.00');
    const gone = await ada.post(`/bookings/${number}/pay`);
    expect(gone.status).toBe(303);
    const cardPage = gone.headers.get('location') ?? '';
    expect(await page(ada, `/bookings/${number}/paid`)).toContain('Not confirmed yet');
    const again = await ada.post(`/bookings/${number}/pay`);
    expect(again.headers.get('location')).toBe(cardPage);
    const paid = await fetch(cardPage, {
      method: 'POST', redirect: 'manual',
      body: new URLSearchParams({ email: 'ada@money.example', cardNumber: '4242424242424242', cardExpiry: '12/49', cardCvc: '123', billingName: 'Ada', billingPostalCode: '54665' }),
    });
    expect(paid.headers.get('location')).toBe(`${origin}/bookings/${number}/paid`);
    expect(await until(ada, `/bookings/${number}/paid`, 'Your money is held')).toContain('$600.00 arrived and was held');
    expect((await readMail(mailPage, 'bram@money.example', 'Held: $600.00')).text).toContain('Ada paid the hold');
    expect((await ada.post(`/bookings/${number}/pay`)).status).toBe(409);
  });

  it('connects a payout account through the provider', async () => {
    const gone = await bram.post('/account/payouts');
    const link = /http-equiv="refresh" content="0;url=([^"]+)"/.exec(await gone.text())?.[1] ?? '';
    const opened = await fetch(link, { redirect: 'manual' });
    const form = new URL(opened.headers.get('location') ?? '', link);
    const sent = await fetch(form, {
      method: 'POST', redirect: 'manual',
      body: new URLSearchParams({ name: 'Bram', born: '01/01/1980', ssn: '0000', routing: '110000000', account: '000123456789', verified: 'yes' }),
    });
    expect(sent.headers.get('location')).toBe(`${origin}/account/payouts?back=1`);
    expect(await page(bram, '/account/payouts?back=1')).toContain('Your payout account is ready');
  });

  it('shows what cancelling costs, refuses a cancellation without a reason and keeps the booking', async () => {
    expect(await page(ada, `/bookings/${number}/cancel`)).toContain('$600.00');
    const refused = await ada.post(`/bookings/${number}/cancel`, { reason: ' ', expects: '0' });
    expect(refused.status).toBe(422);
    expect(await refused.text()).toContain('Say why');
  });

  it('pays out the signed tally and shows both their receipts', async () => {
    await market.sawAndSign(booking, 50_000);
    const receipt = await until(ada, `/bookings/${number}/receipt`, '$100.00 sent back to your card');
    expect(receipt).toContain('$500.00');
    expect(await until(bram, `/bookings/${number}/receipt`, '$475.00 released to you')).toContain('−$25.00');
    expect(await page(bram, '/account/payouts')).toMatch(/Released.*\$475\.00/);
    expect(await page(ada, '/account/payments')).toContain('$100.00');
    expect((await eve.get(`/bookings/${number}/receipt`)).status).toBe(404);
  });
});
