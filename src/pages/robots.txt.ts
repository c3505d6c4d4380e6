import type { APIRoute } from 'astro';
import { paths } from '~/domain/paths.ts';

/** Public pages are open to search engines; everything behind a sign-in is not worth their time. */
export const GET: APIRoute = ({ locals }) => {
  const closed = [paths.account, paths.bookings, paths.messages, paths.desk, paths.sawyerHome + '/', paths.newListing, '/api/', '/report/'];
  const lines = ['User-agent: *', ...closed.map((path) => `Disallow: ${path}`), '', `Sitemap: ${new URL('/sitemap.xml', locals.origin).href}`, ''];
  return new Response(lines.join('\n'), { headers: { 'content-type': 'text/plain; charset=utf-8', 'cache-control': 'public, max-age=3600' } });
};
