import { beforeAll, describe, expect, inject, test } from 'vitest';
import { rateCardTyped } from '~/schemas/rate-card-form.ts';
import { Browser } from '../support/browser.ts';
import { OAK_CARD } from '../support/rate-cards.ts';

const origin = inject('origin');
const mailPage = inject('mailPage');
const pages = ['/sawyer', '/sawyer/profile', '/sawyer/mill', '/sawyer/rates', '/sawyer/bids', '/sawyer/messages', '/sawyer/calendar', '/sawyer/calendar/import'];
const visitor = new Browser(origin);
const landowner = new Browser(origin);
const unconfirmed = new Browser(origin);
const sawyer = new Browser(origin);
const day = (ahead: number): string => new Date(Date.now() + ahead * 86_400_000).toISOString().slice(0, 10);

beforeAll(async () => {
  await landowner.signUp({ name: 'Lou Landing', email: 'lou@sawyer-pages.example', as: ['landowner'] }, mailPage);
  await sawyer.signUp({ name: 'Sid Sawdust', email: 'sid@sawyer-pages.example', as: ['sawyer'] }, mailPage);
  await unconfirmed.signUp({ name: 'Una Unconfirmed', email: 'una@sawyer-pages.example', as: ['sawyer'] });
});

describe('a sawyer’s own pages', () => {
  test.each(pages)('%s is for sawyers with a confirmed address', async (path) => {
    expect((await visitor.get(path)).headers.get('location')).toBe(`/sign-in?next=${encodeURIComponent(path)}`);
    expect((await visitor.post(path)).headers.get('location')).toContain('/sign-in?next=');
    expect((await landowner.get(path)).status).toBe(403);
    expect((await unconfirmed.get(path)).status).toBe(403);
    const own = await sawyer.get(path);
    expect(own.status).toBe(200);
    expect(own.headers.get('cache-control')).toBe('private, no-store');
    expect(await own.text()).not.toMatch(/\sstyle="|\son[a-z]+="/);
  });

  test('say to whoever has not confirmed the address what is left, and where the letter is sent again', async () => {
    const left = await (await unconfirmed.get('/sawyer')).text();
    expect(left).toContain('One step is left');
    expect(left).toMatch(/<main[\s\S]*href="\/account"/);
    expect(await (await landowner.get('/sawyer')).text()).toContain('This is not yours to do');
  });

  test.each(['/sawyer/profile', '/sawyer/rates', '/sawyer/calendar', '/sawyer/bids'])('%s takes no post from a landowner or another site', async (path) => {
    expect((await landowner.post(path, { ...rateCardTyped(OAK_CARD), deed: 'renew-feed', 'bids[]': 'x' })).status).toBe(403);
    expect((await sawyer.request(path, { method: 'POST', headers: { origin: 'https://elsewhere.example' }, body: new URLSearchParams({ deed: 'renew-feed' }) })).status).toBe(403);
  });

  test('name every problem at its field and keep what was typed', async () => {
    const rates = await sawyer.post('/sawyer/rates', { ...rateCardTyped(OAK_CARD), basis: 'log-scale', logRule: '', priceWith: 'dear', taxPct: '5.5', taxLabel: '' });
    const page = await rates.text();
    expect(rates.status).toBe(422);
    for (const id of ['priceWith']) expect(page).toContain(`href="#f-${id}"`);
    expect(page).toContain('value="dear"');
    const profile = await sawyer.post('/sawyer/profile', { businessName: '', zip: '5466', travelMiles: 'far', noticeDays: '2', about: 'Forty years of <oak>' });
    const again = await profile.text();
    expect(profile.status).toBe(422);
    for (const id of ['businessName', 'zip', 'travelMiles', 'workingDays']) expect(again).toContain(`href="#f-${id}"`);
    expect(again).toContain('Forty years of &lt;oak&gt;');
    expect((await sawyer.post('/sawyer/profile', { businessName: 'Sid', zip: '00000', travelMiles: '40', noticeDays: '1', 'workingDays': ['1'] })).status).toBe(422);
  });

  test('lead from one to the next until all is set up', async () => {
    const profile = await sawyer.post('/sawyer/profile', { businessName: 'Sawdust & Daughter', zip: '54665', travelMiles: '45', noticeDays: '1', about: '', languages: 'English, Norwegian', 'services': ['edging', 'kiln'], 'workingDays': ['1', '2', '3', '4', '5', '6', '7'] });
    expect(profile.headers.get('location')).toBe('/sawyer/mill?done=profile');
    const mill = await sawyer.post('/sawyer/mill', { name: 'Wide band', kind: 'band', kerfIn: '3/32', largestLogIn: '30', widestCutIn: '26', widestBoardIn: '24', longestFt: '18', shortestFt: '4', paceBfPerHour: '200', turnsLogsBy: 'machine' });
    expect(mill.headers.get('location')).toBe('/sawyer/rates?done=mill');
    const rates = await sawyer.post('/sawyer/rates', rateCardTyped(OAK_CARD));
    expect(rates.headers.get('location')).toBe('/sawyer?done=set-up');
    expect(await (await sawyer.follow(rates)).text()).toContain('You are ready to bid.');
    expect(await (await sawyer.get('/sawyer/rates')).text()).toMatch(/name="resharpened"[^>]*value="10"/);
    expect((await sawyer.post('/sawyer/rates', rateCardTyped(OAK_CARD))).headers.get('location')).toBe('/sawyer/rates?done=saved');
    expect(await (await sawyer.get('/sawyer/profile')).text()).toMatch(/value="English, Norwegian"/);
  });
});

describe('the calendar', () => {
  test('takes days off and gives them back, only what was changed', async () => {
    const taken = await sawyer.post('/sawyer/calendar', { deed: 'range', from: day(10), until: day(12) });
    expect(taken.headers.get('location')).toMatch(/done=days&added=3&removed=0$/);
    expect(await (await sawyer.follow(taken)).text()).toContain('3 days taken off.');
    const month = `/sawyer/calendar?month=${day(11).slice(0, 7)}`;
    expect(await (await sawyer.get(month)).text()).toMatch(new RegExp(`name="shown\\[\\]" value="${day(11)}"`));
    const marked = await sawyer.post(month, { deed: 'mark', 'shown[]': [day(11), day(12)], 'off[]': [day(12), day(14)] });
    expect(marked.headers.get('location')).toMatch(/added=1&removed=1$/);
    await sawyer.post('/sawyer/calendar', { deed: 'range', from: day(40) });
    expect((await sawyer.post(month, { deed: 'move', what: 'off', from: day(40), to: day(41) })).headers.get('location')).toMatch(/done=moved/);
    expect((await sawyer.post(month, { deed: 'move', what: 'off', from: day(41), to: day(-1) })).status).toBe(422);
    expect((await sawyer.post(month, { deed: 'move', what: '999999', from: day(41), to: day(42) })).status).toBe(404);
    for (const form of [{ deed: 'move', what: 'x', from: day(3), to: day(4) }, { deed: 'move', what: 'off', from: day(3), to: '' }, { deed: 'range', from: '2026-02-30' }, { deed: 'range', from: day(9), until: day(8) }, { deed: 'bake' }, {}]) expect((await sawyer.post('/sawyer/calendar', form)).status).toBe(422);
  });

  test('is read at its secret address by anybody who has it, until it is renewed', async () => {
    expect((await sawyer.post('/sawyer/calendar', { deed: 'renew-feed' })).status).toBe(303);
    const addressIn = (page: string): string => /value="([^"]*\/calendar\/[\w-]{43}\.ics)"/.exec(page)?.[1] ?? '';
    const address = addressIn(await (await sawyer.get('/sawyer/calendar')).text());
    const answer = await visitor.get(address, { accept: '*/*' });
    expect(answer.status).toBe(200);
    expect(answer.headers.get('content-type')).toContain('text/calendar');
    expect(answer.headers.get('cache-control')).toBe('private, no-store');
    const text = await answer.text();
    expect(text).toContain('SUMMARY:Day off');
    expect(text).not.toMatch(/GEO:|sid@|54665/);
    await sawyer.post('/sawyer/calendar', { deed: 'renew-feed' });
    expect((await visitor.get(address)).status).toBe(404);
    for (const path of ['/calendar/x.ics', `/calendar/${'a'.repeat(43)}.ics`]) expect((await visitor.get(path)).status).toBe(404);
  });

  test('takes a calendar file and refuses what is none', async () => {
    const send = async (text: string | null, which = 'half'): Promise<Response> => {
      const body = new FormData();
      if (text !== null) body.set('file', new File([text], 'mine.ics', { type: 'text/calendar' }));
      body.set('which', which);
      return sawyer.request('/sawyer/calendar/import', { method: 'POST', body });
    };
    const whole = `BEGIN:VCALENDAR\r\nVERSION:2.0\r\nPRODID:x\r\nBEGIN:VEVENT\r\nUID:1\r\nDTSTAMP:20260101T000000Z\r\nSUMMARY:Private matter\r\nDTSTART;VALUE=DATE:${day(25).replaceAll('-', '')}\r\nEND:VEVENT\r\nEND:VCALENDAR\r\n`;
    const taken = await send(whole);
    expect(taken.headers.get('location')).toMatch(/added=1/);
    const page = await (await sawyer.get(`/sawyer/calendar?month=${day(25).slice(0, 7)}`)).text();
    expect(page).toMatch(/mine\.ics<\/strong>, a file: one day ahead is off\./);
    expect(page).toContain('in mine.ics');
    expect(page).not.toContain('Private matter');
    const month = `/sawyer/calendar?month=${day(25).slice(0, 7)}`;
    expect((await sawyer.post(month, { deed: 'busy', day: day(25), answer: 'open' })).headers.get('location')).toMatch(/done=open/);
    const opened = await (await sawyer.get(month)).text();
    expect(opened).toContain('Open all the same');
    expect(opened).toContain('busy in mine.ics');
    for (const form of [{ deed: 'busy', day: day(25), answer: 'sell' }, { deed: 'busy', day: 'x', answer: 'open' }, { deed: 'forget-busy', by: 'pigeon' }]) expect((await sawyer.post(month, form)).status).toBe(422);
    expect((await sawyer.post(month, { deed: 'busy', day: day(26), answer: 'open' })).status).toBe(409);
    const address = async (typed: string): Promise<Response> => {
      const body = new FormData();
      body.set('address', typed);
      body.set('which', 'half');
      return sawyer.request('/sawyer/calendar/import', { method: 'POST', body });
    };
    for (const typed of [origin, 'http://127.0.0.1/mine.ics', 'http://[::1]/mine.ics', 'webcal://localhost/mine.ics', 'ftp://calendar.example/mine.ics', 'nonsense']) {
      const refused = await address(typed);
      expect(refused.status).toBe(422);
      expect(await refused.text()).toContain('href="#f-address"');
    }
    for (const [text, which] of [[null, 'half'], ['hello', 'half'], [whole, 'some']] as const) expect((await send(text, which)).status).toBe(422);
    expect((await send('x'.repeat(1_100_000))).status).toBe(413);
  });
});

describe('a trip', () => {
  test('is planned for a day: without one the page asks for it first, from wherever one comes', async () => {
    const home = await (await sawyer.get('/sawyer')).text();
    for (const path of ['/sawyer/trips', '/sawyer/searches']) expect(home).toContain(`href="${path}"`);
    for (const query of ['', '?day=', '?day=2026-02-30', '?stop=1001']) {
      const page = await (await sawyer.get(`/sawyer/trips/new${query}`)).text();
      expect(page).toContain('Choose a day first');
      expect(page).not.toContain('type="checkbox"');
    }
    expect(await (await sawyer.get(`/sawyer/trips/new?day=${day(9)}`)).text()).toContain('Choose the places');
  });
});

describe('messages kept ready', () => {
  test('are kept and deleted without a script', async () => {
    const wrong = await sawyer.post('/sawyer/messages', { id: '', name: '', body: 'I bring the <loader>.' });
    expect(wrong.status).toBe(422);
    expect(await wrong.text()).toContain('I bring the &lt;loader&gt;.');
    expect((await sawyer.post('/sawyer/messages', { id: '', name: 'Usual', body: 'I bring the loader.' })).status).toBe(303);
    const page = await (await sawyer.get('/sawyer/messages')).text();
    const id = /\?delete=([0-9a-f-]{36})/.exec(page)?.[1] ?? '';
    expect((await landowner.post(`/sawyer/messages?delete=${id}`)).status).toBe(403);
    expect((await sawyer.post('/sawyer/messages?delete=nonsense')).status).toBe(404);
    expect((await sawyer.post(`/sawyer/messages?delete=${id}`)).status).toBe(303);
    expect(await (await sawyer.get('/sawyer/messages')).text()).toContain('None yet');
  });
});

describe('the desk', () => {
  test('answers strange addresses and posts calmly', async () => {
    expect((await sawyer.get('/sawyer/bids?show=%00&sort=1&words=%25')).status).toBe(200);
    expect((await sawyer.post('/sawyer/bids', {})).status).toBe(422);
    expect((await sawyer.post('/sawyer/bids', { 'bids[]': 'nonsense', sure: 'yes' })).status).toBe(404);
    expect((await sawyer.post('/sawyer/bids', { 'bids[]': '00000000-0000-4000-8000-000000000000', sure: 'yes' })).status).toBe(404);
  });
});
