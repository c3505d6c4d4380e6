import { changePhotoSchema, photoId } from '~/schemas/photo.ts';
import { changePhoto } from '~/server/commands/change-photo.ts';
import { removePhoto } from '~/server/commands/remove-photo.ts';
import { accountEndpoint } from '~/server/http/endpoint.ts';

export const PATCH = accountEndpoint({ body: changePhotoSchema, run: ({ viewer, params, body }) => changePhoto(viewer, photoId(params['id']), body) });

export const DELETE = accountEndpoint({ run: ({ viewer, params, at }) => removePhoto(viewer, photoId(params['id']), at) });
