import type { AccessWorld } from '../support/access-world.ts';

export type Method = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';

/**
 * A route and, for each method, what is answered to: a visitor, another landowner, the owner, another sawyer, the chosen sawyer, a
 * moderator without and one with the second factor. `in` is the way to the sign-in page. Unsafe methods are sent with an empty form
 * or body unless `body` gives one, so whoever passes is told what is missing (422) and nothing happens.
 */
type Route = { readonly path: (world: AccessWorld) => string; readonly body?: (world: AccessWorld) => Readonly<Record<string, string>> } & { readonly [method in Method]?: string };

const at = (path: string) => (): string => path;
const ALL = '200 200 200 200 200 200 200';
const SIGNED_IN = 'in 200 200 200 200 200 200';
const SIGNED_IN_POST = 'in 422 422 422 422 422 422';
const SAWYERS = 'in 403 403 200 200 403 403';
const SAWYERS_POST = 'in 403 403 422 422 403 403';
const DESK = 'in 403 403 403 403 403 200';
const DESK_POST = 'in 403 403 403 403 403 422';
const API_POST = '401 422 422 422 422 422 422';
const NOBODY = '404 404 404 404 404 404 404';
const PARTIES = 'in 404 200 404 200 404 200';
const nobody = '00000000-0000-4000-8000-000000000000';

export const routes: Readonly<Record<string, Route>> = {
  // For everybody.
  'index.astro': { path: at('/'), GET: ALL },
  'how-it-works.astro': { path: at('/how-it-works'), GET: ALL },
  'safety.astro': { path: at('/safety'), GET: ALL },
  'privacy.astro': { path: at('/privacy'), GET: ALL },
  'terms.astro': { path: at('/terms'), GET: ALL },
  'logs.astro': { path: at('/logs?zip=54665'), GET: ALL },
  'day.astro': { path: at('/day'), GET: ALL },
  'estimator/index.astro': { path: at('/estimator'), GET: ALL },
  'estimator/stem.astro': { path: at('/estimator/stem'), GET: ALL },
  'estimator/logs.pdf.ts': { path: at('/estimator/logs.pdf'), POST: '422 422 422 422 422 422 422' },
  'sawyers/index.astro': { path: at('/sawyers?zip=54665'), GET: ALL },
  'sawyers/[id].astro': { path: ({ sawyer }) => `/sawyers/${sawyer}`, GET: ALL },
  'listings/[number]/index.astro': { path: ({ open }) => `/listings/${open}`, GET: ALL, POST: ALL },
  'robots.txt.ts': { path: at('/robots.txt'), GET: ALL },
  'sitemap.xml.ts': { path: at('/sitemap.xml'), GET: ALL },
  '404.astro': { path: at('/no/such/page'), GET: NOBODY },
  '500.astro': { path: at('/500'), GET: '500 500 500 500 500 500 500' },
  'refused.astro': { path: at('/refused'), GET: NOBODY },

  // Signing in and up.
  'sign-up.astro': { path: at('/sign-up'), GET: '200 303 303 303 303 303 303', POST: '422 303 303 303 303 303 303' },
  'sign-in/index.astro': { path: at('/sign-in'), GET: '200 303 303 303 303 303 303', POST: '422 422 422 422 422 422 422' },
  'sign-in/second-factor.astro': { path: at('/sign-in/second-factor'), GET: '303 303 303 303 303 200 303', POST: '303 303 303 303 303 422 303' },
  'forgot-password.astro': { path: at('/forgot-password'), GET: ALL, POST: '422 422 422 422 422 422 422' },
  'reset-password/[token].astro': { path: at('/reset-password/nonsense'), GET: NOBODY, POST: NOBODY },
  'confirm-email/[token].astro': { path: at('/confirm-email/nonsense'), GET: NOBODY, POST: NOBODY },
  'searches/stop/[token].astro': { path: at('/searches/stop/nonsense'), GET: NOBODY, POST: NOBODY },

  // One's own account.
  'account/index.astro': { path: at('/account'), GET: SIGNED_IN, POST: SIGNED_IN_POST },
  'account/security.astro': { path: at('/account/security?do=password'), GET: SIGNED_IN, POST: SIGNED_IN_POST },
  'account/sessions.astro': { path: at('/account/sessions'), GET: SIGNED_IN, POST: SIGNED_IN_POST },
  'account/data/index.astro': { path: at('/account/data?do=close'), GET: SIGNED_IN, POST: SIGNED_IN_POST },
  'account/data/skidway.json.ts': { path: at('/account/data/skidway.json'), GET: '401 200 200 200 200 200 200' },
  'account/payments/statement.[format].ts': { path: at('/account/payments/statement.csv?period=2026'), GET: 'in 200 200 200 200 200 200' },
  'account/payouts/statement.[format].ts': { path: at('/account/payouts/statement.csv?period=2026'), GET: 'in 403 403 200 200 403 403' },
  'account/payments.astro': { path: at('/account/payments'), GET: SIGNED_IN },
  'account/payouts.astro': { path: at('/account/payouts'), GET: SAWYERS, POST: 'in 403 403 200 200 403 403' },

  // A sawyer's own.
  'sawyer/index.astro': { path: at('/sawyer'), GET: SAWYERS },
  'sawyer/mill.astro': { path: at('/sawyer/mill'), GET: SAWYERS, POST: SAWYERS_POST },
  'sawyer/rates.astro': { path: at('/sawyer/rates'), GET: SAWYERS, POST: SAWYERS_POST },
  'sawyer/profile.astro': { path: at('/sawyer/profile'), GET: SAWYERS, POST: SAWYERS_POST },
  'sawyer/certificate.astro': { path: at('/sawyer/certificate'), GET: SAWYERS, POST: SAWYERS_POST },
  'sawyer/bids.astro': { path: at('/sawyer/bids'), GET: SAWYERS, POST: SAWYERS_POST },
  'sawyer/calendar/index.astro': { path: at('/sawyer/calendar'), GET: SAWYERS, POST: SAWYERS_POST },
  'sawyer/calendar/import.astro': { path: at('/sawyer/calendar/import'), GET: SAWYERS, POST: SAWYERS_POST },
  'calendar/[secret].ics.ts': { path: at('/calendar/nonsense.ics'), GET: NOBODY },
  'sawyer/messages.astro': { path: at('/sawyer/messages'), GET: SAWYERS, POST: SAWYERS_POST },
  'sawyer/trips/index.astro': { path: at('/sawyer/trips'), GET: SAWYERS },
  'sawyer/trips/new.astro': { path: at('/sawyer/trips/new'), GET: SAWYERS, POST: SAWYERS_POST },
  'sawyer/days/[date].astro': { path: at('/sawyer/days/2030-05-04'), GET: SAWYERS },
  'sawyer/searches/index.astro': { path: at('/sawyer/searches'), GET: SAWYERS, POST: SAWYERS_POST },
  'sawyer/searches/new.astro': { path: at('/sawyer/searches/new'), GET: SAWYERS, POST: SAWYERS_POST },

  // Listings and bids.
  'listings/index.astro': { path: at('/listings'), GET: SIGNED_IN },
  'listings/new.astro': { path: at('/listings/new'), GET: ALL, POST: '401 303 303 303 303 303 303' },
  'listings/[number]/edit.astro': { path: ({ open }) => `/listings/${open}/edit`, GET: 'in 404 200 404 404 404 404', POST: '401 404 409 404 404 404 404' },
  'listings/[number]/withdraw.astro': { path: ({ spare }) => `/listings/${spare}/withdraw`, GET: 'in 404 200 404 404 404 404', POST: 'in 404 303 404 404 404 404' },
  'listings/[number]/bid/index.astro': { path: ({ open }) => `/listings/${open}/bid`, GET: 'in 403 403 200 200 403 403', POST: 'in 403 403 422 422 403 403' },
  'listings/[number]/bid/withdraw.astro': { path: ({ open }) => `/listings/${open}/bid/withdraw`, GET: 'in 403 403 409 200 403 403', POST: 'in 403 403 409 303 403 403' },

  'listings/[number]/bids/index.astro': { path: ({ open }) => `/listings/${open}/bids`, GET: 'in 404 200 404 404 404 200' },
  'listings/[number]/bids/[bid].astro': { path: ({ open, bid }) => `/listings/${open}/bids/${bid}`, GET: 'in 404 200 404 404 404 200', POST: 'in 404 422 404 404 404 422' },
  'listings/[number]/boards.astro': { path: ({ open }) => `/listings/${open}/boards`, GET: ALL },

  // Bookings.
  'bookings/index.astro': { path: at('/bookings'), GET: SIGNED_IN },
  'bookings/[number]/index.astro': { path: ({ queried }) => `/bookings/${queried}`, GET: PARTIES, POST: 'in 404 409 404 409 404 403' },
  'bookings/[number]/agreement.astro': { path: ({ queried }) => `/bookings/${queried}/agreement`, GET: PARTIES },
  'bookings/[number]/cut-sheet.astro': { path: ({ queried }) => `/bookings/${queried}/cut-sheet`, GET: PARTIES },
  'bookings/[number]/no-show.astro': { path: ({ queried }) => `/bookings/${queried}/no-show`, GET: PARTIES, POST: 'in 404 422 404 422 404 422' },
  'bookings/[number]/invitation.ics.ts': { path: ({ queried }) => `/bookings/${queried}/invitation.ics`, GET: PARTIES },
  'bookings/[number]/pay.astro': { path: ({ agreed }) => `/bookings/${agreed}/pay`, GET: 'in 404 200 404 403 404 403', POST: 'in 404 303 404 403 404 403' },
  'bookings/[number]/paid.astro': { path: ({ agreed }) => `/bookings/${agreed}/paid`, GET: 'in 404 200 404 403 404 403' },
  'bookings/[number]/cancel.astro': { path: ({ agreed }) => `/bookings/${agreed}/cancel`, GET: 'in 404 200 404 200 404 404', POST: 'in 404 422 404 422 404 404' },
  'bookings/[number]/tally.astro': { path: ({ queried }) => `/bookings/${queried}/tally`, GET: 'in 404 303 404 200 404 403', POST: 'in 404 403 404 409 404 403' },
  'bookings/[number]/sign.astro': { path: ({ queried }) => `/bookings/${queried}/sign`, GET: PARTIES, POST: 'in 404 422 404 422 404 422' },
  'bookings/[number]/tally.pdf.ts': { path: ({ queried }) => `/bookings/${queried}/tally.pdf`, GET: PARTIES },
  'bookings/[number]/after.astro': { path: ({ queried }) => `/bookings/${queried}/after`, GET: PARTIES, POST: 'in 404 422 404 422 404 422' },
  'bookings/[number]/photographs.astro': { path: ({ queried }) => `/bookings/${queried}/photographs`, GET: PARTIES, POST: 'in 404 422 404 422 404 422' },
  'bookings/[number]/share.astro': { path: ({ queried }) => `/bookings/${queried}/share`, GET: 'in 404 409 404 409 404 409', POST: 'in 404 409 404 409 404 409' },
  'jobs/[number].astro': { path: ({ queried }) => `/jobs/${queried}`, GET: NOBODY },
  'bookings/[number]/decide.astro': { path: ({ queried }) => `/bookings/${queried}/decide`, GET: DESK, POST: DESK_POST },
  'bookings/[number]/receipt.pdf.ts': { path: ({ queried }) => `/bookings/${queried}/receipt.pdf`, GET: 'in 404 404 404 404 404 404' },
  'bookings/[number]/receipt.astro': { path: ({ queried }) => `/bookings/${queried}/receipt`, GET: 'in 404 404 404 404 404 404', POST: 'in 403 403 403 409 403 403' },
  'bookings/[number]/review.astro': { path: ({ queried }) => `/bookings/${queried}/review`, GET: 'in 404 409 404 409 404 409', POST: 'in 404 409 404 409 404 409' },

  'trips/[number].astro': { path: at('/trips/999999'), GET: 'in 404 404 404 404 404 404', POST: 'in 404 404 404 404 404 404' },

  // Messages and reports.
  'messages/index.astro': { path: at('/messages'), GET: SIGNED_IN },
  'messages/[id].astro': { path: ({ conversation }) => `/messages/${conversation}`, GET: 'in 404 200 404 200 404 404', POST: 'in 404 422 404 422 404 404' },
  'messages/about/[number].ts': { path: ({ open }) => `/messages/about/${open}`, POST: 'in 403 403 303 303 403 403' },
  'report/[thing]/[id].astro': { path: ({ message }) => `/report/message/${message}`, GET: 'in 404 200 404 404 404 404', POST: 'in 404 422 404 404 404 404' },

  // The desk: moderators with a second factor given in this session.
  'desk/index.astro': { path: at('/desk'), GET: DESK },
  'desk/events.astro': { path: at('/desk/events'), GET: DESK },
  'desk/listings/index.astro': { path: at('/desk/listings'), GET: DESK },
  'desk/listings/[number].astro': { path: ({ open }) => `/desk/listings/${open}`, GET: DESK, POST: DESK_POST },
  'desk/bookings/index.astro': { path: at('/desk/bookings'), GET: DESK },
  'desk/bookings/[number].astro': { path: ({ agreed }) => `/desk/bookings/${agreed}`, GET: DESK, POST: DESK_POST },
  'desk/accounts/index.astro': { path: at('/desk/accounts'), GET: DESK },
  'desk/accounts/[id]/index.astro': { path: ({ owner }) => `/desk/accounts/${owner}`, GET: DESK, POST: DESK_POST },
  'desk/accounts/[id]/certificate.ts': { path: ({ sawyer }) => `/desk/accounts/${sawyer}/certificate`, GET: '401 403 403 403 403 403 404' },
  'desk/money/index.astro': { path: at('/desk/money?do=retry'), GET: DESK, POST: 'in 403 403 403 403 403 404' },
  'desk/money/adjust.astro': { path: at('/desk/money/adjust'), GET: DESK, POST: DESK_POST },
  'desk/reports/index.astro': { path: at('/desk/reports'), GET: DESK },
  'desk/reports/[id].astro': { path: ({ report }) => `/desk/reports/${report}`, GET: DESK, POST: DESK_POST },

  // Photographs.
  'photos/[id]/[rendition].ts': { path: at(`/photos/${nobody}/small.webp`), GET: NOBODY },
  'api/photos/index.ts': { path: at(`/api/photos?listingId=${nobody}`), GET: '401 404 404 404 404 404 404', POST: API_POST },
  'api/photos/order.ts': { path: at('/api/photos/order'), PUT: API_POST },
  'api/photos/[id]/index.ts': { path: at(`/api/photos/${nobody}`), PATCH: '401 404 404 404 404 404 404', DELETE: '401 404 404 404 404 404 404' },
  'api/photos/[id]/arrived.ts': { path: at(`/api/photos/${nobody}/arrived`), POST: '401 404 404 404 404 404 404' },
  'api/work-photos/index.ts': { path: at('/api/work-photos'), GET: '401 403 403 200 200 403 403', POST: API_POST },
  'api/work-photos/order.ts': { path: at('/api/work-photos/order'), PUT: API_POST },

  // The rest of the interface for programs.
  'api/species.ts': { path: at('/api/species'), GET: ALL },
  'api/estimate.ts': { path: at('/api/estimate'), POST: '422 422 422 422 422 422 422' },
  'api/tally.ts': { path: at('/api/tally'), POST: '422 422 422 422 422 422 422' },
  'api/tree-volume.ts': { path: at('/api/tree-volume'), POST: '422 422 422 422 422 422 422' },
  'api/drying.ts': { path: at('/api/drying'), POST: '422 422 422 422 422 422 422' },
  'api/saw-plan.ts': { path: at('/api/saw-plan'), POST: '422 422 422 422 422 422 422' },
  'api/cut-list.ts': { path: at('/api/cut-list'), POST: '422 422 422 422 422 422 422' },
  'api/quoting-practice.ts': { path: at('/api/quoting-practice?zip=54665'), GET: ALL },
  'api/places.ts': { path: at('/api/places?zip=54665'), GET: ALL },
  'api/tiles/[z]/[x]/[y].ts': { path: at('/api/tiles/7/31/46?species=white-oak'), GET: ALL },
  'api/listings/index.ts': { path: at('/api/listings?zip=54665&radiusMi=40'), GET: ALL },
  'api/listings/draft.ts': { path: at('/api/listings/draft'), POST: API_POST },
  'api/bookings/[number]/tally.ts': { path: ({ queried }) => `/api/bookings/${queried}/tally`, GET: '401 404 200 404 200 404 200', PUT: API_POST },
  'api/bookings/[number]/photos.ts': { path: ({ queried }) => `/api/bookings/${queried}/photos`, POST: API_POST },
  'api/bookings/[number]/cut-sheet.ts': { path: ({ queried }) => `/api/bookings/${queried}/cut-sheet`, GET: '401 404 200 404 200 404 200' },
  'api/day.ts': { path: at('/api/day'), GET: '401 200 200 200 200 200 200' },
  'api/health/index.ts': { path: at('/api/health'), GET: ALL },
  'api/health/live.ts': { path: at('/api/health/live'), GET: ALL },
  'api/openapi.json.ts': { path: at('/api/openapi.json'), GET: ALL },
  'api/webhooks/payments.ts': { path: at('/api/webhooks/payments'), POST: '422 422 422 422 422 422 422' },

  // Last, because it signs everybody out.
  'sign-out.ts': { path: at('/sign-out'), POST: '303 303 303 303 303 303 303' },
};
