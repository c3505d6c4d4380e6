import type { APIRoute } from 'astro';
import { paths } from '~/domain/paths.ts';
import { now } from '~/server/clock.ts';
import { publicThings } from '~/server/queries/sitemap.ts';

const fixed = [paths.home, paths.howItWorks, paths.logs, paths.sawyers, paths.estimator, paths.stem, paths.safety, paths.privacy, paths.terms];

/** The sitemap: the fixed public pages, open listings, public sawyers and jobs shown around. */
export const GET: APIRoute = async ({ locals }) => {
  const { listings, sawyers, jobs } = await publicThings(now());
  const addresses = [...fixed, ...listings.map(paths.listing), ...sawyers.map(paths.sawyer), ...jobs.map(paths.job)];
  const urls = addresses.map((path) => `  <url><loc>${new URL(path, locals.origin).href}</loc></url>`).join('\n');
  const body = `<?xml version="1.0" encoding="UTF-8"?>\n<urlset xmlns="http://www.sitemaps.org/schemas/sitemap/0.9">\n${urls}\n</urlset>\n`;
  return new Response(body, { headers: { 'content-type': 'application/xml; charset=utf-8', 'cache-control': 'public, max-age=3600' } });
};
