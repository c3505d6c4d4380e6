import { clientsClaim } from 'workbox-core';
import { cleanupOutdatedCaches, precacheAndRoute, type PrecacheEntry } from 'workbox-precaching';
import { NavigationRoute, registerRoute } from 'workbox-routing';

/** The part of a service worker's global that is used here; the build puts the list of files in. */
declare const self: {
  readonly __WB_MANIFEST: (string | PrecacheEntry)[];
  readonly location: Location;
  readonly clients: { claim: () => Promise<void> };
  addEventListener: (type: 'message', listener: (event: MessageEvent<unknown>) => void) => void;
  skipWaiting: () => Promise<void>;
};

/** How long a booking's page may take before what is kept on the phone is shown in its place. */
const PATIENCE_MS = 8_000;

// Only the shells and their files are kept: the same for everybody. No page made for somebody is ever put in a cache.
cleanupOutdatedCaches();
precacheAndRoute(self.__WB_MANIFEST, { ignoreURLParametersMatching: [/.*/] });
clientsClaim();

self.addEventListener('message', ({ data }) => {
  if (typeof data !== 'object' || data === null || !('type' in data)) return;
  if (data.type === 'SKIP_WAITING') void self.skipWaiting();
  if (data.type === 'CLAIM') void self.clients.claim();
});

/** Where a page that cannot be had leads: a booking to what is kept of it, everything else to the day with a word about it. */
function instead(url: URL): Response {
  const booking = /^\/bookings\/(\d+)(\/(tally|sign))?\/?$/.exec(url.pathname)?.[1];
  return Response.redirect(new URL(booking ? `/day#${booking}` : `/day?wanted=${encodeURIComponent(url.pathname)}`, self.location.origin), 302);
}

registerRoute(
  new NavigationRoute(
    async ({ request, url }) => {
      const patient = url.pathname.startsWith('/bookings') ? AbortSignal.timeout(PATIENCE_MS) : undefined;
      try {
        return await fetch(request, patient ? { signal: patient } : {});
      } catch {
        return instead(url);
      }
    },
    { denylist: [/^\/api\//, /\.(ics|pdf|csv)$/] },
  ),
);
