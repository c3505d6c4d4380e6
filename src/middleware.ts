import { defineMiddleware } from 'astro:middleware';

export const onRequest = defineMiddleware(async (context, next) => {
  context.locals.viewer = null;
  if (context.isPrerendered) {
    // Made at build time: there is no visitor, no environment and no database, so nothing of the server is loaded.
    context.locals.requestId = '';
    context.locals.origin = context.url.origin;
    return next();
  }
  const request = await import('./server/http/on-request.ts');
  return request.onRequest(context, next);
});
