import { describe, expect, inject, it } from 'vitest';
import { listingsAnswer } from '~/schemas/listings.ts';

const origin = inject('origin');
const get = (path: string, accept = 'text/html'): Promise<Response> => fetch(new URL(path, origin), { headers: { accept } });

describe('GET /api/listings', () => {
  it('answers in the shape of its contract', async () => {
    const answer = await get('/api/listings?zip=54665&radiusMi=40&sort=distance&limit=5', 'application/json');
    expect(answer.status).toBe(200);
    expect(listingsAnswer.strict().safeParse(await answer.json()).error).toBeUndefined();
  });

  it.each(['zip=5466', 'zip=00000', 'lat=43', 'radiusMi=40', 'zip=54665&radiusMi=501', 'zip=54665&species=nope', 'zip=54665&zip=54601', 'zip=54665&limit=0', 'zip=54665&cursor=zzz', 'zip=54665&radius=40', 'lat=43&lng=-90&sort=price'])(
    'refuses ?%s with the field named',
    async (query) => {
      const answer = await get(`/api/listings?${query}`, 'application/json');
      expect(answer.status).toBe(422);
      expect(answer.headers.get('content-type')).toContain('application/problem+json');
      const { errors } = (await answer.json()) as { errors: { path: string; message: string }[] };
      expect(errors.length).toBeGreaterThan(0);
      for (const { path, message } of errors) expect([path, message.endsWith('.')]).toEqual([expect.stringMatching(/./), true]);
    },
  );
});

describe('public pages', () => {
  it.each([
    ['/', 'Get it sawn'],
    ['/?species=white-oak&smallEnd=18&length=12', '170 bf'],
    ['/logs', 'Logs near you'],
    ['/logs?zip=54665&radiusMi=40', 'within 40 miles'],
    ['/logs?zip=nowhere&species=purple', 'Write the five digits of a ZIP code.'],
    ['/sawyers?zip=54665', 'Sawyers near you'],
    ['/sawyers?lat=43.56&lng=-90.89', 'Measured from where your device is.'],
    ['/how-it-works', 'held until you sign the tally'],
    ['/safety', 'Usual practice; check the rule that applies to you.'],
    ['/privacy', 'a coarse grid of about a mile'],
    ['/terms', 'not legal advice'],
  ])('%s is there for everybody', async (path, words) => {
    const answer = await get(path);
    expect(answer.status).toBe(200);
    const page = await answer.text();
    expect(page).toContain(words);
    expect(page).toContain('<h1');
    expect(page).toMatch(/<title>[^<]+<\/title>/);
    expect(page).toMatch(/<meta name="description" content="[^"]{30,}"/);
    expect(page.toLowerCase()).not.toContain('escrow');
  });

  it.each(['/no/such/page', '/sawyers/nobody', '/sawyers/00000000-0000-4000-8000-000000000000'])('%s is not found, with a way on', async (path) => {
    const answer = await get(path);
    expect(answer.status).toBe(404);
    expect(await answer.text()).toMatch(/<h1[^>]*>/);
  });

  it('has no inline style and lets no inline script run', async () => {
    const answer = await get('/logs?zip=54665');
    const policy = answer.headers.get('content-security-policy') ?? '';
    expect(policy).toMatch(/script-src 'self'/);
    expect(policy).not.toContain('unsafe-inline');
    expect(await answer.text()).not.toMatch(/\sstyle="|\son[a-z]+="/);
  });

  it('tells search engines what there is', async () => {
    expect(await (await get('/robots.txt')).text()).toContain(`Sitemap: ${origin}/sitemap.xml`);
    expect(await (await get('/sitemap.xml')).text()).toContain(`<loc>${origin}/logs</loc>`);
  });
});
