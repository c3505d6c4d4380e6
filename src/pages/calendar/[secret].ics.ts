import type { APIRoute } from 'astro';
import { now } from '~/server/clock.ts';
import { calendarFeed } from '~/server/queries/calendar-feed.ts';

/** A sawyer's calendar at its secret address, for calendars that subscribe to it. No sign-in: the address is the key. */
export const GET: APIRoute = async ({ params }) => {
  const ics = await calendarFeed(params['secret'] ?? '', now());
  return new Response(ics, { headers: { 'content-type': 'text/calendar; charset=utf-8', 'cache-control': 'private, no-store', 'x-robots-tag': 'noindex', 'referrer-policy': 'no-referrer' } });
};
