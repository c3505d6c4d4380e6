import { beforeAll, describe, expect, inject, test } from 'vitest';
import { answerNames, type ListingTyped } from '~/domain/listing/draft.ts';
import { Browser, type Fields } from '../support/browser.ts';
import { typedListing, typedLog, typedPiece } from '../support/listing-forms.ts';

const origin = inject('origin');
const mailPage = inject('mailPage');

const day = (days: number): string => new Date(Date.now() + days * 86_400_000).toISOString().slice(0, 10);
/** A whole form, on the real clock of the running product. */
const form = (changes: Partial<ListingTyped> = {}): ListingTyped => typedListing({ cameDownOn: day(-10), closesOn: day(20), lat: '43.61234', lng: '-90.87654', directions: 'Past the red barn', ...changes });

/** The fields that a page without script posts. */
function fieldsOf(typed: ListingTyped, deed: string, typedVersion = ''): Fields {
  const rows = (name: 'logs' | 'pieces'): [string, string][] => typed[name].flatMap((row, index) => Object.entries(row).map(([field, value]): [string, string] => [`${name}.${index}.${field}`, value]));
  return { ...Object.fromEntries([...answerNames.map((name): [string, string] => [name, typed[name]]), ...rows('logs'), ...rows('pieces')]), deed, typedVersion };
}

const numberOf = (answer: Response): number => Number(/\/listings\/(\d+)/.exec(answer.headers.get('location') ?? '')?.[1]);
const visitor = new Browser(origin);
const owner = new Browser(origin);
const stranger = new Browser(origin);
const newcomer = new Browser(origin);

async function published(changes: Partial<ListingTyped> = {}): Promise<number> {
  const answer = await owner.post('/listings/new', fieldsOf(form(changes), 'publish'));
  expect(answer.status).toBe(303);
  return numberOf(answer);
}

beforeAll(async () => {
  await owner.signUp({ name: 'Lena Landing', email: 'lena@listing.example', as: ['landowner'] }, mailPage);
  await stranger.signUp({ name: 'Stan Strange', email: 'stan@listing.example', as: ['sawyer'] }, mailPage);
  await newcomer.signUp({ name: 'Nina New', email: 'nina@listing.example', as: ['landowner'] });
});

describe('the form without script', () => {
  test('can be begun by a visitor, and gives everything back when an account is asked for', async () => {
    expect((await visitor.get('/listings/new')).status).toBe(200);
    for (const deed of ['save', 'publish']) {
      const answer = await visitor.post('/listings/new', fieldsOf(form({ note: 'Mind the <dog> & "gate"' }), deed));
      const page = await answer.text();
      expect(answer.status).toBe(401);
      expect(page).toContain('You need an account');
      expect(page).toContain('value="16 x 17"');
      expect(page).toContain('Mind the &lt;dog&gt; &amp;');
    }
  });

  test('adds and removes rows and keeps what stands in the others', async () => {
    const more = await (await visitor.post('/listings/new', fieldsOf(form({ logs: [typedLog({ smallEnd: '15 5/8' })] }), 'add-log'))).text();
    expect(more).toContain('name="logs.1.smallEnd"');
    expect(more).toContain('value="15 5/8"');
    const fewer = await (await visitor.post('/listings/new', fieldsOf(form({ logs: [typedLog({ smallEnd: '15 5/8' }), typedLog({ smallEnd: '13 7/8' })] }), 'remove-log:0'))).text();
    expect(fewer).toContain('value="13 7/8"');
    expect(fewer).not.toContain('value="15 5/8"');
  });

  test('takes logs from the estimator’s link, and says so when it cannot', async () => {
    expect(await (await visitor.get('/listings/new?logs=white-oak_18_20.5_12.5_2')).text()).toMatch(/value="20 1\/2"[\s\S]*name="logs\.1\.smallEnd"/);
    expect(await (await visitor.get('/listings/new?logs=plastic_18')).text()).toContain('could not be read');
  });

  test('saves a draft of anything, for its owner alone', async () => {
    const answer = await owner.post('/listings/new', fieldsOf(form({ zip: 'nowhere', logs: [typedLog({ length: 'long' })] }), 'save'));
    expect(answer.status).toBe(303);
    const at = `/listings/${numberOf(answer)}`;
    const page = await (await owner.follow(answer)).text();
    expect(page).toContain('value="nowhere"');
    expect(page).toContain('value="long"');
    expect((await owner.get(at)).status).toBe(404);
    for (const path of [at, `${at}/edit`, `${at}/withdraw`]) expect((await stranger.get(path)).status).toBe(404);
    expect((await visitor.get(at)).status).toBe(404);
    expect((await visitor.get(`${at}/edit`)).headers.get('location')).toContain('/sign-in?next=');
  });

  test('names every problem at its field with 422, and keeps the draft', async () => {
    const answer = await owner.post('/listings/new', fieldsOf(form({ zip: '', logs: [typedLog({ smallEnd: '22', largeEnd: '20' }), typedLog({ length: '90 ft' })] }), 'publish'));
    const page = await answer.text();
    expect(answer.status).toBe(422);
    expect(page).toMatch(/href="#f-logs-0-largeEnd"[^>]*>The large end \(20 in\) is smaller than the small end \(22 in\)/);
    expect(page).toMatch(/href="#f-logs-1-length"/);
    expect(page).toMatch(/href="#f-zip"/);
    expect(page).toContain('value="90 ft"');
    const kept = /action="(\/listings\/\d+\/edit)"/.exec(page)?.[1] ?? '';
    expect(await (await owner.get(kept)).text()).toContain('value="90 ft"');
  });

  test('never overwrites what another device saved, unless told to', async () => {
    const number = numberOf(await owner.post('/listings/new', fieldsOf(form({ note: 'first' }), 'save')));
    const at = `/listings/${number}/edit`;
    expect((await owner.post(at, fieldsOf(form({ note: 'from the phone' }), 'save', '1'))).status).toBe(303);
    const stale = await owner.post(at, fieldsOf(form({ note: 'from the desk' }), 'save', '1'));
    expect(stale.status).toBe(409);
    expect(await stale.text()).toMatch(/saved somewhere else[\s\S]*from the desk/);
    expect(await (await owner.get(at)).text()).toContain('from the phone');
    expect((await owner.post(at, fieldsOf(form({ note: 'from the desk' }), 'overwrite', '1'))).status).toBe(303);
    expect(await (await owner.get(at)).text()).toContain('from the desk');
  });

  test('keeps the text of someone whose session has ended', async () => {
    const number = await published();
    const answer = await visitor.post(`/listings/${number}/edit`, fieldsOf(form({ note: 'typed for an hour' }), 'revise', '2'));
    const page = await answer.text();
    expect(answer.status).toBe(401);
    expect(page).toContain('typed for an hour');
    expect(page).toContain(`action="/listings/${number}/edit"`);
  });
});

describe('a listing’s page', () => {
  test('shows everybody everything but the exact place', async () => {
    const number = await published({ pieces: [typedPiece({ label: 'Bench', dwelling: 'on' })], lines: 'near' });
    for (const who of [visitor, stranger]) {
      const answer = await who.get(`/listings/${number}`);
      const page = await answer.text();
      expect(answer.status).toBe(200);
      expect(page).toContain('White oak, 3 logs');
      expect(page).toMatch(/near Viroqua, WI/);
      expect(page).toContain('Bench');
      expect(page).toContain('at least 10 feet from lines up to 50 kV');
      expect(page).toContain('grade stamp or a certificate');
      for (const secret of ['43.612', '90.876', 'red barn', 'Lena', 'lena@']) expect(page).not.toContain(secret);
    }
    expect(await (await stranger.get(`/listings/${number}`)).text()).toContain('Bid on these logs');
    const own = await (await owner.get(`/listings/${number}`)).text();
    expect(own).toContain('43.61234, -90.87654');
    expect(own).toContain('Past the red barn');
    expect(own).not.toContain('Bid on these logs');
  });

  test('tells strange addresses from numbers', async () => {
    for (const path of ['/listings/0', '/listings/1e3', '/listings/99999999999', '/listings/abc', '/listings/-1/edit']) expect((await owner.get(path)).status).toBe(404);
  });

  test('does not give the place to whoever posts to it', async () => {
    const number = await published();
    const answer = await stranger.post(`/listings/${number}`);
    expect(await answer.text()).not.toContain('43.61234');
  });

  test('is revised by its owner, and by nobody else', async () => {
    const number = await published();
    expect((await stranger.post(`/listings/${number}/edit`, fieldsOf(form(), 'revise', '3'))).status).not.toBe(303);
    const page = await (await owner.get(`/listings/${number}/edit`)).text();
    const version = /name="typedVersion"[^>]*value="(\d+)"/.exec(page)?.[1] ?? '';
    const answer = await owner.post(`/listings/${number}/edit`, fieldsOf(form({ note: 'The gate is open now' }), 'revise', version));
    expect(answer.headers.get('location')).toBe(`/listings/${number}?changed`);
    expect(await (await visitor.get(`/listings/${number}`)).text()).toContain('The gate is open now');
  });

  test('is withdrawn by a page that needs no script, once', async () => {
    const number = await published();
    const at = `/listings/${number}/withdraw`;
    expect((await visitor.get(at)).headers.get('location')).toContain('/sign-in?next=');
    expect((await stranger.get(at)).status).toBe(404);
    expect((await stranger.post(at, { reason: '' })).status).toBe(404);
    expect((await owner.get(at)).status).toBe(200);
    expect((await owner.post(at, { reason: 'x'.repeat(501) })).status).toBe(422);
    expect((await owner.post(at, { reason: 'Gave them away' })).status).toBe(303);
    expect((await owner.post(at, { reason: '' })).status).toBe(409);
    expect((await owner.get(at)).status).toBe(409);
    expect(await (await visitor.get(`/listings/${number}`)).text()).toContain('Withdrawn');
  });
});

describe('a landowner’s listings', () => {
  test('are listed with what to do next; a newcomer is shown how to begin', async () => {
    const page = await (await owner.get('/listings')).text();
    expect(page).toContain('Go on and publish');
    expect(page).toContain('Open until');
    expect(await (await newcomer.get('/listings')).text()).toContain('You have not listed any logs yet');
    expect((await visitor.get('/listings')).headers.get('location')).toContain('/sign-in?next=');
  });
});

describe('keeping a draft over HTTP', () => {
  const keep = (who: Browser, body: unknown): Promise<Response> => who.send('POST', '/api/listings/draft', body);
  test('asks who one is, for a confirmed address, and for the version one saw', async () => {
    const typed = form();
    expect((await keep(visitor, { number: null, typedVersion: null, typed })).status).toBe(401);
    const unconfirmed = await keep(newcomer, { number: null, typedVersion: null, typed });
    expect(unconfirmed.status).toBe(403);
    expect(await unconfirmed.text()).toContain('Confirm your e-mail');
    const first = await keep(owner, { number: null, typedVersion: null, typed });
    expect(first.status).toBe(200);
    const { number, typedVersion } = (await first.json()) as { number: number; typedVersion: number };
    expect((await keep(owner, { number, typedVersion, typed })).status).toBe(200);
    expect((await keep(owner, { number, typedVersion, typed })).status).toBe(409);
    expect((await keep(stranger, { number, typedVersion: null, typed })).status).toBe(403);
    expect((await keep(owner, { number: 999_999, typedVersion: null, typed })).status).toBe(404);
  });
  test('refuses what is no form', async () => {
    for (const body of [{}, { number: 'x', typedVersion: null, typed: form() }, { number: null, typedVersion: null, typed: { logs: 'many' } }, { number: null, typedVersion: null, typed: { note: 'x'.repeat(5000) } }]) {
      expect((await keep(owner, body)).status).toBe(422);
    }
  });
});

describe('the place of a ZIP code', () => {
  test('is said to anybody, and refused for what is none', async () => {
    const answer = await visitor.get('/api/places?zip=54665');
    expect(await answer.json()).toMatchObject({ zip: '54665', town: 'Viroqua', county: 'Vernon', state: 'WI', towns: expect.arrayContaining([expect.objectContaining({ name: 'La Crosse' })]) });
    expect((await visitor.get('/api/places?zip=00000')).status).toBe(404);
    for (const query of ['', '?zip=abc', '?zip=54665&zip=54666', '?zip=54665&town=x']) expect((await visitor.get(`/api/places${query}`)).status).toBe(422);
  });
});
