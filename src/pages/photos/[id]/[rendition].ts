import { parseRendition, renditionTypes } from '~/domain/photo.ts';
import { photoId } from '~/schemas/photo.ts';
import { notFound } from '~/server/errors.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';
import { openRendition } from '~/server/open-rendition.ts';
import { photoAudience } from '~/server/queries/photos.ts';

/**
 * A photograph in one of its sizes, while the reader may see it. Its bytes never change, so a cache may keep what everyone sees
 * for an hour and ask again after that; what only some see stays in their own browser.
 */
export const GET = openEndpoint({
  async run({ params, viewer, context }) {
    const wanted = parseRendition(params['rendition'] ?? '');
    const id = photoId(params['id']);
    if (!wanted) throw notFound('photograph');
    const audience = await photoAudience(viewer, id);
    const etag = `"${id}-${wanted.size}-${wanted.format}"`;
    const headers = { etag, 'cache-control': audience === 'everyone' ? 'public, max-age=3600' : 'private, max-age=300', 'content-type': renditionTypes[wanted.format] };
    const known = (context.request.headers.get('if-none-match') ?? '').split(',').some((one) => one.trim().replace(/^W\//, '') === etag);
    if (known) return new Response(null, { status: 304, headers });
    const { body, bytes } = await openRendition(id, wanted.size, wanted.format);
    return new Response(body, { headers: { ...headers, 'content-length': String(bytes) } });
  },
});
