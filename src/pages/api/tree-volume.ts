import { treeVolume } from '~/domain/timber/tree-volume.ts';
import { treeVolumeRequest } from '~/schemas/tree-volume.ts';
import { valueOf } from '~/server/errors.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';

export const POST = openEndpoint({ body: treeVolumeRequest, run: async ({ body }) => valueOf(treeVolume(body)) });
