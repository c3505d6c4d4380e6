import { defineMiddleware } from 'astro:middleware';

// Asked for once: where modules are looked up by a loader of another thread, every dynamic import waits for it.
let asked: Promise<typeof import('./server/http/on-request.ts')> | undefined;

export const onRequest = defineMiddleware(async (context, next) => {
  context.locals.viewer = null;
  if (context.isPrerendered) {
    // Made at build time: there is no visitor, no environment and no database, so nothing of the server is loaded.
    context.locals.requestId = '';
    context.locals.origin = context.url.origin;
    return next();
  }
  const request = await (asked ??= import('./server/http/on-request.ts'));
  return request.onRequest(context, next);
});
