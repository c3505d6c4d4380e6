import type { APIRoute } from 'astro';
import { now } from '~/server/clock.ts';
import { signedOut } from '~/server/errors.ts';
import { bookingCalendar } from '~/server/queries/booking-calendar.ts';

/** The booking's days as a calendar file, for its two sides. */
export const GET: APIRoute = async ({ locals, params }) => {
  if (!locals.viewer) throw signedOut();
  const ics = await bookingCalendar(locals.viewer, Number(params['number']), now());
  return new Response(ics, { headers: { 'content-type': 'text/calendar; charset=utf-8', 'cache-control': 'private, no-store', 'content-disposition': `attachment; filename="booking-${Number(params['number'])}.ics"` } });
};
