import type { APIContext, MiddlewareNext } from 'astro';
import { paths } from '~/domain/paths.ts';
import { env } from '../env.ts';
import { Refusal } from '../errors.ts';
import { log } from '../log.ts';
import { sessionCookieName, viewerOf } from '../sessions.ts';
import { statusOf } from './problem.ts';
import { settledPolicy } from './shells.ts';

/** The public calculators and the map tiles take no notice of cookies, so they also need no session look-up. */
const cookieless = /^\/api\/(species|estimate|tally|tree-volume|drying|saw-plan|cut-list|tiles|health|openapi\.json|webhooks)\b/;

/** Puts the real origins where the build left stand-ins for them. */
function settlePolicy(response: Response): Response {
  const policy = response.headers.get('content-security-policy');
  if (policy) {
    const settled = settledPolicy(policy, env());
    // Said here and not in the build: in the meta tag of a page made at build time it would be ignored with a complaint
    // (there our front's X-Frame-Options holds).
    // A refusal's page comes through here twice: once by itself, once as the answer of the page that refused.
    if (!settled.includes('frame-ancestors')) response.headers.set('content-security-policy', `${settled.replace(/;\s*$/, '')}; frame-ancestors 'none'`);
  }
  return response;
}

/** Every request to a page or endpoint that is made on demand: who asks, the answer's policy, and refusals as pages. */
export async function onRequest(context: APIContext, next: MiddlewareNext): Promise<Response> {
  context.locals.requestId = context.request.headers.get('x-request-id') ?? '';
  context.locals.origin = env().ORIGIN;

  if (!cookieless.test(context.routePattern)) {
    const { viewer, renew } = await viewerOf(context.cookies.get(sessionCookieName)?.value);
    context.locals.viewer = viewer;
    // A photograph may be kept by any cache for everyone: one person's cookie must not be kept with it.
    if (renew && !context.routePattern.startsWith('/photos/')) context.cookies.set(renew.name, renew.value, renew.attributes);
  }

  try {
    const response = await next();
    if (context.locals.viewer && !response.headers.has('cache-control')) response.headers.set('cache-control', 'private, no-store');
    return settlePolicy(response);
  } catch (error) {
    if (!(error instanceof Refusal)) {
      log().error({ err: error, requestId: context.locals.requestId, route: context.routePattern }, 'page failed');
      throw error;
    }
    if (error.kind === 'signedOut') return context.redirect(`${paths.signIn}?next=${encodeURIComponent(context.url.pathname + context.url.search)}`, 303);
    context.locals.refusal = { status: statusOf(error), message: error.message };
    // A request of its own: a form that was read before the refusal cannot be copied into the rewritten request.
    return settlePolicy(await context.rewrite(new Request(new URL('/refused', context.url), { headers: context.request.headers })));
  }
}
