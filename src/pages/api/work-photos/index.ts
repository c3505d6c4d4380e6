import { beginWorkPhotoSchema } from '~/schemas/photo.ts';
import { beginWorkPhoto } from '~/server/commands/begin-work-photo.ts';
import { accountEndpoint } from '~/server/http/endpoint.ts';
import { ownWorkPhotos } from '~/server/queries/photos.ts';

export const GET = accountEndpoint({ run: async ({ viewer }) => ({ photos: await ownWorkPhotos(viewer) }) });

export const POST = accountEndpoint({ body: beginWorkPhotoSchema, run: ({ viewer, body, at }) => beginWorkPhoto(viewer, body, at) });
