import { orderPhotosSchema } from '~/schemas/photo.ts';
import { orderPhotos } from '~/server/commands/order-photos.ts';
import { accountEndpoint } from '~/server/http/endpoint.ts';

export const PUT = accountEndpoint({ body: orderPhotosSchema, run: async ({ viewer, body }) => ({ photos: await orderPhotos(viewer, body) }) });
