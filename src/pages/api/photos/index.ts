import { beginPhotoSchema, listPhotosSchema } from '~/schemas/photo.ts';
import { beginPhotoUpload } from '~/server/commands/begin-photo-upload.ts';
import { accountEndpoint } from '~/server/http/endpoint.ts';
import { photosForOwner } from '~/server/queries/photos.ts';

export const GET = accountEndpoint({ query: listPhotosSchema, run: async ({ viewer, query }) => ({ photos: await photosForOwner(viewer, query.listingId) }) });

export const POST = accountEndpoint({ body: beginPhotoSchema, run: ({ viewer, body, at }) => beginPhotoUpload(viewer, body, at) });
