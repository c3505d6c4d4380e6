import { beforeAll, describe, expect, inject, it } from 'vitest';
import { Browser } from '../support/browser.ts';
import { bidFields, dayAhead, listingFields, millFields, publishListing, setUpSawing } from '../support/bidding-forms.ts';
import { typedListing, typedLog } from '../support/listing-forms.ts';
import { OAK_CARD } from '../support/rate-cards.ts';

const origin = inject('origin');
const mailPage = inject('mailPage');
const ada = new Browser(origin);
const bram = new Browser(origin);
const cleo = new Browser(origin);
const eve = new Browser(origin);
const nina = new Browser(origin);
const guest = new Browser(origin);
let number = 0;

beforeAll(async () => {
  const people: readonly (readonly [Browser, string, 'landowner' | 'sawyer'])[] = [[ada, 'Ada', 'landowner'], [bram, 'Bram', 'sawyer'], [cleo, 'Cleo', 'sawyer'], [eve, 'Eve', 'landowner'], [nina, 'Nina', 'sawyer']];
  await Promise.all(people.map(([who, name, as]) => who.signUp({ name, email: `${name.toLowerCase()}@bidding.example`, as: [as] }, mailPage)));
  await Promise.all([setUpSawing(bram, 'Bram Band'), setUpSawing(cleo, 'Cleo Cuts', { ...OAK_CARD, setUpPerLanding: 20_000 })]);
  number = await publishListing(ada);
});

/** A page's words on one line. */
const words = async (answer: Response | Promise<Response>): Promise<string> => (await (await answer).text()).replace(/<!--.*?-->/g, '').replace(/\s+/g, ' ');
const bid = async (who: Browser, listing: number, changes: Record<string, string | readonly string[]> = {}, how = ''): Promise<Response> =>
  who.post(`/listings/${listing}/bid${how}`, await bidFields(who, listing, changes));
/** The address at which a sawyer's bid can be chosen, read from the owner's comparison. */
const choosing = async (listing: number, sawyer: string): Promise<string> => {
  const html = await words(ada.get(`/listings/${listing}/bids`));
  return new RegExp(`href="(/listings/${listing}/bids/[0-9a-f-]{36})"[^>]*>Choose this bid<span class="sr-only"> of ${sawyer}<`).exec(html)?.[1] ?? '';
};
const revisionOf = async (address: string): Promise<string> => /name="listingRevision" value="(\d+)"/.exec(await (await ada.get(address)).text())?.[1] ?? '';
const termsOf = async (address: string): Promise<string> => /name="terms" value="([0-9a-f]{64})"/.exec(await (await ada.get(address)).text())?.[1] ?? '';

describe('who may see and do', () => {
  it.each(['bid', 'bid/withdraw', 'bids', 'bids/2b6f1c3e-0000-4000-8000-000000000000'])('%s: a guest signs in first', async (name) => {
    const answer = await guest.get(`/listings/${number}/${name}`);
    expect([answer.status, answer.headers.get('location')]).toEqual([303, `/sign-in?next=${encodeURIComponent(`/listings/${number}/${name}`)}`]);
  });

  it('only sawyers bid, and nobody on their own listing', async () => {
    const landowner = await eve.get(`/listings/${number}/bid`);
    expect(landowner.status).toBe(403);
    expect(await words(landowner)).toContain('Only sawyers bid.');
    expect((await ada.get(`/listings/${number}/bid`)).status).toBe(403);
    expect((await eve.post(`/listings/${number}/bid`, { millId: 'x' })).status).toBe(403);
    expect((await bram.get(`/listings/${number}/bid/withdraw`)).status).toBe(409);
  });

  it('only the owner compares and chooses', async () => {
    for (const who of [eve, bram]) {
      expect((await who.get(`/listings/${number}/bids`)).status).toBe(404);
      expect((await who.get(`/listings/${number}/bids/2b6f1c3e-0000-4000-8000-000000000000`)).status).toBe(404);
    }
    expect((await ada.get(`/listings/${number}/bids`)).status).toBe(200);
  });

  it('strange addresses are not there', async () => {
    for (const path of ['/listings/x/bid', '/listings/99999999/bid', '/listings/99999999/bids', '/listings/-1/bids', `/listings/${number}/bids/x`, '/bookings/99999999/agreement', '/bookings/x/agreement']) {
      expect((await (path.includes('bids') || path.includes('bookings') ? ada : bram).get(path)).status, path).toBe(404);
    }
  });
});

describe('a sawyer who has nothing set up yet', () => {
  it('is sent to profile, mill and rates, and comes back', async () => {
    const here = `/listings/${number}/bid`;
    const page = await words(nina.get(here));
    const onward = `?next=${encodeURIComponent(here)}`;
    for (const part of ['profile', 'mill', 'rates']) expect(page).toContain(`href="/sawyer/${part}${onward}"`);
    expect(page).not.toContain('Place this bid');
    const last = await setUpSawing(nina, 'Nina Newblade', OAK_CARD, onward);
    expect(last.headers.get('location')).toBe(here);
    expect(await words(nina.get(here))).toContain('Place this bid');
    // A page elsewhere is never gone to.
    const abroad = await nina.post('/sawyer/mill?next=//elsewhere.example', millFields);
    expect(abroad.headers.get('location')).toMatch(/^\/sawyer\/mill/);
  });
});

describe('a bid', () => {
  it('is prefilled, and worked out before it is placed', async () => {
    const page = await words(bram.get(`/listings/${number}/bid`));
    for (const said of ['Expected lumber tally', 'Hold it leads to', 'You would receive', '5 % of the estimate without tax', 'The landowner says 2 grown people can help.']) expect(page).toContain(said);
    const looked = await bid(bram, number, { roadMiles: '125', 'days[]': [] }, '?do=look');
    expect(looked.status).toBe(200);
    // 100 miles beyond the free 25, both ways, at 2.00
    expect(await words(looked)).toMatch(/200 miles at \$2\.00.*\$400\.00/);
    expect(await words(ada.get(`/listings/${number}/bids`))).toContain('No bids yet');
  });

  it('that cannot be read names each field and keeps what was typed', async () => {
    const answer = await bid(bram, number, { metalCap: 'lots', roadMiles: '-3', ownBf: '300', message: 'Two <b>days</b>', 'days[]': ['soon', dayAhead(9)] });
    expect(answer.status).toBe(422);
    const page = await words(answer);
    for (const said of ['Write an amount in dollars', 'value="lots"', 'value="-3"', 'Two &lt;b&gt;days&lt;/b&gt;', 'href="#f-metalCap"']) expect(page).toContain(said);
    const dayless = await bid(bram, number, { 'days[]': [], ownBf: '300' });
    expect(dayless.status).toBe(422);
    expect(await words(dayless)).toMatch(/Offer at least one day.*Say why your figure differs/);
    for (const millId of ['', 'x', '2b6f1c3e-0000-4000-8000-000000000000']) expect((await bid(bram, number, { millId })).status).toBe(422);
    for (const day of ['2020-01-01', dayAhead(200)]) expect((await bid(bram, number, { 'days[]': [day] })).status).toBe(422);
    expect((await bid(bram, number, { waste: 'hauled' })).status).toBe(422);
  });

  it('is placed once, changed, and withdrawn after being asked', async () => {
    const tries = await Promise.all(Array.from({ length: 4 }, async () => (await bid(nina, number, { message: 'At once' })).status));
    expect(tries.filter((status) => status === 303).length).toBeGreaterThan(0);
    expect(tries.every((status) => status === 303 || status === 409)).toBe(true);
    expect((await words(ada.get(`/listings/${number}/bids`))).match(/Choose this bid/g)).toHaveLength(2); // once for a desk, once for a phone
    const changed = await bid(nina, number, { message: 'Changed my mind', roadMiles: '20' });
    expect(changed.headers.get('location')).toBe(`/listings/${number}/bid?done=changed`);
    expect(await words(nina.get(`/listings/${number}/bid`))).toContain('Changed my mind');
    expect(await words(nina.get(`/listings/${number}/bid/withdraw`))).toContain('Withdraw your bid?');
    expect((await nina.post(`/listings/${number}/bid/withdraw`)).headers.get('location')).toBe(`/listings/${number}?bid=withdrawn`);
    expect((await nina.post(`/listings/${number}/bid/withdraw`)).status).toBe(409);
    expect(await words(ada.get(`/listings/${number}/bids`))).toContain('No bids yet');
  });
});

describe('from two bids to one agreement', () => {
  it('are compared in the order asked for, and the lowest is named', async () => {
    for (const who of [bram, cleo]) expect((await bid(who, number)).status).toBe(303);
    const page = await words(ada.get(`/listings/${number}/bids`));
    expect(page).toContain('2 bids, worked on the same logs');
    expect(page).toContain('Bram Band has the lowest estimate');
    expect(page).toContain('Less for set-up and travel ($125)');
    for (const row of ['Rate', 'Set-up and travel', 'Metal hit, per blade', 'Minimum', 'Hold', 'Expected lumber tally', 'Cost per bf sawn', 'Earliest open day', 'Reviews', 'Insurance']) expect(page).toContain(`>${row}<`);
    for (const sort of ['estimate', 'perBf', 'day', 'distance', 'nonsense']) expect((await ada.get(`/listings/${number}/bids?sort=${sort}&bid=x`)).status).toBe(200);
    expect(await words(ada.get(`/listings/${number}`))).toContain(`/listings/${number}/bids`);
  });

  it('have to be confirmed after a revision, and a stale form is refused with what was typed', async () => {
    const choose = await choosing(number, 'Bram Band');
    const seen = await revisionOf(choose);
    const stale = await bidFields(bram, number, { message: 'Typed on the old logs' });
    const form = await (await ada.get(`/listings/${number}/edit`)).text();
    const version = /name="typedVersion"[^>]*value="(\d+)"/.exec(form)?.[1] ?? '';
    const revised = await ada.post(`/listings/${number}/edit`, listingFields(typedListing({ cameDownOn: dayAhead(-10), closesOn: dayAhead(20), logs: [typedLog({ smallEnd: '20', largeEnd: '23' }), typedLog()] }), 'revise', version));
    expect(revised.status).toBe(303);

    const refused = await bram.post(`/listings/${number}/bid`, stale);
    expect(refused.status).toBe(409);
    expect(await words(refused)).toMatch(/The listing was changed while you wrote.*Typed on the old logs/);
    const page = await words(bram.get(`/listings/${number}/bid`));
    expect(page).toContain('The logs changed.');
    expect(page).toMatch(/Confirm the bid at \$\d+\.\d\d/);
    expect(await words(ada.get(`/listings/${number}/bids`))).toContain('2 bids wait for their sawyers');

    const early = await ada.post(choose, { listingRevision: seen });
    expect(early.status).toBe(409);
    expect(await words(early)).toMatch(/The listing has changed since this page was shown/);
    const now = await bidFields(bram, number);
    expect((await bram.post(`/listings/${number}/bid?do=confirm`, { listingRevision: seen })).status).toBe(409);
    expect((await bram.post(`/listings/${number}/bid?do=confirm`, { listingRevision: String(now['listingRevision']) })).headers.get('location')).toBe(`/listings/${number}/bid?done=confirmed`);
    expect((await bid(cleo, number, { message: 'Fine' })).headers.get('location')).toBe(`/listings/${number}/bid?done=changed`);
  });

  it('is chosen by its owner alone, once, however often it is pressed', async () => {
    const choose = await choosing(number, 'Bram Band');
    const other = await choosing(number, 'Cleo Cuts');
    const listingRevision = await revisionOf(choose);
    const read = new Map([[choose, await termsOf(choose)], [other, await termsOf(other)]]);
    const forms = new Map([[bram, await bidFields(bram, number)], [cleo, await bidFields(cleo, number)]]);
    for (const who of [eve, bram]) expect((await who.post(choose, { listingRevision })).status).toBe(404);
    expect((await ada.post(choose, { listingRevision: 'x' })).status).toBe(422);
    // The terms of another bid, or none, are not those that were read.
    for (const terms of [read.get(other) ?? '', '']) expect((await ada.post(choose, { listingRevision, terms })).status).toBe(409);
    const answers = await Promise.all([choose, other, choose, other, choose, other, choose, other].map((address) => ada.post(address, { listingRevision, terms: read.get(address) ?? '' })));
    expect(answers.map(({ status }) => status).sort()).toEqual([303, 409, 409, 409, 409, 409, 409, 409]);
    const booking = answers.find(({ status }) => status === 303)?.headers.get('location') ?? '';
    expect(booking).toMatch(/^\/bookings\/\d+$/);
    const late = await words(ada.post(other, { listingRevision }));
    expect(late).toContain('A bid has been chosen on this listing');

    expect(await words(ada.get(`/listings/${number}/bids`))).toContain('The bid you chose');
    expect(await words(ada.get(booking))).toContain(`${booking}/agreement`);
    const sides = [ada, bram, cleo];
    const seen = await Promise.all(sides.map(async (who) => (await who.get(`${booking}/agreement`)).status));
    expect(seen[0]).toBe(200);
    expect(seen.slice(1).sort()).toEqual([200, 404]);
    expect((await eve.get(`${booking}/agreement`)).status).toBe(404);
    expect((await guest.get(`${booking}/agreement`)).status).toBe(303);
    const agreement = await words(ada.get(`${booking}/agreement`));
    for (const said of ['Work agreement', 'No promise of yield or straightness', 'The right to refuse a log', 'not legal advice', 'The rate card']) expect(agreement).toContain(said);
    const winner = seen[1] === 200 ? bram : cleo;
    expect(await words(winner.get(`/listings/${number}/bid`))).toContain('Your bid was chosen');
    for (const [who, form] of forms) expect((await who.post(`/listings/${number}/bid`, form)).status).toBe(409);
  });
});
