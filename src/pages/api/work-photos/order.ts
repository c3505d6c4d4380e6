import { orderWorkPhotosSchema } from '~/schemas/photo.ts';
import { orderWorkPhotos } from '~/server/commands/order-photos.ts';
import { accountEndpoint } from '~/server/http/endpoint.ts';

export const PUT = accountEndpoint({ body: orderWorkPhotosSchema, run: async ({ viewer, body }) => ({ photos: await orderWorkPhotos(viewer, body) }) });
