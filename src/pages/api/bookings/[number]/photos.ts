import { beginDayPhotoSchema } from '~/schemas/day-photo.ts';
import { beginDayPhoto } from '~/server/commands/begin-day-photo.ts';
import { Refusal } from '~/server/errors.ts';
import { accountEndpoint } from '~/server/http/endpoint.ts';

/** Begins the upload of a photograph of the milling day. */
export const POST = accountEndpoint({
  body: beginDayPhotoSchema,
  run({ viewer, params, body, at }) {
    if (body.account !== undefined && body.account !== viewer.id) throw new Refusal('signedOut', 'This photograph was taken under another account. Sign in as the one that took it.');
    return beginDayPhoto(viewer, Number(params['number']), body, at);
  },
});
