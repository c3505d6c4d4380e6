import { photoId } from '~/schemas/photo.ts';
import { finishPhotoUpload } from '~/server/commands/finish-photo-upload.ts';
import { accountEndpoint } from '~/server/http/endpoint.ts';

export const POST = accountEndpoint({ run: ({ viewer, params, at }) => finishPhotoUpload(viewer, photoId(params['id']), at) });
